"""Circular arcs from what a drawing gives: ends and centre, ends and a point between, a full circle."""

from __future__ import annotations

import math

from xsec_fem.model.outline import Arc, Isometry, Loop, Point

_ON_CHORD = 1e-6  # a centre this close to the chord, as a share of the radius, leaves the side of the arc open
ROUND_OFF_DEG = 1e-7  # angles this close are equal: 2e-9 rad
_QUARTER = math.pi / 2


def pieces(arc: Arc) -> tuple[Arc, ...]:
    """Cut an arc of any angle below 360 deg evenly into arcs of at most 90 deg."""
    sweep = arc.sweep
    n = max(1, math.ceil(abs(sweep) / _QUARTER - 1e-9))
    begin = math.atan2(arc.start[1] - arc.centre[1], arc.start[0] - arc.centre[0])
    (cy, cz), r = arc.centre, arc.radius
    angles = (begin + sweep * k / n for k in range(1, n))
    points = [arc.start, *((cy + r * math.cos(a), cz + r * math.sin(a)) for a in angles), arc.end]
    return tuple(Arc(points[k], points[k + 1], arc.centre, arc.ccw) for k in range(n))


def at_angle(radius: float, degrees: float) -> Point:
    """Return the point, shape (2,) [mm], on a circle about the origin, counter-clockwise from +y, exact at multiples of 90 deg."""
    return Isometry.rotation(degrees)((radius, 0.0))


def swept_arcs(radius: float, from_deg: float, to_deg: float) -> tuple[Arc, ...]:
    """Return counter-clockwise arcs about the origin of at most 90 deg each, from one angle up to a larger one.

    The difference is at most 360 deg; at 360 deg the last end is the first start, bit by bit.
    """
    n = max(1, math.ceil((to_deg - from_deg) / 90 - 1e-9))
    points = [at_angle(radius, from_deg + (to_deg - from_deg) * k / n) for k in range(n + 1)]
    if abs(to_deg - from_deg - 360) < ROUND_OFF_DEG:
        points[-1] = points[0]
    return tuple(Arc(points[k], points[k + 1], (0.0, 0.0), True) for k in range(n))


def circle_loop(radius: float) -> Loop:
    """Return the full circle of a radius [mm] about the origin as four quarter arcs, counter-clockwise."""
    return Loop(swept_arcs(radius, 0, 360))


def centred_arc(start: Point, end: Point, centre: Point) -> Arc | None:
    """Return the shorter arc between two points about a centre, shape (2,) each [mm]; None for a half circle, whose side is open.

    A centre typed with few digits is shifted along the chord so that both ends are equally far from it.
    """
    chord = (end[0] - start[0], end[1] - start[1])
    off = (centre[0] - (start[0] + end[0]) / 2, centre[1] - (start[1] + end[1]) / 2)
    square = chord[0] ** 2 + chord[1] ** 2
    along = (off[0] * chord[0] + off[1] * chord[1]) / square
    across = (chord[0] * off[1] - chord[1] * off[0]) / square
    middle = (centre[0] - along * chord[0], centre[1] - along * chord[1])
    if abs(across) * math.sqrt(square) < _ON_CHORD * math.dist(start, middle):
        return None
    return Arc(start, end, middle, ccw=across > 0)


def through_arc(start: Point, through: Point, end: Point) -> Arc | None:
    """Return the arc from one point through a second to a third, shape (2,) each [mm]; None when they lie on one line."""
    a, b = (through[0] - start[0], through[1] - start[1]), (end[0] - start[0], end[1] - start[1])
    twice_area = a[0] * b[1] - a[1] * b[0]
    aa, bb = a[0] ** 2 + a[1] ** 2, b[0] ** 2 + b[1] ** 2
    if abs(twice_area) <= _ON_CHORD * max(aa, bb):
        return None
    y = (b[1] * aa - a[1] * bb) / (2 * twice_area)
    z = (a[0] * bb - b[0] * aa) / (2 * twice_area)
    return Arc(start, end, (start[0] + y, start[1] + z), ccw=twice_area > 0)
