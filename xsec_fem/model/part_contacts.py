"""Which parts touch along a line, which in a point only, and which do not: the bonds of the section."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from xsec_fem.model.flat_parts import FlatPart, Scale, thick_pieces
from xsec_fem.model.outline import Point

if TYPE_CHECKING:
    from shapely import Polygon
    from shapely.geometry.base import BaseGeometry

# Two bodies within a distance d of each other run together over a length that grows with d when they meet in a point
# (like sqrt(d) where they are tangent, like d where they cross) and hardly grows when they share a line. Four times the
# distance gives 2 and 4 times the length for a point, 1 for a line: the bound stands in between.
_WIDER = 4.0
_GROWTH_OF_A_POINT = 1.5


@dataclass(frozen=True)
class Piece:
    """One connected piece of a part; the part's index in the list of parts."""

    part: int
    name: str
    solid: Polygon
    scale: Scale

    @cached_property
    def near(self) -> BaseGeometry:
        """All points nearer to the piece than twice the distance that counts as touching."""
        return self.solid.buffer(2 * self.scale.same, join_style="mitre")

    @cached_property
    def wider(self) -> BaseGeometry:
        """As `near`, four times as far."""
        return self.solid.buffer(2 * _WIDER * self.scale.same, join_style="mitre")


@dataclass(frozen=True)
class Contact:
    """How two pieces meet: "line", "point" or "none"; their distance [mm] and a point of the first nearest to it."""

    kind: str
    distance: float
    at: Point


def contact(first: Piece, second: Piece) -> Contact:
    """Return how two pieces of different parts meet; overlapping ones meet along a line."""
    import shapely
    from shapely.ops import nearest_points

    if not first.solid.dwithin(second.solid, first.scale.same):
        point, other = nearest_points(first.solid, second.solid)
        return Contact("none", float(point.distance(other)), (point.x, point.y))
    shared = shapely.line_merge(first.solid.boundary.intersection(second.near))
    if shared.is_empty:  # one lies deep in the other
        inner = first.solid.intersection(second.solid).representative_point()
        return Contact("line", 0.0, (inner.x, inner.y))
    run = max(shapely.get_parts(shared), key=lambda line: line.length)
    wide = shapely.line_merge(first.solid.boundary.intersection(second.wider))
    longest = max(line.length for line in shapely.get_parts(wide))
    middle = run.interpolate(0.5, normalized=True)
    kind = "point" if longest > _GROWTH_OF_A_POINT * run.length else "line"
    return Contact(kind, 0.0, (middle.x, middle.y))


def contacts(pieces: list[Piece], reach: float) -> dict[tuple[int, int], Contact]:
    """Return how pieces of different parts meet, by index pair i < j; pairs farther apart than `reach` [mm] left out."""
    import numpy as np
    from shapely import STRtree

    if not pieces:
        return {}
    tree = STRtree([piece.solid for piece in pieces])
    found = tree.query([piece.solid for piece in pieces], predicate="dwithin", distance=reach)
    pairs = sorted({(int(i), int(j)) for i, j in np.transpose(found) if i < j and pieces[i].part != pieces[j].part})
    return {(i, j): contact(pieces[i], pieces[j]) for i, j in pairs}


def nearest(first: list[Piece], second: list[Piece]) -> Contact:
    """Return the contact of the two pieces, one of each list, that lie nearest to each other."""
    return min((contact(a, b) for a in first for b in second), key=lambda found: found.distance)


def bodies(count: int, found: dict[tuple[int, int], Contact]) -> list[list[int]]:
    """Return pieces 0 .. count - 1 grouped into bodies that hang together along lines."""
    body = list(range(count))
    for (i, j), between in found.items():
        if between.kind == "line" and body[i] != body[j]:
            gone, kept = max(body[i], body[j]), min(body[i], body[j])
            body = [kept if label == gone else label for label in body]
    return [[k for k in range(count) if body[k] == label] for label in sorted(set(body))]


def pieces_of(parts: list[FlatPart], scale: Scale) -> list[Piece]:
    """Return the connected pieces of all parts; a part is one piece unless an embedded part cuts it up."""
    return [
        Piece(k, part.name, solid, scale)
        for k, part in enumerate(parts)
        for solid in thick_pieces(part.solid, scale.same)
    ]
