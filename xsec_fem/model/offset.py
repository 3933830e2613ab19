"""Strips bent along a mid-line: both sides at half the thickness, bends concentric, or mitred when sharp."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from xsec_fem.model.outline import Face, Point
from xsec_fem.model.rounding import Corner, Misfit, misfits, rounded_loop, rounded_polyline, tangent_factor

_SHARP = 1e-6  # room left between two sharp corners as a share of their need; a bend below this share is a fold
_WALL_STEP = 5.0  # [deg] between the points of a bend's mid-line


@dataclass(frozen=True)
class MidLine:
    """The mid-line of a strip of constant thickness.

    points : corners (n, 2) [mm], no two in a row equal, n >= 2 (3 when closed).
    thickness : of the strip [mm].
    bend_radius : inner radius of all bends [mm], outer = inner + thickness; None for sharp mitred corners, 0 for a
        fold that is sharp inside and round outside.
    closed : True when the last point joins the first.
    """

    points: tuple[Point, ...]
    thickness: float
    bend_radius: float | None = None
    closed: bool = False

    def misfits(self) -> list[Misfit]:
        """Return the bends that overfill a piece of the mid-line, with the largest inner radius or thickness that fits [mm].

        The key is "bend_radius", or "thickness" when there is none or even a fold (inner radius 0) would not fit.
        """
        half = self.thickness / 2
        if self.bend_radius is None:
            return self._mitre_misfits(half)
        radius = self._inner + half * (1 if self._inner else 1 + _SHARP)
        corners = [Corner(p, radius, "bend_radius", self._piece(k)) for k, p in enumerate(self.points)]
        found = []
        for m in misfits(corners, self.closed):
            if self._inner and m.limit > half * (1 + _SHARP):
                found.append(replace(m, radius=self.bend_radius, limit=m.limit - half))
            else:
                found.append(replace(m, key="thickness", radius=self.thickness, limit=2 * m.limit / (1 + _SHARP)))
        return found

    @property
    def _inner(self) -> float:
        """Inner bend radius, 0 when there is none or next to none."""
        radius = self.bend_radius or 0.0
        return radius if radius > _SHARP * self.thickness else 0.0

    def _mitre_misfits(self, half: float) -> list[Misfit]:
        """Pieces so short that the mitres at their ends meet on one side; bends to opposite sides need less room."""
        n, found = len(self.points), []
        reach = [self._mitre(k) for k in range(n)]
        for k in range(n if self.closed else n - 1):
            length = math.dist(self.points[k], self.points[(k + 1) % n])
            need = abs(reach[k] + reach[(k + 1) % n])
            if need * half * (1 + _SHARP) >= length:
                found.append(Misfit("thickness", self.thickness, 2 * length / (need * (1 + _SHARP)), self._piece(k)))
        return sorted(found, key=lambda misfit: misfit.limit)[:1]

    def _mitre(self, k: int) -> float:
        """Length of a mitre along the mid-line over half the thickness, negative for a bend to the right."""
        n = len(self.points)
        if not self.closed and k in (0, n - 1):
            return 0.0
        before, here, after = self.points[k - 1], self.points[k], self.points[(k + 1) % n]
        first, second = _normal(before, here), _normal(here, after)
        return math.copysign(tangent_factor(before, here, after), first[0] * second[1] - first[1] * second[0])

    def reversals(self) -> list[int]:
        """Return the numbers of the points where the mid-line turns straight back."""
        return [k for k in range(len(self.points)) if math.isinf(self._mitre(k))]

    def _piece(self, k: int) -> str:
        return f"piece from points[{k}] to points[{(k + 1) % len(self.points)}]"

    def side(self, distance: float) -> list[Corner]:
        """Return the corners of the line at a distance to the left [mm], radii concentric with the bends."""
        n = len(self.points)
        corners = []
        for k, point in enumerate(self.points):
            before = _normal(self.points[k - 1], point) if k or self.closed else None
            after = _normal(point, self.points[(k + 1) % n]) if k < n - 1 or self.closed else None
            first, second = before or after or (0.0, 0.0), after or before or (0.0, 0.0)
            reach = distance / (1 + first[0] * second[0] + first[1] * second[1])
            moved = (point[0] + (first[0] + second[0]) * reach, point[1] + (first[1] + second[1]) * reach)
            left_turn = first[0] * second[1] - first[1] * second[0] > 0
            corners.append(Corner(moved, self._radius(inside=left_turn == (distance > 0))))
        return corners

    def _radius(self, inside: bool) -> float:
        if self.bend_radius is None:
            return 0.0
        return self._inner if inside else self._inner + self.thickness

    def face(self) -> Face:
        """Return the strip: one loop when open, outer loop and hole when closed. Bends must fit (see `misfits`)."""
        left, right = self.side(self.thickness / 2), self.side(-self.thickness / 2)
        if not self.closed:
            return Face(rounded_loop([*_sharp_ends(right), *reversed(_sharp_ends(left))]))
        loops = sorted((rounded_loop(left), rounded_loop(right)), key=lambda loop: abs(loop.area))
        return Face(loops[1], (loops[0],))

    def bent(self) -> tuple[Point, ...]:
        """Return the mid-line with its bends, as points of shape (m, 2), at most 5 deg of a bend apart [mm]."""
        radius = 0.0 if self.bend_radius is None else self.bend_radius + self.thickness / 2
        corners = [Corner(p, radius) for p in self.points]
        if self.closed:
            return tuple((float(y), float(z)) for y, z in rounded_loop(corners).polyline(_WALL_STEP))
        points = [p for segment in rounded_polyline(corners) for p in segment.polyline(_WALL_STEP)]
        return (*points, self.points[-1])


def _sharp_ends(side: list[Corner]) -> list[Corner]:
    return [replace(side[0], radius=0.0), *side[1:-1], replace(side[-1], radius=0.0)]


def _normal(start: Point, end: Point) -> Point:
    """Unit vector to the left of the line."""
    y, z = end[0] - start[0], end[1] - start[1]
    length = math.hypot(y, z)
    return (-z / length, y / length)
