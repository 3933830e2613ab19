"""The drawn parts of a section as conforming faces in gmsh's geometry kernel, each face belonging to one part.

Coordinates go in scaled by a power of two, so that the section is 64 to 128 across: the kernel's tolerance is an
absolute 1e-7, and a power of two leaves every coordinate as it was typed.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import pairwise
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import Fault, InputError, MeshingError
from xsec_fem.model.crossings import first_crossing
from xsec_fem.model.outline import Arc, Face, Line, Loop, Point, Segment
from xsec_fem.model.section import Part, Section

FloatArray = npt.NDArray[np.float64]

_FAR = 16.0  # a section farther from the origin than this many diameters is shifted there
_WIDTH = (
    1e-3  # gmsh's units: a band along the outlines, ten times the width of the gaps that are closed, may change hands
)
_QUARTER = 90.0  # degrees: the kernel takes arcs below 180 only, and a quarter keeps symmetric outlines symmetric


@dataclass(frozen=True)
class Frame:
    """Shift and scale between the file's axes and gmsh's: x_gmsh = (x_file - shift) * factor."""

    shift: tuple[float, float]
    factor: float

    @classmethod
    def around(cls, low: FloatArray, high: FloatArray) -> Frame:
        """Return the frame for the bounding box from `low` (2,) to `high` (2,) [mm]; MeshingError when it has no extent."""
        diameter = float(np.hypot(*(high - low)))
        if not (math.isfinite(diameter) and diameter > 0):
            raise MeshingError(f"the section has no extent: it reaches from {low.tolist()} to {high.tolist()}")
        centre = (low + high) / 2
        far = float(np.hypot(*centre)) > _FAR * diameter
        shift = (float(centre[0]), float(centre[1])) if far else (0.0, 0.0)
        return cls(shift, 2.0 ** (7 - math.frexp(diameter)[1]))

    def to_gmsh(self, points: FloatArray) -> FloatArray:
        """Return points (n, 2) in the file's axes [mm] in gmsh's, same shape."""
        return (np.asarray(points, float) - self.shift) * self.factor

    def from_gmsh(self, points: FloatArray) -> FloatArray:
        """Return points (n, 2) in gmsh's axes in the file's, same shape [mm]."""
        return points / self.factor + self.shift


@dataclass(frozen=True)
class Geometry:
    """Faces in the current gmsh model: `faces` (tag, index of part), the frame, and the parts' names."""

    faces: tuple[tuple[int, int], ...]
    frame: Frame
    part_names: tuple[str, ...]


def build_geometry(gmsh: Any, section: Section, split_points: Sequence[Point] = ()) -> Geometry:
    """Draw the parts of the section in the current gmsh model and return its conforming faces.

    `split_points` are points (y, z) [mm] that become vertices, so that the mesh has a node there. Raises MeshingError when
    two parts overlap, InputError when an embedded part lies outside its host.
    """
    _check_outlines(section)
    frame = section_frame(section)
    drawn = [gmsh_face(gmsh, part.face, frame) for part in section.parts if part.face is not None]
    claims = _fragments(gmsh, drawn, [_point(gmsh, p, frame) for p in split_points])
    _check_areas(gmsh, section, claims, frame)
    gmsh.model.occ.synchronize()
    faces = _owners(gmsh, section, claims, frame)
    return Geometry(faces, frame, tuple(part.name for part in section.parts))


def section_frame(section: Section) -> Frame:
    """Return the frame around all drawn parts of the section; MeshingError when they have no extent."""
    bounds = np.array([part.face.bounds() for part in section.parts if part.face is not None])
    return Frame.around(bounds[:, :2].min(axis=0), bounds[:, 2:].max(axis=0))


def gmsh_face(gmsh: Any, face: Face, frame: Frame) -> int:
    """Draw one face in the kernel and return its tag; all its loops go in counter-clockwise, as gmsh wants them."""
    loops = [loop if loop.ccw else loop.reversed() for loop in face.loops]
    wires = [gmsh.model.occ.addCurveLoop(_curves(gmsh, loop, frame)) for loop in loops]
    return int(gmsh.model.occ.addPlaneSurface(wires))


def _point(gmsh: Any, point: Point, frame: Frame) -> int:
    y, z = frame.to_gmsh(np.array(point)).tolist()
    return int(gmsh.model.occ.addPoint(y, z, 0.0))


def _curves(gmsh: Any, loop: Loop, frame: Frame) -> list[int]:
    """Draw the segments of one loop, consecutive ones sharing their vertex."""
    pieces = [piece for segment in loop.segments for piece in _quarters(segment)]
    corners = [_point(gmsh, piece.start, frame) for piece in pieces]
    return [
        _curve(gmsh, piece, start, end, frame)
        for piece, start, end in zip(pieces, corners, corners[1:] + corners[:1], strict=True)
    ]


def _curve(gmsh: Any, segment: Segment, start: int, end: int, frame: Frame) -> int:
    occ = gmsh.model.occ
    if isinstance(segment, Line):
        return int(occ.addLine(start, end))
    helpers = [_point(gmsh, segment.centre, frame)]
    if isinstance(segment, Arc):
        tag = occ.addCircleArc(start, helpers[0], end)
    else:
        half = segment.major if segment.ratio <= 1 else (-segment.major[1], segment.major[0])
        helpers.append(_point(gmsh, (segment.centre[0] + half[0], segment.centre[1] + half[1]), frame))
        tag = occ.addEllipseArc(start, helpers[0], helpers[1], end)
    occ.remove([(0, helper) for helper in helpers])
    return int(tag)


