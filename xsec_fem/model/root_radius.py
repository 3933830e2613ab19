"""A section with given sharp corners rounded: what a root radius would do."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import replace

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.outline import Face, Line, Loop, Point, Segment
from xsec_fem.model.rounding import Corner, rounded_polyline, tangent_factor
from xsec_fem.model.section import Part, Section

_SAME_PLACE = 1e-9  # of the loop's size: places come back from the mesh with round-off


def with_root_radius(section: Section, radius: float, places: Sequence[Point]) -> Section:
    """Return the section with the corners at the places, shape (n, 2) [mm], rounded with a radius [mm].

    A corner is rounded wherever two straight sides of one part meet there. Raises InputError, one fault a corner, where the
    radius does not fit beside it.
    """
    faults: list[Fault] = []
    parts = tuple(_rounded_part(part, radius, places, section, faults) for part in section.parts)
    if faults:
        raise InputError(faults)
    return replace(section, parts=parts)


def _rounded_part(part: Part, radius: float, places: Sequence[Point], section: Section, faults: list[Fault]) -> Part:
    if part.face is None:
        return part
    loops = [_rounded(loop, radius, places, part.name, section, faults) for loop in part.face.loops]
    return replace(part, face=Face(loops[0], tuple(loops[1:])))


def _rounded(
    loop: Loop, radius: float, places: Iterable[Point], name: str, section: Section, faults: list[Fault]
) -> Loop:
    segments: list[Segment] = list(loop.segments)
    low_y, low_z, high_y, high_z = loop.bounds()
    near = _SAME_PLACE * math.hypot(high_y - low_y, high_z - low_z)
    for place in places:
        for i, first in enumerate(segments):
            second = segments[(i + 1) % len(segments)]
            if isinstance(first, Line) and isinstance(second, Line) and math.dist(first.end, place) <= near:
                _replace_corner(segments, i, radius, name, section, faults)
                break
    return Loop(tuple(segments))


def _replace_corner(
    segments: list[Segment], i: int, radius: float, name: str, section: Section, faults: list[Fault]
) -> None:
    """Put an arc between line i and the next one, in place; a fault when it does not fit."""
    j = (i + 1) % len(segments)
    start, corner, end = segments[i].start, segments[i].end, segments[j].end
    reach = tangent_factor(start, corner, end)
    room = min(math.dist(start, corner), math.dist(corner, end))
    if radius * reach >= room:
        most = room / reach
        at = f"({corner[0]:g}, {corner[1]:g})"
        rule = f'must fit the corner of part "{name}" at {at}: below {most:.4g}'
        file = section.path.name if section.path else ""
        faults.append(Fault(file, "solve: try_radius", rule, f"{radius:g}", f"Give less than {most:.4g}"))
        return
    rounded = rounded_polyline([Corner(start), Corner(corner, radius), Corner(end)])
    if j == 0:  # the corner is where the loop closes
        segments[i:] = rounded[:-1]
        segments[0] = rounded[-1]
    else:
        segments[i : j + 1] = rounded
