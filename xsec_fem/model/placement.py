"""From a shape's own coordinates to the section's axes: mirror, then turn about the anchor, then shift it to `at`.

top left ---- top ---- top right
   |                      |          on the bounding box of the shape as given, before mirror and turn;
  left      centre      right        "origin" is the point (0, 0) of the shape's own coordinates
   |                      |
bottom left - bottom - bottom right
"""

from __future__ import annotations

from xsec_fem.model.outline import Face, Isometry, Point
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
    y0, z0, y1, z1 = face.bounds()
    y = y0 if "left" in anchor else y1 if "right" in anchor else (y0 + y1) / 2
    z = z0 if "bottom" in anchor else z1 if "top" in anchor else (z0 + z1) / 2
    return (y, z)


def moved_walls(walls: tuple[Wall, ...], move: Isometry) -> tuple[Wall, ...]:
    """Return the walls after an isometry, mid-lines of points (n, 2) [mm]."""
    return tuple(Wall(w.name, tuple(move(p) for p in w.points), w.thickness, w.closed) for w in walls)


def turned_grain(grain_angle: float, rotate: float, mirror: str | None) -> float:
    """Return the grain's angle in the section's axes [deg], from that in the part's own axes before mirror and turn.

    A direction has no sense: a mirror in either axis turns the angle a into -a (up to 180 deg).
    """
    return (-grain_angle if mirror else grain_angle) + rotate
