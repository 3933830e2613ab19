"""A family of parallel lines laid through the mesh: where it meets the edges, the triangles it runs through, the walls it crosses.

Line k is n . x = level k. Positions along it are t . x, t = `tangent_of(n)`; "below" is n . x < level, and n points out of
what is below. A node within 1e-9 of the section's size of a line counts as above it. Each edge is cut into pieces that only
rise or fall (`EdgePieces`), and a line crosses a piece if and only if low < level <= high. This half-open rule
leaves no special cases: every triangle is entered as often as it is left, a line through a node passes it on one side, and a line
along edges runs in the triangles below them, so that a cut laid exactly on a joint or a flange's face is the one just below it.

A wall segment crossed, a `span`, is a chain of intervals that follow each other through shared edges: a slit, whose sides
share no edge, ends one.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp
from scipy.sparse.csgraph import connected_components

from xsec_fem.fem.edge_curves import EdgeCurves, EdgePieces, tangent_of
from xsec_fem.fem.polynomial_roots import bracketed_roots

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_ON_LINE = (
    1e-9  # share of the section's size within which a node counts as above a line: typed coordinates and their rounding
)
_NO_WIDTH = 1e-8  # spans shorter than this share of the section's size are touched corners, not walls

_CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


@dataclass(frozen=True)
class EdgeHits:
    """Where lines cross pieces of edges.

    Attributes
    ----------
    curves, pieces : the edges.
    levels : (L,) of the lines, ascending [mm].
    line, piece : (H,) which line crosses which piece.
    u : (H,) parameter on the piece's edge.
    """

    curves: EdgeCurves
    pieces: EdgePieces
    levels: FloatArray
    line: IntArray
    piece: IntArray
    u: FloatArray

    @property
    def edge(self) -> IntArray:
        """Edge of each hit, shape (H,)."""
        return self.pieces.edge[self.piece]

    @cached_property
    def points(self) -> FloatArray:
        """Places of the hits, shape (H, 2) [mm]."""
        return self.curves.points(self.edge, self.u)

    @cached_property
    def position(self) -> FloatArray:
        """Place of each hit along its line, shape (H,) [mm]."""
        return np.asarray(self.points @ tangent_of(self.pieces.normal))


def tolerance(curves: EdgeCurves) -> float:
    """Distance within which a node counts as above a line (module docstring) [mm]."""
    return _ON_LINE * curves.size


def edge_hits(curves: EdgeCurves, pieces: EdgePieces, levels: FloatArray, used: IntArray | None = None) -> EdgeHits:
    """Return all crossings of lines n . x = level with the pieces, arrays of shape (H,) as in EdgeHits [mm].

    levels : (L,) ascending. used : (U,) the pieces looked at, all when None.
    """
    chosen = np.arange(len(pieces.edge)) if used is None else used
    slack = tolerance(curves)
    first = np.searchsorted(levels, pieces.low[chosen] + slack, side="right")
    last = np.searchsorted(levels, pieces.high[chosen] + slack, side="right")
    count = last - first
    which = np.repeat(np.arange(len(chosen)), count)
    line = first[which] + np.arange(len(which)) - np.repeat(np.cumsum(count) - count, count)
    piece = chosen[which]
    start, end = pieces.heights[piece].T
    share = np.clip((levels[line] - start) / (end - start), 0.0, 1.0)
    low, high = pieces.bounds[piece].T
    u = low + share * (high - low)
    bent = np.flatnonzero(curves.curved[pieces.edge[piece]])
    if len(bent):
        polynomial = curves.coefficients[pieces.edge[piece[bent]]] @ pieces.normal
        polynomial[:, 0] -= levels[line[bent]]
        inside = (share[bent] > 0.0) & (share[bent] < 1.0)
        root = bracketed_roots(polynomial[inside], low[bent][inside], high[bent][inside])
        u[bent[inside]] = root
    return EdgeHits(curves, pieces, levels, line.astype(np.int64), piece, u)


@dataclass(frozen=True)
class Crossings:
    """What a family of lines runs through: intervals, sorted by span and position, and spans, sorted by line and position.

    Attributes
    ----------
    hits : the crossings with edges, and the levels (L,).
    span, triangle : (I,) of each interval.
    start, end : (I,) positions along the line, start <= end [mm].
    reference : (I, 2, 2) reference coordinates of the two ends in the triangle.
    span_line : (S,) line of each span.
    span_start, span_end : (S,) positions of its ends, on free edges [mm].
    """

    hits: EdgeHits
    span: IntArray
    triangle: IntArray
    start: FloatArray
    end: FloatArray
    reference: FloatArray
    span_line: IntArray
    span_start: FloatArray
    span_end: FloatArray

    @property
    def normal(self) -> FloatArray:
        """Unit normal of the lines, shape (2,) [-]."""
        return self.hits.pieces.normal

    @property
    def tangent(self) -> FloatArray:
        """Unit direction of the lines, the normal on its left, shape (2,) [-]."""
        return tangent_of(self.normal)

    @property
    def levels(self) -> FloatArray:
        """n . x of the lines, ascending, shape (L,) [mm]."""
        return self.hits.levels

    @property
    def line(self) -> IntArray:
        """Line of each interval, shape (I,)."""
        return self.span_line[self.span]

    @property
    def span_length(self) -> FloatArray:
        """Length of each span, the t of the wall crossed, shape (S,) [mm]."""
        return self.span_end - self.span_start

    @property
    def length(self) -> FloatArray:
        """Sum of the spans' lengths of each line, the t of V S/(I t), shape (L,) [mm]."""
        return np.bincount(self.span_line, self.span_length, minlength=len(self.levels)).astype(float)

    @property
    def span_first(self) -> IntArray:
        """First interval of each span, shape (S,)."""
        return np.searchsorted(self.span, np.arange(len(self.span_line))).astype(np.int64)

    def point(self, line: IntArray, position: FloatArray) -> FloatArray:
        """Return the place, shape (..., 2), at a position (...) along a line (...) [mm]."""
        return np.asarray(self.levels[line][..., None] * self.normal + position[..., None] * self.tangent)

    def parts_of_span(self, span: int) -> tuple[str, ...]:
        """Names of the parts that a span crosses, in order along the line."""
        mesh = self.hits.curves.mesh
        numbers = mesh.part_of[self.triangle[self.span == span]]
        return tuple(dict.fromkeys(mesh.part_names[number] for number in numbers))


