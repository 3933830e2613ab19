"""Fillet weld beads: a triangle at each welded end of a faying line, with equal legs on the two free faces.

       first side's face           throat a = leg cos(phi/2): from the root to the middle of the surface.
------root-----------toe           A penetration p moves the root by p into the faying line and adds about p cos(phi/2).
  p    | \\  phi      /
       |    \\ a   /                (EN 1993-1-8:2005, 4.5.2: the throat is the height of the largest triangle
second |      \\ /                  within the fusion faces and the surface, to the side of the surface)
side's |    /   surface
face   |  /
      toe
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from xsec_fem.model.faults import FaultList
from xsec_fem.model.faying import MATCH, FayingLine, FreeEnd, free_end
from xsec_fem.model.flat_parts import Scale
from xsec_fem.model.outline import Face, Point, polygon_loop
from xsec_fem.model.section import Bond, FilletWeld, Joint, Part
from xsec_fem.model.wording import number_text, point_text, quoted

# A fillet can be laid between these angles [deg]. EN 1993-1-8:2005, 4.3.2.1 has 60 to 120 deg for full use; the wider bounds here
# are those at which a triangle still stands for a bead (own choice).
NARROWEST, WIDEST = 30.0, 150.0
_ENDS = {False: ("left", "right"), True: ("bottom", "top")}


@dataclass(frozen=True)
class Bead:
    """A bead's part, the bond it makes, and the points of the faying line where the mesh needs a node."""

    part: Part
    bond: Bond
    vertices: tuple[Point, ...]


def weld_beads(
    joint: Joint, place: str, lines: Sequence[FayingLine], parts: Mapping[str, Part], scale: Scale, faults: FaultList
) -> list[Bead]:
    """Return the beads of a weld, named "<joint> bead 1" and on, along its lines from left to right; faults noted."""
    if joint.weld is None:
        raise ValueError(f"joint {joint.name!r} of kind {joint.kind!r} has no weld")
    faces = {name: part.face for name, part in parts.items() if part.face is not None}
    same = MATCH * scale.size
    ends = [end for line in lines for end in _welded_ends(joint.weld, place, line, faces, scale, faults)]
    taken, beads = set(parts), []
    for number, end in enumerate(ends, start=1):
        name = _free_name(f"{joint.name} bead {number}", taken)
        taken.add(name)
        if _fits(joint.weld, end, place, scale, faults):
            beads.append(_bead(joint, end, f"bead {number}", name, parts))
    for line in lines:
        _check_penetration(joint.weld, place, line, [end for end in ends if _on(line, end, same)], scale, faults)
    return beads


def _on(line: FayingLine, end: FreeEnd, same: float) -> bool:
    return min(math.dist(end.at, line.start), math.dist(end.at, line.end)) <= same


def _welded_ends(
    weld: FilletWeld, place: str, line: FayingLine, faces: Mapping[str, Face], scale: Scale, faults: FaultList
) -> list[FreeEnd]:
    """The ends of one faying line that are welded, left or bottom first."""
    same = MATCH * scale.size
    where = point_text(line.start, scale.size)
    if math.dist(line.start, line.end) <= same:
        faults.add(place, f"has faces that touch all round from {where}: there is no end to weld", None, _USE_GLUE)
        return []
    forward = (line.start < line.end) if not line.steep else (line.start[1] < line.end[1])
    both = [free_end(line, faces, at_start, same) for at_start in ((True, False) if forward else (False, True))]
    names = _ENDS[line.steep]
    open_ends = [end for end in both if NARROWEST <= math.degrees(end.phi) <= WIDEST]
    found = f"the faces between {point_text(both[0].at, scale.size)} and {point_text(both[1].at, scale.size)}"
    angles = " and ".join(
        f"{math.degrees(end.phi):.0f} deg at the {name}" for end, name in zip(both, names, strict=True)
    )
    if weld.sides in names:
        chosen = both[names.index(str(weld.sides))]
        if chosen in open_ends:
            return [chosen]
        rule = f"cannot be {quoted(str(weld.sides))} for {found}: the angle there is {math.degrees(chosen.phi):.0f} deg"
        faults.add(f"{place}: sides", rule, None, _ANGLE_RULE)
    elif isinstance(weld.sides, str):
        rule = f"must be {quoted(names[0])} or {quoted(names[1])} for {found}"
        faults.add(f"{place}: sides", rule, quoted(weld.sides), "Or split the joint in two.")
    elif len(open_ends) < weld.sides:
        rule = f"is {weld.sides}, but {found} leave room for {len(open_ends)}: the angles are {angles}"
        faults.add(f"{place}: sides", rule, None, _ANGLE_RULE)
    elif len(open_ends) > weld.sides:
        rule = f"is 1, but {found} can be welded at both ends"
        faults.add(f"{place}: sides", rule, None, f"Write sides = {quoted(names[0])} or {quoted(names[1])}, or 2.")
    else:
        return open_ends
    return []