def _quarters(segment: Segment) -> list[Segment]:
    """Cut an arc evenly into pieces no longer than a quarter turn."""
    points = [*segment.polyline(_QUARTER), segment.end]
    return [replace(segment, start=start, end=end) for start, end in pairwise(points)]


def _fragments(gmsh: Any, drawn: list[int], points: list[int]) -> dict[int, list[int]]:
    """Make the faces conforming; return for each piece the parts that claim it, in the order of the parts."""
    if len(drawn) == 1 and not points:
        return {drawn[0]: [0]}
    objects, tools = [(2, tag) for tag in drawn], [(0, tag) for tag in points]
    _, pieces_of = gmsh.model.occ.fragment(objects[:1], objects[1:] + tools)
    claims: dict[int, list[int]] = {}
    for part, pieces in enumerate(pieces_of[: len(drawn)]):
        for dim, tag in pieces:
            if dim == 2 and part not in claims.setdefault(tag, []):
                claims[tag].append(part)
    return dict(sorted(claims.items()))


def _check_outlines(section: Section) -> None:
    """Raise MeshingError for an outline that crosses or touches itself: gmsh may never come back from one."""
    for part in section.parts:
        place = first_crossing(part.face.loops) if part.face is not None else None
        if place is not None:
            raise MeshingError(
                f"part {part.name!r}: its outline crosses or touches itself or a hole at ({place[0]:.6g}, {place[1]:.6g})"
            )


def _check_areas(gmsh: Any, section: Section, claims: dict[int, list[int]], frame: Frame) -> None:
    """The pieces of each part must make up the area of its outline: the kernel takes a hole outside without a word."""
    found = np.zeros(len(section.parts))
    for tag, parts in claims.items():
        found[parts] += gmsh.model.occ.getMass(2, tag) / frame.factor**2
    for part, area in zip(section.parts, found, strict=True):
        face = part.face
        if face is not None and abs(area - face.area) > _WIDTH / frame.factor * sum(loop.length for loop in face.loops):
            raise MeshingError(
                f"part {part.name!r}: its outline less its holes has an area of {face.area:.6g} {section.units.length}², "
                f"but gmsh makes {area:.6g} of it. A hole lies outside it or in another hole"
            )


def _owners(gmsh: Any, section: Section, claims: dict[int, list[int]], frame: Frame) -> tuple[tuple[int, int], ...]:
    """Give every piece to one part: the innermost of those embedded in each other; two claims are an overlap."""
    index = {part.name: k for k, part in enumerate(section.parts)}
    outer = [hosts(section, part, index) for part in section.parts]
    faces: list[tuple[int, int]] = []
    overlaps: dict[tuple[int, int], list[int]] = {}
    for tag, parts in claims.items():
        inner = [part for part in parts if not any(part in outer[other] for other in parts)]
        faces.append((tag, inner[0]))
        if len(inner) > 1:
            overlaps.setdefault((inner[0], inner[1]), []).append(tag)
    _check_overlaps(gmsh, section, overlaps, frame)
    _check_embedded(section, claims, index)
    owned = {part for _, part in faces}
    for part, outline in enumerate(section.parts):
        if part not in owned:
            raise MeshingError(f"part {outline.name!r} is wholly displaced by the parts embedded in it")
    return tuple(faces)


def hosts(section: Section, part: Part, index: dict[str, int]) -> set[int]:
    """Return the indices of the parts that a part displaces: its host, the host's host and so on."""
    found: set[int] = set()
    name = part.embedded_in
    while name in index and index[name] not in found:
        found.add(index[name])
        name = section.parts[index[name]].embedded_in
    return found


def _check_overlaps(gmsh: Any, section: Section, overlaps: dict[tuple[int, int], list[int]], frame: Frame) -> None:
    messages = []
    for (first, second), tags in overlaps.items():
        area = sum(gmsh.model.occ.getMass(2, tag) for tag in tags) / frame.factor**2
        y, z = frame.from_gmsh(np.array(gmsh.model.occ.getCenterOfMass(2, tags[0])[:2]))
        names = f"{section.parts[first].name!r} and {section.parts[second].name!r}"
        messages.append(f"parts {names} overlap by {area:.6g} {section.units.length}² at ({y:.6g}, {z:.6g})")
    if messages:
        raise MeshingError("; ".join(messages) + '. Move one of them, or say embedded_in = "..." in the inner one')


def _check_embedded(section: Section, claims: dict[int, list[int]], index: dict[str, int]) -> None:
    """An embedded part must share a piece with its host."""
    faults = []
    for part in section.parts:
        if part.embedded_in is None:
            continue
        host = index.get(part.embedded_in)
        if host is None or not any(host in parts and index[part.name] in parts for parts in claims.values()):
            faults.append(
                Fault(
                    str(section.path or ""), f'part "{part.name}": embedded_in', "must name a part that it lies in",
                    repr(part.embedded_in), "Check its position, or leave embedded_in out",
                )
            )  # fmt: skip
    if faults:
        raise InputError(faults)
