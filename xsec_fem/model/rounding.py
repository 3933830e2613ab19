r"""Rounded corners: an arc, tangent to both sides, in place of each corner of a polygon or open polyline.

              P  corner, phi the angle between its two sides
             /|\       tangent length  P-T = r sin(phi) / (1 - cos(phi)) = r / tan(phi/2)
            T | T      centre          P + (a + b) r / sin(phi), a and b unit vectors along the sides
           /  C  \

Convex and re-entrant corners are treated alike; both formulas are exact in floating point at a right angle.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

from xsec_fem.model.arcs import pieces
from xsec_fem.model.outline import Arc, Line, Loop, Point, Segment

_STRAIGHT = 1e-6  # [rad] a turn below this is no corner: its fillet would leave the polygon by r*1e-13
FITS = 1e-9  # radii may overfill a side by this share of it (decimals typed by hand); the side then vanishes


@dataclass(frozen=True)
class Corner:
    """A corner of an outline.

    point : y, z [mm].
    radius : of the arc that replaces it, 0 for a sharp corner [mm].
    key : name of the number that gave the radius, for messages.
    edge : name of the side that starts here, for messages; "" when it has none.
    """

    point: Point
    radius: float = 0.0
    key: str = ""
    edge: str = ""


@dataclass(frozen=True)
class Misfit:
    """A radius too large for a side: the number's key, its value, the largest that fits [mm], the side's name."""

    key: str
    radius: float
    limit: float
    edge: str


def mirrored(half: Sequence[Corner], axis: str) -> list[Corner]:
    """Return the corners followed by their mirror image in reverse order: a symmetric outline from its half.

    axis = "y" flips the sign of y, "z" that of z. Names of sides follow; the side across the axis keeps its own.
    """
    flip = (-1.0, 1.0) if axis == "y" else (1.0, -1.0)
    image = [replace(c, point=(c.point[0] * flip[0], c.point[1] * flip[1])) for c in reversed(half)]
    edges = [c.edge for c in reversed(half[:-1])] + [half[-1].edge]
    return [*half, *(replace(c, edge=edge) for c, edge in zip(image, edges, strict=True))]


def half_turned(half: Sequence[Corner]) -> list[Corner]:
    """Return the corners followed by themselves turned by 180 deg: a point-symmetric outline from its half."""
    return [*half, *(replace(c, point=(-c.point[0], -c.point[1])) for c in half)]


def tangent_factor(before: Point, corner: Point, after: Point) -> float:
    """Return tangent length / radius, 1/tan(phi/2) [-]; 0 when the corner is straight, infinite when it folds back."""
    a, b = _unit(corner, before), _unit(corner, after)
    cosine, sine = a[0] * b[0] + a[1] * b[1], abs(a[0] * b[1] - a[1] * b[0])
    if sine < _STRAIGHT:
        return 0.0 if cosine < 0 else math.inf
    return sine / (1 - cosine)


def misfits(corners: Sequence[Corner], closed: bool = True) -> list[Misfit]:
    """Return the radii that do not fit their sides, one per key with the tightest limit [mm]; no two points in a row equal.

    Where two different numbers share a side, the one that alone is too large is named, else the longer of the two.
    """
    factors = _factors(corners, closed)
    found: dict[str, Misfit] = {}
    n = len(corners)
    for i in range(n if closed else n - 1):
        for misfit in _side_misfits(corners, factors, i, (i + 1) % n):
            if misfit.key not in found or misfit.limit < found[misfit.key].limit:
                found[misfit.key] = misfit
    return list(found.values())


def _side_misfits(corners: Sequence[Corner], factors: Sequence[float], i: int, j: int) -> list[Misfit]:
    """Radii that do not fit the side from corner i to corner j."""
    side = math.dist(corners[i].point, corners[j].point)
    need = {k: corners[k].radius * factors[k] if corners[k].radius else 0.0 for k in (i, j)}
    if need[i] + need[j] <= side * (1 + FITS):
        return []
    edge = corners[i].edge
    if corners[i].key == corners[j].key and corners[i].radius == corners[j].radius:
        return [Misfit(corners[i].key, corners[i].radius, side / (factors[i] + factors[j]), edge)]
    alone = [k for k in (i, j) if need[k] > side * (1 + FITS)]
    if alone:
        return [Misfit(corners[k].key, corners[k].radius, side / factors[k], edge) for k in alone]
    k, other = (i, j) if need[i] >= need[j] else (j, i)
    return [Misfit(corners[k].key, corners[k].radius, (side - need[other]) / factors[k], edge)]


def rounded_loop(corners: Sequence[Corner]) -> Loop:
    """Return the closed outline; sides that the arcs use up are left out. The radii must fit (see `misfits`)."""
    return Loop(tuple(_segments(corners, closed=True)))


def rounded_polyline(corners: Sequence[Corner]) -> list[Segment]:
    """Return an open line from the first to the last corner with the inner corners rounded."""
    return _segments(corners, closed=False)


def _segments(corners: Sequence[Corner], closed: bool) -> list[Segment]:
    """Sides between tangent points, each followed by the arc of the corner at its end."""
    n = len(corners)
    arrive, leave = _tangent_points(corners, closed)
    segments: list[Segment] = []
    for i in range(n if closed else n - 1):
        j = (i + 1) % n
        if leave[i] != arrive[j]:
            segments.append(Line(leave[i], arrive[j]))
        if arrive[j] != leave[j]:
            segments.extend(_corner_arcs(corners[i].point, corners[j], corners[(j + 1) % n].point, arrive[j], leave[j]))
    return segments


def _tangent_points(corners: Sequence[Corner], closed: bool) -> tuple[list[Point], list[Point]]:
    """Where each corner's arc begins and ends, its own point twice when sharp (or as good as); equal on a used-up side."""
    n, factors = len(corners), _factors(corners, closed)
    sides = [math.dist(corners[k].point, corners[(k + 1) % n].point) for k in range(n)]
    reach = [corner.radius * factor if corner.radius else 0.0 for corner, factor in zip(corners, factors, strict=True)]
    reach = [r if r > FITS * min(sides[k - 1], sides[k]) else 0.0 for k, r in enumerate(reach)]
    arrive, leave = [c.point for c in corners], [c.point for c in corners]
    for i in range(n):
        if reach[i]:
            arrive[i] = _along(corners[i].point, corners[i - 1].point, reach[i])
            leave[i] = _along(corners[i].point, corners[(i + 1) % n].point, reach[i])
    for i in range(n if closed else n - 1):
        j = (i + 1) % n
        if reach[i] + reach[j] >= sides[i] * (1 - FITS):
            leave[i] = arrive[j] = corners[j].point if not reach[j] else leave[i] if reach[i] else corners[i].point
    return arrive, leave


def _corner_arcs(before: Point, corner: Corner, after: Point, start: Point, end: Point) -> tuple[Arc, ...]:
    """Arcs of at most 90 deg that replace a corner."""
    a, b = _unit(corner.point, before), _unit(corner.point, after)
    turn = a[1] * b[0] - a[0] * b[1]
    reach = corner.radius / abs(turn)
    centre = (corner.point[0] + (a[0] + b[0]) * reach, corner.point[1] + (a[1] + b[1]) * reach)
    return pieces(Arc(start, end, centre, ccw=turn > 0))


def _factors(corners: Sequence[Corner], closed: bool) -> list[float]:
    n, points = len(corners), [c.point for c in corners]
    inner = range(n) if closed else range(1, n - 1)
    return [tangent_factor(points[i - 1], points[i], points[(i + 1) % n]) if i in inner else 0.0 for i in range(n)]


def _unit(start: Point, end: Point) -> Point:
    length = math.dist(start, end)
    return ((end[0] - start[0]) / length, (end[1] - start[1]) / length)


def _along(start: Point, end: Point, distance: float) -> Point:
    """Point at a distance from the start towards the end."""
    u = _unit(start, end)
    return (start[0] + u[0] * distance, start[1] + u[1] * distance)
