"""Outlines: closed loops of lines and arcs, and faces (one outer loop, any holes).

                end = start of the next segment
      -----------o
     |  Line      \\   Arc: circular, about `centre`, counter-clockwise when `ccw`
     o-------------o  EllipseArc: the same on an ellipse with half axis `major` and ratio minor/major

Outer loops and holes may run either way round; `Loop.area` is positive when counter-clockwise. y to the right, z up.
Areas, lengths and bounds are exact for arcs too (no polyline in between). Lengths are in the file's unit, written [mm].
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

Point = tuple[float, float]
FloatArray = npt.NDArray[np.float64]
Box = tuple[float, float, float, float]

_AT_END = 1e-9  # [rad] an extreme this close to an arc's end is that end: the two differ by r*5e-19, below round-off


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
        """Shift by (y, z), shape (2,) [mm]."""
        return cls(shift=shift)

    @property
    def keeps_orientation(self) -> bool:
        """False when the map contains a reflection."""
        (a, b), (c, d) = self.matrix
        return a * d - b * c > 0

    def vector(self, v: Point) -> Point:
        """Turn a direction, shape (2,), without the shift; its length and unit stay."""
        (a, b), (c, d) = self.matrix
        return (a * v[0] + b * v[1], c * v[0] + d * v[1])

    def __call__(self, p: Point) -> Point:
        """Move a point."""
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

    def reversed(self) -> Line:
        """Return the segment walked the other way."""
        return Line(self.end, self.start)

    @property
    def length(self) -> float:
        """Length [mm]."""
        return math.dist(self.start, self.end)

    @property
    def swept_area(self) -> float:
        """Signed area between the segment and the origin, 1/2 integral of (y dz - z dy) [mm2]."""
        return 0.5 * _cross(self.start, self.end)

    def extremes(self) -> list[Point]:
        """Points (n, 2) that span the bounding box, ends included [mm]."""
        return [self.start, self.end]

    def at(self, s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Return points and derivatives by s [mm], both (n, 2), at parameters s (n,) from 0 to 1."""
        step = np.subtract(self.end, self.start)
        return np.asarray(self.start) + s[:, None] * step, np.broadcast_to(step, (len(s), 2)).astype(np.float64)

    def polyline(self, max_deg: float) -> list[Point]:
        """Points (n, 2) from the start up to, not including, the end [mm] (only the start here)."""
        return [self.start]


