"""From a shape's own coordinates to the section's axes: mirror, then turn about the anchor, then shift it to `at`.

top left ---- top ---- top right
   |                      |          on the bounding box of the shape as given, before mirror and turn;
  left      centre      right        "origin" is the point (0, 0) of the shape's own coordinates
   |                      |
bottom left - bottom - bottom right
"""

from __future__ import annotations

import math

from xsec_fem.model.outline import Arc, EllipseArc, Face, Isometry, Loop, Point, Segment
from xsec_fem.model.section import Wall


def placement(face: Face, anchor: str, at: Point, rotate: float = 0.0, mirror: str | None = None) -> Isometry:
    """Return the map from the face's own coordinates to the section's axes.

    `anchor` is one of the words drawn above, `at`, shape (2,) [mm], is where it goes, `rotate` [deg] is counter-clockwise, `mirror`
    "y" flips left and right, "z" top and bottom.
    """
    y, z = anchor_point(face, anchor)
    move = Isometry.translation((-y, -z))
    if mirror is not None:
        move = move.then(Isometry.mirror(mirror))
    return move.then(Isometry.rotation(rotate)).then(Isometry.translation(at))


def anchor_point(face: Face, anchor: str) -> Point:
    """Return the anchor in the face's own coordinates, shape (2,) [mm]."""
    if anchor == "origin":
        return (0.0, 0.0)
    y0, z0, y1, z1 = extent(face.outer)
    y = y0 if "left" in anchor else y1 if "right" in anchor else (y0 + y1) / 2
    z = z0 if "bottom" in anchor else z1 if "top" in anchor else (z0 + z1) / 2
    return (y, z)


def extent(loop: Loop) -> tuple[float, float, float, float]:
    """Return (y min, z min, y max, z max) [mm], exact also where an arc bulges out between its ends."""
    points = [point for segment in loop.segments for point in (segment.start, segment.end, *_extremes(segment))]
    ys, zs = zip(*points, strict=True)
    return (min(ys), min(zs), max(ys), max(zs))


def moved_walls(walls: tuple[Wall, ...], move: Isometry) -> tuple[Wall, ...]:
    """Return the walls after an isometry, mid-lines of points (n, 2) [mm]."""
    return tuple(Wall(w.name, tuple(move(p) for p in w.points), w.thickness, w.closed) for w in walls)


def turned_grain(grain_angle: float, rotate: float, mirror: str | None) -> float:
    """Return the grain's angle in the section's axes [deg], from that in the part's own axes before mirror and turn.

    A direction has no sense: a mirror in either axis turns the angle a into -a (up to 180 deg).
    """
    return (-grain_angle if mirror else grain_angle) + rotate


def _extremes(segment: Segment) -> list[Point]:
    """Points of an arc where its tangent runs along an axis."""
    if isinstance(segment, Arc):
        (y, z), r = segment.centre, segment.radius
        return [p for p in ((y + r, z), (y, z + r), (y - r, z), (y, z - r)) if _on_arc(segment, p)]
    if isinstance(segment, EllipseArc):
        minor = (-segment.ratio * segment.major[1], segment.ratio * segment.major[0])
        found = []
        for axis in (0, 1):
            t = math.atan2(minor[axis], segment.major[axis])
            for c, s in ((math.cos(t), math.sin(t)), (-math.cos(t), -math.sin(t))):
                centre, major = segment.centre, segment.major
                found.append((centre[0] + c * major[0] + s * minor[0], centre[1] + c * major[1] + s * minor[1]))
        return [p for p in found if _on_arc(segment, p)]
    return []


def _on_arc(arc: Arc | EllipseArc, point: Point) -> bool:
    """True when a point of the full curve lies between start and end: on the arc's side of its chord.

    Holds for an arc of any angle: the chord splits the closed curve into the arc and the rest. The ends themselves are
    left out, so that a bounding box keeps their typed digits: 1e-9 of the size along the arc is 1e-18 across it.
    """
    if min(math.dist(point, arc.start), math.dist(point, arc.end)) < 1e-9 * math.dist(point, arc.centre):
        return False
    (ys, zs), (ye, ze) = arc.start, arc.end
    side = (ye - ys) * (point[1] - zs) - (ze - zs) * (point[0] - ys)
    return side <= 0 if arc.ccw else side >= 0