def line_crossings(curves: EdgeCurves, normal: FloatArray, levels: FloatArray) -> Crossings:
    """Lay lines n . x = level through the mesh, arrays shaped as in Crossings.

    normal : (2,) unit direction. levels : (L,) ascending [mm]; ValueError when they are not.
    """
    levels = np.asarray(levels, float)
    if np.any(np.diff(levels) < 0):
        raise ValueError(f"levels must be ascending (got {levels[:3].tolist()} ...)")
    return crossings_of(edge_hits(curves, curves.pieces(np.asarray(normal, float)), levels))


def crossings_of(hits: EdgeHits) -> Crossings:
    """Pair the hits of each triangle into intervals and chain the intervals into spans, shaped as in Crossings [mm]."""
    edges, per_line = hits.curves.edges, len(hits.curves.mesh.triangles)
    owner, local = edges.triangles[hits.edge], edges.local[hits.edge]
    hit, side = np.nonzero(owner >= 0)
    # along the edge the second triangle walks the other way
    u = np.where(side == 0, hits.u[hit], 1.0 - hits.u[hit])
    corner = local[hit, side]
    reference = _CORNERS[corner] + u[:, None] * (_CORNERS[(corner + 1) % 3] - _CORNERS[corner])
    key = hits.line[hit] * per_line + owner[hit, side]
    order = np.lexsort((hits.position[hit], key)).reshape(-1, 2)  # entered as often as left: always pairs
    ends = hit[order]
    key = key[order[:, 0]]
    place = hits.position[ends]
    label = _chains(ends, len(hits.u))
    return _sorted(hits, key, place, reference[order], label)


def _chains(ends: IntArray, hit_count: int) -> IntArray:
    """Number of the chain (I,) of intervals with end hits (I, 2): those that share a hit follow each other."""
    flat = ends.ravel()
    order = np.argsort(flat, kind="stable")
    same = np.flatnonzero(flat[order][1:] == flat[order][:-1])
    a, b = order[same] // 2, order[same + 1] // 2
    graph = sp.coo_matrix((np.ones(len(a)), (a, b)), shape=(len(ends),) * 2)
    return np.asarray(connected_components(graph, directed=False)[1], dtype=np.int64)


def _sorted(hits: EdgeHits, key: IntArray, place: FloatArray, reference: FloatArray, label: IntArray) -> Crossings:
    """Number the spans by line and position, drop those without width, sort the intervals by span and position."""
    per_line = len(hits.curves.mesh.triangles)
    line, triangle = np.divmod(key, per_line)
    count = int(label.max(initial=-1)) + 1
    low, high = np.full(count, np.inf), np.full(count, -np.inf)
    np.minimum.at(low, label, place[:, 0])
    np.maximum.at(high, label, place[:, 1])
    of_line = np.zeros(count, np.int64)
    of_line[label] = line
    wide = high - low > _NO_WIDTH * hits.curves.size
    order = np.lexsort((low, of_line))
    order = order[wide[order]]
    number = np.full(count, -1)
    number[order] = np.arange(len(order))
    kept = np.flatnonzero(wide[label])
    kept = kept[np.lexsort((place[kept, 0] + place[kept, 1], number[label[kept]]))]
    return Crossings(
        hits, number[label[kept]], triangle[kept], place[kept, 0], place[kept, 1], reference[kept],
        of_line[order], low[order], high[order],
    )  # fmt: skip