@dataclass(frozen=True)
class _Sweep:
    """The curve c + u cos t + v sin t for t from `begin` over `turn` [rad], u and v perpendicular half axes."""

    centre: Point
    u: Point
    v: Point
    begin: float
    turn: float

    @classmethod
    def between(cls, start: Point, end: Point, centre: Point, axes: tuple[Point, Point], ccw: bool) -> _Sweep:
        """Find the parameters of the ends; the turn is in (0, 2 pi) when ccw, in (-2 pi, 0) otherwise."""
        (u, v), t = axes, []
        for p in (start, end):
            d = (p[0] - centre[0], p[1] - centre[1])
            t.append(math.atan2(_dot(d, v) / _dot(v, v), _dot(d, u) / _dot(u, u)))
        turn = (t[1] - t[0]) % (2 * math.pi)
        return cls(centre, u, v, t[0], turn if ccw else turn - 2 * math.pi)

    def point(self, t: float) -> Point:
        """Return the point of parameter t."""
        c, s = math.cos(t), math.sin(t)
        return (self.centre[0] + self.u[0] * c + self.v[0] * s, self.centre[1] + self.u[1] * c + self.v[1] * s)

    def polyline(self, start: Point, max_deg: float) -> list[Point]:
        """The start and inner points, no more than `max_deg` of the parameter apart."""
        n = max(1, math.ceil(abs(math.degrees(self.turn)) / max_deg - 1e-9))
        return [start] + [self.point(self.begin + self.turn * k / n) for k in range(1, n)]

    def turning_points(self) -> list[Point]:
        """Inner points where y or z is largest or smallest."""
        found = []
        for k in (0, 1):
            top = math.atan2(self.v[k], self.u[k])
            for t in (top, top + math.pi):
                past = (t - self.begin) % (2 * math.pi) if self.turn > 0 else (self.begin - t) % (2 * math.pi)
                if _AT_END < past < abs(self.turn) - _AT_END:
                    found.append(self.point(t))
        return found

    def swept_area(self, start: Point, end: Point) -> float:
        """1/2 integral of (y dz - z dy): the sector u x v turn / 2 and the triangle of centre and chord."""
        return 0.5 * (_cross(self.u, self.v) * self.turn + _cross(self.centre, (end[0] - start[0], end[1] - start[1])))

    def at(self, s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Points and derivatives by s, both (n, 2), at parameters s (n,) from 0 to 1."""
        t = (self.begin + self.turn * s)[:, None]
        u, v = np.asarray(self.u), np.asarray(self.v)
        points: FloatArray = np.asarray(self.centre) + np.cos(t) * u + np.sin(t) * v
        return points, self.turn * (np.cos(t) * v - np.sin(t) * u)


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
    def _swept(self) -> _Sweep:
        axes = ((self.radius, 0.0), (0.0, self.radius))
        return _Sweep.between(self.start, self.end, self.centre, axes, self.ccw)

    @property
    def sweep(self) -> float:
        """Signed angle from start to end, positive counter-clockwise [rad], in (0, 2 pi) for ccw."""
        return self._swept.turn

    @property
    def length(self) -> float:
        """Length [mm]."""
        return self.radius * abs(self.sweep)

    @property
    def swept_area(self) -> float:
        """Signed area between the arc and the origin, 1/2 integral of (y dz - z dy) [mm2]."""
        return self._swept.swept_area(self.start, self.end)

    def moved(self, move: Isometry) -> Arc:
        """Return the arc after an isometry; a reflection turns its direction round."""
        return Arc(move(self.start), move(self.end), move(self.centre), self.ccw == move.keeps_orientation)

    def reversed(self) -> Arc:
        """Return the arc walked the other way."""
        return Arc(self.end, self.start, self.centre, not self.ccw)

    def extremes(self) -> list[Point]:
        """Points (n, 2) that span the bounding box, ends included [mm]."""
        return [self.start, self.end, *self._swept.turning_points()]

    def at(self, s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Return points and derivatives by s [mm], both (n, 2), at parameters s (n,) from 0 to 1."""
        return self._swept.at(s)

    def polyline(self, max_deg: float) -> list[Point]:
        """Points (n, 2) on the arc, the end left out, no more than `max_deg` [deg] apart [mm]."""
        return self._swept.polyline(self.start, max_deg)


@dataclass(frozen=True)
class EllipseArc:
    """An arc of an ellipse: `major` is the half-axis vector, `ratio` = minor/major, at most 180 deg by convention."""

    start: Point
    end: Point
    centre: Point
    major: Point
    ratio: float
    ccw: bool

    @property
    def _swept(self) -> _Sweep:
        (my, mz), k = self.major, self.ratio
        return _Sweep.between(self.start, self.end, self.centre, (self.major, (-k * mz, k * my)), self.ccw)

    @property
    def length(self) -> float:
        """Length [mm], an elliptic integral of the second kind; |dp/dt|^2 = a^2 (1 - (1 - ratio^2) cos(t)^2)."""
        from scipy.special import ellipeinc

        swept, m = self._swept, 1 - self.ratio**2
        t0 = swept.begin + math.pi / 2
        return math.hypot(*self.major) * abs(float(ellipeinc(t0 + swept.turn, m) - ellipeinc(t0, m)))

    @property
    def swept_area(self) -> float:
        """Signed area between the arc and the origin, 1/2 integral of (y dz - z dy) [mm2]."""
        return self._swept.swept_area(self.start, self.end)

    def moved(self, move: Isometry) -> EllipseArc:
        """Return the arc after an isometry; a reflection turns its direction round."""
        return EllipseArc(
            move(self.start), move(self.end), move(self.centre), move.vector(self.major), self.ratio,
            self.ccw == move.keeps_orientation,
        )  # fmt: skip

    def reversed(self) -> EllipseArc:
        """Return the arc walked the other way."""
        return EllipseArc(self.end, self.start, self.centre, self.major, self.ratio, not self.ccw)

    def extremes(self) -> list[Point]:
        """Points (n, 2) that span the bounding box, ends included [mm]."""
        return [self.start, self.end, *self._swept.turning_points()]

    def at(self, s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Return points and derivatives by s [mm], both (n, 2), at parameters s (n,) from 0 to 1."""
        return self._swept.at(s)

    def polyline(self, max_deg: float) -> list[Point]:
        """Points (n, 2) on the arc, the end left out, no more than `max_deg` [deg] of the parameter apart [mm]."""
        return self._swept.polyline(self.start, max_deg)


Segment = Line | Arc | EllipseArc


@dataclass(frozen=True)
class Loop:
    """A closed loop: segment k ends where segment k+1 starts, the last where the first starts."""

    segments: tuple[Segment, ...]

    @property
    def area(self) -> float:
        """Enclosed area by Green's theorem [mm2], exact for arcs; positive when the loop runs counter-clockwise."""
        shift = Isometry.translation((-self.segments[0].start[0], -self.segments[0].start[1]))
        return math.fsum(segment.moved(shift).swept_area for segment in self.segments)

    @property
    def ccw(self) -> bool:
        """True when the loop runs counter-clockwise."""
        return self.area > 0

    @property
    def length(self) -> float:
        """Length all the way round [mm]."""
        return math.fsum(segment.length for segment in self.segments)

    def bounds(self) -> Box:
        """Return (y min, z min, y max, z max), exact for arcs too [mm]."""
        y, z = zip(*(p for segment in self.segments for p in segment.extremes()), strict=True)
        return (min(y), min(z), max(y), max(z))

    def polyline(self, max_deg: float = 3.0) -> FloatArray:
        """Return the loop as points, shape (n, 2) [mm], closing point not repeated; arcs cut every `max_deg` degrees."""
        return np.array([p for segment in self.segments for p in segment.polyline(max_deg)], dtype=np.float64)

    def moved(self, move: Isometry) -> Loop:
        """Return the loop after an isometry."""
        return Loop(tuple(segment.moved(move) for segment in self.segments))

    def reversed(self) -> Loop:
        """Return the loop walked the other way."""
        return Loop(tuple(segment.reversed() for segment in reversed(self.segments)))


@dataclass(frozen=True)
class Face:
    """A flat region: one outer loop less any holes."""

    outer: Loop
    holes: tuple[Loop, ...] = ()

    @property
    def loops(self) -> tuple[Loop, ...]:
        """The outer loop first, then the holes."""
        return (self.outer, *self.holes)

    @property
    def area(self) -> float:
        """Area of the outer loop less the holes [mm2]."""
        return abs(self.outer.area) - math.fsum(abs(hole.area) for hole in self.holes)

    def moved(self, move: Isometry) -> Face:
        """Return the face after an isometry."""
        return Face(self.outer.moved(move), tuple(hole.moved(move) for hole in self.holes))

    def bounds(self) -> Box:
        """Return (y min, z min, y max, z max) of the outer loop, exact for arcs too [mm]."""
        return self.outer.bounds()


def polygon_loop(points: Sequence[Point]) -> Loop:
    """Return the loop of straight lines through the points (n, 2) [mm], n >= 3; the last joins the first."""
    n = len(points)
    return Loop(tuple(Line(points[k], points[(k + 1) % n]) for k in range(n)))


def _dot(a: Point, b: Point) -> float:
    return a[0] * b[0] + a[1] * b[1]


def _cross(a: Point, b: Point) -> float:
    return a[0] * b[1] - a[1] * b[0]
