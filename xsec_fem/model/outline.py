"""Outlines: closed loops of lines and arcs, and faces (one outer loop, any holes).

                end = start of the next segment
      -----------o
     |  Line      \\   Arc: circular, about `centre`, counter-clockwise when `ccw`
     o-------------o  EllipseArc: the same on an ellipse with half axis `major` and ratio minor/major

Outer loops and holes may run either way round; `Loop.area` is positive when counter-clockwise. y to the right, z up.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

Point = tuple[float, float]
FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Isometry:
    """A rotation or reflection and a shift: x -> matrix @ x + shift, matrix (2, 2) orthogonal, rows as tuples."""

    matrix: tuple[Point, Point] = ((1.0, 0.0), (0.0, 1.0))
    shift: Point = (0.0, 0.0)

    @classmethod
    def rotation(cls, degrees: float) -> Isometry:
        """Counter-clockwise rotation about the origin, exact at multiples of 90 deg."""
        quarter, rest = divmod(degrees, 90.0)
        c, s = (1.0, 0.0) if rest == 0 else (math.cos(math.radians(rest)), math.sin(math.radians(rest)))
        for _ in range(int(quarter) % 4):
            c, s = -s, c
        return cls(((c, -s), (s, c)))

    @classmethod
    def mirror(cls, axis: str) -> Isometry:
        """mirror = "y" flips the sign of y, "z" that of z."""
        return cls(((-1.0, 0.0), (0.0, 1.0)) if axis == "y" else ((1.0, 0.0), (0.0, -1.0)))

    @classmethod
    def translation(cls, shift: Point) -> Isometry:
        """Shift by (y, z)."""
        return cls(shift=shift)

    @property
    def keeps_orientation(self) -> bool:
        """False when the map contains a reflection."""
        (a, b), (c, d) = self.matrix
        return a * d - b * c > 0

    def vector(self, v: Point) -> Point:
        """Turn a direction, shape (2,), without the shift."""
        (a, b), (c, d) = self.matrix
        return (a * v[0] + b * v[1], c * v[0] + d * v[1])

    def __call__(self, p: Point) -> Point:
        y, z = self.vector(p)
        return (y + self.shift[0], z + self.shift[1])

    def then(self, after: Isometry) -> Isometry:
        """Return the map that does this one first and `after` second."""
        c0, c1 = (after.vector((row[0], row[1])) for row in zip(*self.matrix, strict=True))
        return Isometry(((c0[0], c1[0]), (c0[1], c1[1])), after(self.shift))


@dataclass(frozen=True)
class Line:
    """A straight segment."""

    start: Point
    end: Point

    def moved(self, move: Isometry) -> Line:
        """Return the segment after an isometry."""
        return Line(move(self.start), move(self.end))

    def polyline(self, max_deg: float) -> list[Point]:
        """Points from the start up to, not including, the end (only the start here)."""
        return [self.start]


@dataclass(frozen=True)
class Arc:
    """A circular arc about `centre` from `start` to `end` (never a full circle; at most 180 deg by convention)."""

    start: Point
    end: Point
    centre: Point
    ccw: bool

    @property
    def radius(self) -> float:
        """Radius, from the start point [mm]."""
        return math.dist(self.start, self.centre)

    @property
    def sweep(self) -> float:
        """Signed angle from start to end, positive counter-clockwise [rad], in (0, 2 pi) for ccw."""
        a0, a1 = (math.atan2(p[1] - self.centre[1], p[0] - self.centre[0]) for p in (self.start, self.end))
        turn = (a1 - a0) % (2 * math.pi)
        return turn if self.ccw else turn - 2 * math.pi

    def moved(self, move: Isometry) -> Arc:
        """Return the arc after an isometry; a reflection turns its direction round."""
        return Arc(move(self.start), move(self.end), move(self.centre), self.ccw == move.keeps_orientation)

    def polyline(self, max_deg: float) -> list[Point]:
        """Points on the arc, the end left out, no more than `max_deg` apart."""
        n = max(1, math.ceil(abs(math.degrees(self.sweep)) / max_deg - 1e-9))
        a0 = math.atan2(self.start[1] - self.centre[1], self.start[0] - self.centre[0])
        (cy, cz), r = self.centre, self.radius
        angles = [a0 + self.sweep * k / n for k in range(1, n)]
        return [self.start] + [(cy + r * math.cos(a), cz + r * math.sin(a)) for a in angles]


@dataclass(frozen=True)
class EllipseArc:
    """An arc of an ellipse: `major` is the half-axis vector, `ratio` = minor/major, at most 180 deg by convention."""

    start: Point
    end: Point
    centre: Point
    major: Point
    ratio: float
    ccw: bool

    def _parameter(self, p: Point) -> float:
        length = math.hypot(*self.major)
        ey = (self.major[0] / length, self.major[1] / length)
        d = (p[0] - self.centre[0], p[1] - self.centre[1])
        along, across = d[0] * ey[0] + d[1] * ey[1], d[1] * ey[0] - d[0] * ey[1]
        return math.atan2(across / self.ratio, along)

    def moved(self, move: Isometry) -> EllipseArc:
        """Return the arc after an isometry; a reflection turns its direction round."""
        return EllipseArc(
            move(self.start), move(self.end), move(self.centre), move.vector(self.major), self.ratio,
            self.ccw == move.keeps_orientation,
        )  # fmt: skip

    def polyline(self, max_deg: float) -> list[Point]:
        """Points on the arc, the end left out, no more than `max_deg` of the parameter apart."""
        t0, t1 = self._parameter(self.start), self._parameter(self.end)
        sweep = (t1 - t0) % (2 * math.pi) - (0.0 if self.ccw else 2 * math.pi)
        n = max(1, math.ceil(abs(math.degrees(sweep)) / max_deg - 1e-9))
        (my, mz), k = self.major, self.ratio
        points = [self.start]
        for i in range(1, n):
            c, s = math.cos(t0 + sweep * i / n), math.sin(t0 + sweep * i / n)
            points.append((self.centre[0] + my * c - k * mz * s, self.centre[1] + mz * c + k * my * s))
        return points


Segment = Line | Arc | EllipseArc


@dataclass(frozen=True)
class Loop:
    """A closed loop: segment k ends where segment k+1 starts, the last where the first starts."""

    segments: tuple[Segment, ...]

    def polyline(self, max_deg: float = 3.0) -> FloatArray:
        """Return the loop as points, shape (n, 2), closing point not repeated; arcs cut every `max_deg` degrees."""
        return np.array([p for segment in self.segments for p in segment.polyline(max_deg)], dtype=np.float64)

    def moved(self, move: Isometry) -> Loop:
        """Return the loop after an isometry."""
        return Loop(tuple(segment.moved(move) for segment in self.segments))


@dataclass(frozen=True)
class Face:
    """A flat region: one outer loop less any holes."""

    outer: Loop
    holes: tuple[Loop, ...] = ()

    @property
    def loops(self) -> tuple[Loop, ...]:
        """The outer loop first, then the holes."""
        return (self.outer, *self.holes)

    def moved(self, move: Isometry) -> Face:
        """Return the face after an isometry."""
        return Face(self.outer.moved(move), tuple(hole.moved(move) for hole in self.holes))

    def bounds(self) -> tuple[float, float, float, float]:
        """Return (y min, z min, y max, z max) of the outer loop."""
        low, high = self.outer.polyline(1.0).min(axis=0), self.outer.polyline(1.0).max(axis=0)
        return (float(low[0]), float(low[1]), float(high[0]), float(high[1]))


def polygon_loop(points: Sequence[Point]) -> Loop:
    """Return the loop of straight lines through the points (n, 2), n >= 3; the last joins the first."""
    n = len(points)
    return Loop(tuple(Line(points[k], points[(k + 1) % n]) for k in range(n)))
