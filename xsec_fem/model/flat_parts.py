"""Parts as polygons for the geometric checks, and the one distance below which two points count as the same.

Arcs become chords. A chord over the angle a leaves its arc of radius r by r(1 - cos(a/2)) = 2 r sin²(a/4), at its
middle; the angle is taken so that this is `CHORD` times the section's size, whatever the radius. Two arcs that touch
along their length but are cut at other places therefore overlap (or part) by slivers no deeper than twice that:
area <= depth x shared length.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.model.outline import Face, FloatArray, Line, Loop, Segment
from xsec_fem.model.part_reader import PlacedPart

if TYPE_CHECKING:
    from shapely import Polygon
    from shapely.geometry.base import BaseGeometry

CHORD = 2.5e-7  # of the section's size: a layer of size / 50,000 is still 40 times thicker; about 3000 chords a circle
ROUND_OFF = 1e-8  # of the section's size: coordinates typed with nine digits still meet
DIGITS = 4 * float(np.finfo(float).eps)  # of the largest coordinate: what placing and turning a shape costs


@dataclass(frozen=True)
class Scale:
    """Lengths that the checks compare with [mm]: `size`, the larger side of the section's bounding box, and others.

    chord : by how much a chord may leave its arc.
    same : two points nearer than this are the same point.
    """

    size: float
    chord: float
    same: float

    @classmethod
    def of(cls, faces: Sequence[Face]) -> Scale:
        """Return the scale of a section of at least one face [mm]."""
        points = np.vstack([face.outer.polyline() for face in faces])
        size = float(np.ptp(points, axis=0).max())
        chord = CHORD * size
        curved = any(
            not isinstance(segment, Line) for face in faces for loop in face.loops for segment in loop.segments
        )
        same = ROUND_OFF * size + DIGITS * float(np.abs(points).max()) + (2 * chord if curved else 0.0)
        return cls(size, chord, same)


@dataclass(frozen=True)
class FlatPart:
    """One part as a polygon (several when an embedded part cuts it up); thickness = 2 area / perimeter [mm].

    For a wall of any length, open, closed or bent, that is its thickness; for a rectangle b x h it is b h/(b + h).
    """

    placed: PlacedPart
    solid: BaseGeometry

    @property
    def name(self) -> str:
        """The part's name."""
        return self.placed.part.name

    @property
    def thickness(self) -> float:
        """Twice the area over the perimeter [mm]."""
        return 2 * float(self.solid.area) / float(self.solid.length)


def flat_polygon(outer: Loop, holes: Sequence[Loop], scale: Scale) -> Polygon:
    """Return the polygon of an outer loop less its holes."""
    from shapely import Polygon

    return Polygon(flat_loop(outer, scale), [flat_loop(hole, scale) for hole in holes])


def flat_loop(loop: Loop, scale: Scale) -> FloatArray:
    """Return a loop as points (n, 2) [mm], its chords within `scale.chord` of the arcs."""
    points = [p for segment in loop.segments for p in segment.polyline(_chord_degrees(segment, scale.chord))]
    return np.array(points, dtype=np.float64)


def loop_size(loop: Loop) -> float:
    """Return the larger side of a loop's bounding box [mm], arcs cut coarsely."""
    return float(np.ptp(loop.polyline(), axis=0).max())


def polygons_in(geometry: BaseGeometry) -> list[Polygon]:
    """Return the polygons that a geometry is made of; lines and points in it are left out."""
    from shapely import Polygon

    parts = getattr(geometry, "geoms", [geometry])
    return [part for part in parts if isinstance(part, Polygon) and not part.is_empty]


def thick_pieces(geometry: BaseGeometry, depth: float) -> list[Polygon]:
    """Return the polygons of a geometry that are no slivers: their area exceeds `depth` [mm] x half their perimeter.

    Half the perimeter of a sliver is the length that its two long sides share.
    """
    return [piece for piece in polygons_in(geometry) if piece.area > depth * piece.length / 2]


def _chord_degrees(segment: Segment, chord: float) -> float:
    if isinstance(segment, Line):
        return 180.0
    # an ellipse is a squeezed circle of its major half axis, and squeezing only brings chord and arc nearer
    radius = segment.radius if hasattr(segment, "radius") else math.hypot(*segment.major)
    return 180.0 if radius <= chord else math.degrees(4 * math.asin(math.sqrt(chord / radius / 2)))
