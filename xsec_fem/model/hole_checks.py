"""Each part by itself: its outline crosses nothing of its own, and its holes lie inside it and apart."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from xsec_fem.model.faults import FaultList
from xsec_fem.model.flat_parts import FlatPart, Scale, flat_loop, flat_polygon, loop_size, thick_pieces
from xsec_fem.model.outline import Face
from xsec_fem.model.part_reader import PlacedPart
from xsec_fem.model.wording import point_text

if TYPE_CHECKING:
    from shapely import Polygon
    from shapely.geometry.base import BaseGeometry

_REMEDY = "Holes are placed in the section's axes, not in those of the part; a notch belongs into the outline."


def checked_part(placed: PlacedPart, face: Face, scale: Scale, faults: FaultList) -> FlatPart | None:
    """Return the part as a polygon less those of its holes that can be cut; None when its outline crosses itself."""
    outline = flat_polygon(face.outer, [], scale)
    if not _is_sound(outline, placed.place, scale, faults):
        return None
    sound = _sound_holes(placed, face, outline, scale, faults)
    solid = flat_polygon(face.outer, [face.holes[k] for k in sound], scale)
    return FlatPart(placed, solid) if _is_sound(solid, placed.place, scale, faults) else None


def _is_sound(polygon: Polygon, place: str, scale: Scale, faults: FaultList) -> bool:
    """False, and the fault noted, for a polygon without thickness, or one that crosses itself."""
    import shapely

    if polygon.area <= scale.same * polygon.length / 2:
        rule = f"is thinner than {scale.same:.2g}, too thin for a section of size {scale.size:.6g}"
        faults.add(place, rule, None, "Check the numbers and their units.")
        return False
    if not polygon.is_valid:
        at = re.search(r"\[(\S+) (\S+)\]", shapely.is_valid_reason(polygon))
        where = f" at {point_text((float(at[1]), float(at[2])), scale.size)}" if at else ""
        faults.add(place, f"has an outline that crosses or touches itself{where}", None, "Check the numbers.")
        return False
    return True


def _sound_holes(placed: PlacedPart, face: Face, outline: Polygon, scale: Scale, faults: FaultList) -> list[int]:
    import shapely

    holes: dict[int, Polygon] = {}
    for k, loop in enumerate(face.holes):
        place = placed.hole_places[k]
        if place and loop_size(loop) > loop_size(face.outer):  # not cut into chords: their number grows with its size
            faults.add(place, "is larger than its part", None, _REMEDY)
            continue
        hole = shapely.Polygon(flat_loop(loop, scale))
        if not place:  # a hollow of the shape itself: its own rules have kept it inside
            holes[k] = hole
            continue
        if not _is_sound(hole, place, scale, faults):
            continue
        rule = _edge_rule(hole, outline, scale)
        if rule:
            faults.add(place, rule, None, _REMEDY)
            continue
        clashes = [(j, rule) for j, other in holes.items() if (rule := _clash_rule(hole, other, scale, faults))]
        for j, rule in clashes:
            faults.add(place, rule.format(other=_hole_name(placed, j)), None, "Merge the two into one outline.")
        if not clashes:
            holes[k] = hole
    return list(holes)


def _hole_name(placed: PlacedPart, index: int) -> str:
    return placed.hole_places[index].rpartition(": ")[2] or "the hollow of its part"


def _edge_rule(hole: Polygon, outline: Polygon, scale: Scale) -> str:
    """Say how a hole leaves its part, "" when it is inside."""
    if not thick_pieces(hole.intersection(outline), scale.same):
        return "lies outside its part"
    if thick_pieces(hole.difference(outline), scale.same):
        return f"crosses the edge of its part at {_meeting(hole.boundary, outline.boundary, scale)}"
    if hole.boundary.dwithin(outline.boundary, scale.same):
        return f"touches the edge of its part at {_meeting(hole.boundary, outline.boundary, scale)}"
    return ""


def _clash_rule(hole: Polygon, other: Polygon, scale: Scale, faults: FaultList) -> str:
    """Say how two holes meet, "" when they are apart; "{other}" stands for the other one's name."""
    common = thick_pieces(hole.intersection(other), scale.same)
    if common:
        return f"overlaps {{other}} by {area_text(common, faults)} at {inner_point(common, scale)}"
    if hole.distance(other) <= scale.same:
        return f"touches {{other}} at {_meeting(hole, other, scale)}"
    return ""


def area_text(pieces: list[Polygon], faults: FaultList) -> str:
    """Return the area of polygons with its unit, three digits."""
    unit = f" {faults.units.power(2)}" if faults.units else ""
    return f"{sum(piece.area for piece in pieces):.3g}{unit}"


def inner_point(pieces: list[Polygon], scale: Scale) -> str:
    """Return a point inside the largest polygon as text; its centroid when that is inside."""
    largest = max(pieces, key=lambda piece: piece.area)
    point = largest.centroid if largest.contains(largest.centroid) else largest.representative_point()
    return point_text((point.x, point.y), scale.size)


def _meeting(first: BaseGeometry, second: BaseGeometry, scale: Scale) -> str:
    """Return a common or nearest point of two geometries as text."""
    from shapely.ops import nearest_points

    point = nearest_points(first, second)[0]
    return point_text((point.x, point.y), scale.size)
