"""Corners where the stress grows without limit: angle, exponent, what was read beside them, and what a root radius does."""

from __future__ import annotations

from xsec_fem.recovery.corners import Corner
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.numbers import number, point
from xsec_fem.report.wording import section_size
from xsec_fem.results import CaseResult, Result
from xsec_fem.units import UnitSystem


def intensity_unit(exponent: float, units: UnitSystem) -> str:
    """Return the unit of K in |tau| = K r^exponent, for example "MPa mm^0.333"."""
    return f"{units.stress} {units.length}^{-exponent:.3f}"


def corner_blocks(result: Result) -> list[Block]:
    """Return the list of singular corners [mm, deg] and, when a root radius was tried, what became of the largest stresses."""
    if not result.corners:
        return []
    length, size = result.section.units.length, section_size(result)
    rows = tuple(
        (
            point(corner.y, corner.z, size), number(corner.angle_deg, 4), f"{corner.exponent:.3f}",
            number(corner.distance, 3), " | ".join(corner.parts),
        )
        for corner in result.corners
    )  # fmt: skip
    header = (f"at (y, z) [{length}]", "angle [deg]", "exponent [-]", f"not read within [{length}]", "parts")
    heading = Heading("Corners where the stress grows without limit")
    return [heading, Table(header, rows, "lrrrl"), *rounded_blocks(result)]


def corner_readings(result: Result, case: CaseResult) -> list[Block]:
    """Return |tau| at the stated distance and K of every singular corner under one case [MPa, mm]."""
    if not case.corners:
        return []
    units, size = result.section.units, section_size(result)
    rows = tuple(
        (
            point(corner.y, corner.z, size), number(reading.distance, 3),
            "-" if reading.tau is None else number(reading.tau, scale=case.tau_max.value),
            "-" if reading.intensity is None else _intensity(reading.intensity, corner, units),
        )
        for corner, reading in zip(result.corners, case.corners, strict=True)
    )  # fmt: skip
    header = (
        f"corner at (y, z) [{units.length}]", f"read at r = [{units.length}]", f"|tau| there [{units.stress}]",
        "K of |tau| = K r^exponent",
    )  # fmt: skip
    return [Heading("corners without limit", 3), Table(header, rows, "lrrr")]


def _intensity(K: float, corner: Corner, units: UnitSystem) -> str:
    return f"{number(K, 4)} {intensity_unit(corner.exponent, units)}"


def rounded_blocks(result: Result) -> list[Block]:
    """Return the largest |tau| of every case with the root radius of [solve] try_radius, beside that without [MPa]."""
    rounded = result.rounded
    if rounded is None:
        return []
    units, size = result.section.units, section_size(result)
    radius = f"{number(result.section.solve.try_radius or 0.0)} {units.length}"
    lines = []
    for sharp, smooth in zip(result.cases, rounded.cases, strict=True):
        largest, before = smooth.tau_max, sharp.tau_max
        beside = f", read {number(_nearest(result, sharp), 3)} {units.length} beside a corner" * before.beside_corner
        place = point(largest.y, largest.z, size)
        lines.append(
            f"{sharp.name}: with a root radius of {radius}: largest |tau| {number(largest.value)} {units.stress} at {place} "
            f"{units.length} in {largest.part}, instead of {number(before.value)} {units.stress} with sharp corners{beside}"
        )
    lines.append(
        f"IT with the radius: {number(rounded.properties.IT)} {units.power(4)} instead of "
        f"{number(result.properties.IT)} {units.power(4)}"
    )
    return [Heading(f"Tried: a root radius of {radius} at every sharp corner"), Lines(tuple(lines))]


def _nearest(result: Result, case: CaseResult) -> float:
    """Stated distance of the corner nearest to the largest stress [mm]."""
    top = case.tau_max
    return min(result.corners, key=lambda corner: (corner.y - top.y) ** 2 + (corner.z - top.z) ** 2).distance
