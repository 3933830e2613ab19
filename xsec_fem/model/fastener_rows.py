"""Rows of fasteners on a faying line: each holds together a strip as wide as its diameter."""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import pairwise

from xsec_fem.model.faults import FaultList
from xsec_fem.model.faying import MATCH, FayingLine
from xsec_fem.model.flat_parts import Scale
from xsec_fem.model.outline import Line, Point
from xsec_fem.model.section import Bond, Joint
from xsec_fem.model.wording import number_text, point_text


def fastener_rows(joint: Joint, place: str, lines: Sequence[FayingLine], scale: Scale, faults: FaultList) -> list[Bond]:
    """Return the strips of the rows of a joint along its faying lines [mm]; every fault is noted in `faults`.

    A row's position is y on lines within 45 degrees of level, z on steeper ones.
    """
    if joint.fasteners is None:
        raise ValueError(f"joint {joint.name!r} of kind {joint.kind!r} has no fasteners")
    runs = [run for line in lines for run in line.straight_runs(MATCH * scale.size)]
    bonds: list[Bond] = []
    strips: list[list[tuple[float, float]]] = [[] for _ in runs]
    for k, row in enumerate(joint.fasteners.rows):
        hits = [(n, at) for n, run in enumerate(runs) if (at := _position(run, row)) is not None]
        if not hits:
            _note_outside(f"{place}: rows[{k}]", row, runs, faults)
        for n, at in hits:
            point = _point(runs[n], at)
            name = f"row {'yz'[_steep(runs[n])]} = {number_text(row)}"
            if len(hits) > 1:
                name += f" at {point_text(point, scale.size)}"
            half = joint.fasteners.diameter / 2
            if at - half < -MATCH * scale.size or at + half > runs[n].length + MATCH * scale.size:
                _note_leaving(f"{place}: rows[{k}]", row, joint.fasteners.diameter, runs[n], faults)
                continue
            strips[n].append((at, row))
            ends = max(at - half, 0.0), min(at + half, runs[n].length)
            bonds.append(Bond(name, (_point(runs[n], ends[0]), _point(runs[n], ends[1]))))
    for found in strips:
        _note_overlaps(place, joint.fasteners.diameter, sorted(found), scale, faults)
    return bonds


def _steep(run: Line) -> bool:
    return abs(run.end[1] - run.start[1]) > abs(run.end[0] - run.start[0])


def _position(run: Line, row: float) -> float | None:
    """Distance from the start of a run to a row; None when the row's coordinate is not on it."""
    axis = int(_steep(run))
    share = (row - run.start[axis]) / (run.end[axis] - run.start[axis])
    return share * run.length if 0.0 <= share <= 1.0 else None


def _point(run: Line, at: float) -> Point:
    share = at / run.length
    (y0, z0), (y1, z1) = run.start, run.end
    return (y0 + share * (y1 - y0), z0 + share * (z1 - z0))


def _range(run: Line) -> str:
    axis = int(_steep(run))
    low, high = sorted((run.start[axis], run.end[axis]))
    return f"{'yz'[axis]} = {number_text(float(f'{low:.6g}'))} to {number_text(float(f'{high:.6g}'))}"


def _note_outside(place: str, row: float, runs: Sequence[Line], faults: FaultList) -> None:
    if not runs:
        faults.add(place, "lies on no straight faying line: the faces touch along curves only", number_text(row))
        return
    unit = f" {faults.units.length}" if faults.units else ""
    where = " and ".join(sorted({_range(run) for run in runs}))
    rule = f"lies outside the faying line, which runs from {where}{unit}"
    remedy = "A row's position is its y, or its z where the faces meet along a line steeper than 45 degrees."
    faults.add(place, rule, f"{number_text(row)}{unit}", remedy)


def _note_leaving(place: str, row: float, diameter: float, run: Line, faults: FaultList) -> None:
    unit = f" {faults.units.length}" if faults.units else ""
    rule = f"has a strip, {number_text(diameter)}{unit} wide, that leaves the faying line, which runs from {_range(run)}{unit}"
    faults.add(place, rule, f"{number_text(row)}{unit}", "Move the row inward by half the diameter or more.")


def _note_overlaps(
    place: str, diameter: float, found: Sequence[tuple[float, float]], scale: Scale, faults: FaultList
) -> None:
    """Strips of rows (distance along the run, position) that overlap; touching ones leave no slit between them either."""
    for (at, row), (next_at, next_row) in pairwise(found):
        if math.fsum((next_at, -at)) < diameter + MATCH * scale.size:
            unit = f" {faults.units.length}" if faults.units else ""
            rule = (
                f"must lie more than one diameter apart, but {number_text(row)} and {number_text(next_row)} are "
                f"{next_at - at:.6g}{unit} apart"
            )
            faults.add(f"{place}: rows", rule, None, "Count both rows as one, or give their places.")
