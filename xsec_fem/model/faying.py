"""Faying lines: where the faces of two sides of a joint lie on each other, exactly as their outlines say.

Outlines are walked with the material on the left, so two faces that touch run against each other. A faying line is walked with
the first side on its left:

        first side         u = direction of the line at its end P
    --------------->P----  first side's free face
       faying line  |  \\   the void between the free faces has the angle phi
    second side     |      second side's free face
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

from xsec_fem.model.outline import Arc, EllipseArc, Face, Line, Point, Segment

MATCH = 1e-6  # of the section's size: points nearer than this are one; the mesher closes gaps of this size
_TURN = 2 * math.pi


@dataclass(frozen=True)
class FayingPiece:
    """One segment of a faying line, with the part of either side."""

    segment: Segment
    first: str
    second: str


@dataclass(frozen=True)
class FayingLine:
    """Pieces end to end [mm]."""

    pieces: tuple[FayingPiece, ...]

    @property
    def start(self) -> Point:
        """Where it starts, shape (2,) [mm]."""
        return self.pieces[0].segment.start

    @property
    def end(self) -> Point:
        """Where it ends, shape (2,) [mm]."""
        return self.pieces[-1].segment.end

    @property
    def length(self) -> float:
        """Length along the line [mm]."""
        return math.fsum(piece.segment.length for piece in self.pieces)

    @property
    def steep(self) -> bool:
        """True when it rises by more than it runs sideways."""
        return abs(self.end[1] - self.start[1]) > abs(self.end[0] - self.start[0])

    def straight_runs(self, same: float) -> list[Line]:
        """Return its straight stretches, pieces in one line taken together; `same` is the distance of equal points [mm]."""
        runs: list[Line] = []
        for segment in (piece.segment for piece in self.pieces if isinstance(piece.segment, Line)):
            if runs and math.dist(runs[-1].end, segment.start) <= same and _in_line(runs[-1], segment, same):
                runs[-1] = Line(runs[-1].start, segment.end)
            else:
                runs.append(segment)
        return runs


@dataclass(frozen=True)
class FreeEnd:
    """The end P of a faying line and the free faces that leave it.

    Attributes
    ----------
    at : P.
    inward : unit vector along the faying line, away from P.
    first, second : unit vectors along the free faces of the two sides.
    first_length, second_length : how far those faces run straight [mm]; 0 when they are curved.
    first_part, second_part : names of the parts.
    phi : angle of the void between the faces [rad].
    """

    at: Point
    inward: Point
    first: Point
    second: Point
    first_length: float
    second_length: float
    first_part: str
    second_part: str
    phi: float


def faying_lines(
    faces: Mapping[str, Face], first: Sequence[str], second: Sequence[str], same: float
) -> list[FayingLine]:
    """Return the lines along which parts of `first` touch parts of `second`, from left to right, then bottom to top.

    Points nearer than `same` [mm] are one. Elliptic arcs count where they are equal on both sides.
    """
    pieces = [
        FayingPiece(segment, a, b)
        for a in first
        for b in second
        for one in boundary(faces[a])
        for other in boundary(faces[b])
        for segment in _common(one, other, same)
    ]
    lines = [FayingLine(tuple(chain)) for chain in _chains(pieces, same)]
    return sorted(lines, key=lambda line: min(line.start, line.end))


def boundary(face: Face) -> Iterator[Segment]:
    """Yield the segments of a face, the material on their left."""
    for loop in material_left(face):
        yield from loop


def material_left(face: Face) -> list[tuple[Segment, ...]]:
    """Return the loops of a face as segments, turned so that the material lies on the left."""
    loops = [face.outer if face.outer.ccw else face.outer.reversed()]
    loops += [hole.reversed() if hole.ccw else hole for hole in face.holes]
    return [loop.segments for loop in loops]


def free_end(line: FayingLine, faces: Mapping[str, Face], at_start: bool, same: float) -> FreeEnd:
    """Return one end of a faying line with its free faces; lengths [mm], angles [rad]."""
    piece = line.pieces[0 if at_start else -1]
    point = line.start if at_start else line.end
    # walked with its material on the left, the first side's face leaves the line's end, the second's leaves its start
    first_side = _face_from(faces[piece.first], point, not at_start, same)
    second_side = _face_from(faces[piece.second], point, at_start, same)
    leaving, arriving = (second_side, first_side) if at_start else (first_side, second_side)
    phi = (math.atan2(*leaving[0][::-1]) - math.atan2(*arriving[0][::-1])) % _TURN
    return FreeEnd(
        point, _direction(piece.segment, point, same), first_side[0], second_side[0], first_side[1], second_side[1],
        piece.first, piece.second, phi,
    )  # fmt: skip


def _face_from(face: Face, point: Point, leaves: bool, same: float) -> tuple[Point, float]:
    """Direction and straight length of the face that leaves (or, walked backwards, arrives at) a point of the outline."""
    for loop in material_left(face):
        segments = loop if leaves else tuple(segment.reversed() for segment in reversed(loop))
        for k, segment in enumerate(segments):
            if math.dist(segment.end, point) > same and _distance(segment, point) <= same:
                direction = _direction(segment, point, same)
                return direction, _straight_length([*segments[k:], *segments[:k]], point, same)
    raise ValueError(f"the point {point} is not on the outline")


def _straight_length(segments: Sequence[Segment], point: Point, same: float) -> float:
    """How far the outline runs straight on from a point of its first segment."""
    if not isinstance(segments[0], Line):
        return 0.0
    run = Line(point, segments[0].end)
    for before, after in pairwise(segments):
        if not isinstance(after, Line) or not _in_line(before, after, same):
            break
        run = Line(point, after.end)
    return run.length


def _direction(segment: Segment, point: Point, same: float) -> Point:
    """Unit vector along a segment at a point on it; at its end, backwards."""
    back = math.dist(segment.end, point) <= same
    if back:
        segment = segment.reversed()
    if isinstance(segment, Line):
        y, z = segment.end[0] - segment.start[0], segment.end[1] - segment.start[1]
    elif isinstance(segment, Arc):
        sign = 1.0 if segment.ccw else -1.0
        y, z = -sign * (point[1] - segment.centre[1]), sign * (point[0] - segment.centre[0])
    else:
        import numpy as np

        (y, z) = segment.at(np.zeros(1))[1][0].tolist()
    size = math.hypot(y, z)
    return (y / size, z / size)


def _distance(segment: Segment, point: Point) -> float:
    """Distance of a point from a segment; from an elliptic arc that of its ends."""
    if isinstance(segment, Line):
        along, off = _coordinates(segment, point)
        return math.hypot(off, max(0.0, -along, along - segment.length))
    ends = min(math.dist(point, segment.start), math.dist(point, segment.end))
    if isinstance(segment, EllipseArc) or not 0.0 <= _turned(segment, point) <= abs(segment.sweep):
        return ends
    return abs(math.dist(point, segment.centre) - segment.radius)


def _coordinates(line: Line, point: Point) -> tuple[float, float]:
    """Distances of a point along a line from its start, and to the left of it."""
    u, v = line.end[0] - line.start[0], line.end[1] - line.start[1]
    y, z = point[0] - line.start[0], point[1] - line.start[1]
    return (u * y + v * z) / line.length, (u * z - v * y) / line.length


def _in_line(one: Segment, other: Line, same: float) -> bool:
    """True when two lines that follow each other have one direction."""
    if not isinstance(one, Line):
        return False
    along, off = _coordinates(one, other.end)
    return abs(off) <= same and along > one.length


def _turned(arc: Arc, point: Point) -> float:
    """Angle from the arc's start to a point, in the arc's own sense, from 0 to 2 pi [rad]."""
    c = arc.centre
    turn = math.atan2(point[1] - c[1], point[0] - c[0]) - math.atan2(arc.start[1] - c[1], arc.start[0] - c[0])
    return (turn if arc.ccw else -turn) % _TURN


def _common(one: Segment, other: Segment, same: float) -> list[Segment]:
    """The stretches of `one` that `other` runs along the other way."""
    if isinstance(one, Line) and isinstance(other, Line):
        return _common_line(one, other, same)
    if isinstance(one, Arc) and isinstance(other, Arc):
        return _common_arcs(one, other, same)
    if isinstance(one, EllipseArc) and isinstance(other, EllipseArc):
        ends = max(
            math.dist(one.start, other.end), math.dist(one.end, other.start), math.dist(one.centre, other.centre)
        )
        return [one] if ends <= same and abs(one.length - other.length) <= same else []
    return []


def _common_line(one: Line, other: Line, same: float) -> list[Segment]:
    (a0, off0), (a1, off1) = _coordinates(one, other.end), _coordinates(one, other.start)
    if a1 <= a0:
        return []
    low, high = max(a0, 0.0), min(a1, one.length)
    if high - low <= 10 * same:  # no longer than what the distance of equal points may feign
        return []
    slope = (off1 - off0) / (a1 - a0)
    if max(abs(off0 + slope * (low - a0)), abs(off0 + slope * (high - a0))) > same:
        return []
    # ends are typed points, not computed ones; where both sides end there, the first side's
    return [Line(one.start if a0 <= same else other.end, one.end if a1 >= one.length - same else other.start)]


def _common_arcs(one: Arc, other: Arc, same: float) -> list[Segment]:
    if one.ccw == other.ccw or math.dist(one.centre, other.centre) > same or abs(one.radius - other.radius) > same:
        return []
    near, begin = same / one.radius, _turned(one, other.end)
    found: list[Segment] = []
    for shift in (0.0, -_TURN):
        low, high = max(begin + shift, 0.0), min(begin + shift + abs(other.sweep), abs(one.sweep))
        if high - low > 10 * near:
            start = one.start if begin + shift <= near else other.end
            end = one.end if begin + shift + abs(other.sweep) >= abs(one.sweep) - near else other.start
            found.append(replace(one, start=start, end=end))
    return found


def _chains(pieces: list[FayingPiece], same: float) -> Iterator[list[FayingPiece]]:
    """Pieces put end to end."""
    rest = list(pieces)
    while rest:
        chain = [rest.pop(0)]
        while (following := _meeting(rest, chain[-1].segment.end, False, same)) is not None:
            chain.append(rest.pop(following))
        while (before := _meeting(rest, chain[0].segment.start, True, same)) is not None:
            chain.insert(0, rest.pop(before))
        yield chain


def _meeting(pieces: list[FayingPiece], point: Point, with_end: bool, same: float) -> int | None:
    """Index of the first piece that starts (or ends) at a point."""
    for k, piece in enumerate(pieces):
        if math.dist(piece.segment.end if with_end else piece.segment.start, point) <= same:
            return k
    return None