_USE_GLUE = 'A joint fused over its full width is kind = "glue".'
_ANGLE_RULE = f"A fillet needs an angle of {NARROWEST:.0f} to {WIDEST:.0f} deg between the free faces."


def _fits(weld: FilletWeld, end: FreeEnd, place: str, scale: Scale, faults: FaultList) -> bool:
    """False, and the fault noted, when a leg is longer than the straight face it lies on."""
    leg = leg_of(weld, end.phi)
    lengths = {end.first_part: end.first_length, end.second_part: end.second_length}
    short = min(lengths, key=lambda name: lengths[name])
    if leg <= lengths[short] + MATCH * scale.size:
        return True
    unit = f" {faults.units.length}" if faults.units else ""
    where = point_text(end.at, scale.size)
    if lengths[short] == 0.0:
        rule = f"meets a curved face of {quoted(short)} at {where}: the legs of a fillet weld lie on straight faces"
        faults.add(place, rule, None, "Draw the weld as a part, and leave the joint between the two sides as contact.")
    else:
        rule = (
            f"has a leg of {leg:.4g}{unit}, longer than the straight face of {quoted(short)} at {where}, which is "
            f"{lengths[short]:.4g}{unit}"
        )
        faults.add(place, rule, None, "Make the weld smaller, or weld the other side.")
    return False


def leg_of(weld: FilletWeld, phi: float) -> float:
    """Return the leg of a weld between faces at the angle phi [rad]; throat = leg cos(phi/2) [mm].

    Source: EN 1993-1-8:2005, 4.5.2 (throat), the leg derived here.
    """
    return weld.leg if weld.leg is not None else (weld.throat or 0.0) / math.cos(phi / 2)


def _check_penetration(
    weld: FilletWeld, place: str, line: FayingLine, ends: Sequence[FreeEnd], scale: Scale, faults: FaultList
) -> None:
    """The penetrations must leave a slit, and end on the straight stretch where they start."""
    if not weld.penetration or not ends:
        return
    unit = f" {faults.units.length}" if faults.units else ""
    got = f"{number_text(weld.penetration)}{unit}"
    if len(ends) * weld.penetration >= line.length - MATCH * scale.size:
        from_ends = "the two ends together" if len(ends) == 2 else "the end"
        rule = f"must leave an unfused root: the faces touch along {line.length:.6g}{unit}, fused from {from_ends}"
        faults.add(f"{place}: penetration", rule, got, _USE_GLUE)
        return
    for end in ends:
        run = next((r for r in line.straight_runs(MATCH * scale.size) if end.at in (r.start, r.end)), None)
        if run is None or run.length < weld.penetration:
            rule = f"reaches past the straight stretch of the faces at {point_text(end.at, scale.size)}"
            faults.add(f"{place}: penetration", rule, got, "Make it smaller.")


def _bead(joint: Joint, end: FreeEnd, short_name: str, name: str, parts: Mapping[str, Part]) -> Bead:
    weld = joint.weld or FilletWeld()
    leg, depth = leg_of(weld, end.phi), weld.penetration
    toes = (_along(end.at, end.first, leg), _along(end.at, end.second, leg))
    root = _along(end.at, end.inward, depth) if depth else end.at
    strip = (end.at, root) if depth else None
    side = parts[end.first_part]
    corners = [end.at, *toes] if _left(end.first, end.second) else [end.at, *reversed(toes)]
    part = Part(name, weld.material or side.material, "weld bead", Face(polygon_loop(corners)), bead_of=joint.name)
    if weld.material is None:
        part = replace(part, grain_angle=side.grain_angle)
    bond = Bond(short_name, strip, name, (root, _nearest(root, *toes)), leg, math.degrees(end.phi))
    return Bead(part, bond, (root,) if depth else ())


def _along(point: Point, direction: Point, distance: float) -> Point:
    return (point[0] + distance * direction[0], point[1] + distance * direction[1])


def _left(one: Point, other: Point) -> bool:
    return one[0] * other[1] - one[1] * other[0] > 0


def _nearest(point: Point, start: Point, end: Point) -> Point:
    """The point of a segment nearest to a point."""
    step = (end[0] - start[0], end[1] - start[1])
    share = ((point[0] - start[0]) * step[0] + (point[1] - start[1]) * step[1]) / (step[0] ** 2 + step[1] ** 2)
    return _along(start, step, min(1.0, max(0.0, share)))


def _free_name(name: str, taken: set[str]) -> str:
    free, count = name, 1
    while free in taken:
        count += 1
        free = f"{name} ({count})"
    return free
