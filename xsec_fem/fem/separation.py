"""Does a cut across some walls separate the section, and what lies below it if it does?

For every cut the triangles are the vertices of a graph, joined where they share an edge; a triangle that the cut runs through is
two vertices, its lower and its upper piece, and an edge that the cut crosses joins the lower pieces and the upper pieces. The cut
separates when no lower piece is connected with an upper one. What hangs on the lower pieces is cut off; its moments
are those of its whole triangles and, by Green's theorem along their edges (`xsec_fem.fem.cut_off`), of its pieces.

A curved triangle that the same cut runs through twice keeps one lower and one upper piece: such a cut may be found not to
separate although it does; it is never the other way round.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp
from scipy.sparse.csgraph import connected_components

from xsec_fem.fem.cut_off import EdgeMoments
from xsec_fem.fem.line_crossings import Crossings, tolerance

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
BoolArray = npt.NDArray[np.bool_]

_VERTICES = 400_000  # vertices of the graphs of as many cuts as are treated at a time: some 50 MB


@dataclass(frozen=True)
class _Cuts:
    """Cuts of one family: line (C,) of each, and the (cut, triangle) pairs they run through, sorted (J,)."""

    crossings: Crossings
    line: IntArray
    cut: IntArray
    triangle: IntArray

    @property
    def level(self) -> FloatArray:
        return self.crossings.levels[self.line]

    @property
    def keys(self) -> IntArray:
        return self.cut * len(self.crossings.hits.curves.mesh.triangles) + self.triangle

    def slice(self, start: int, stop: int) -> _Cuts:
        """The cuts from start to stop, numbered from 0."""
        first, last = np.searchsorted(self.cut, [start, stop])
        return _Cuts(self.crossings, self.line[start:stop], self.cut[first:last] - start, self.triangle[first:last])

    @cached_property
    def crossed_edges(self) -> IntArray:
        """Keys line K + edge of all crossed edges, sorted."""
        hits = self.crossings.hits
        return np.unique(hits.line * len(hits.curves.edges.corners) + hits.edge)


def cut_off_moments(
    crossings: Crossings, spans: IntArray, cut: IntArray, weight: FloatArray, origin: FloatArray
) -> tuple[FloatArray, BoolArray]:
    """Integrate over what each cut separates, on the side its normal points out of.

    spans : (n,) spans that are cut; cut : (n,) cut they belong to, 0 to C - 1, all of one line. weight : (P,) per part.
    origin : (2,) from which moments are taken [mm].
    Returns (∫w, ∫w y, ∫w z), shape (C, 3), NaN where the cut does not separate the section, and whether it does, (C,).
    """
    cuts = _cuts(crossings, spans, cut)
    frame = EdgeMoments(crossings.hits.curves, crossings.hits.pieces, origin)
    pieces = frame.whole(np.arange(len(frame.pieces.edge)))
    triangles = _triangle_moments(crossings, pieces) * weight[crossings.hits.curves.mesh.part_of][:, None]
    moments, separates = np.zeros((len(cuts.line), 3)), np.zeros(len(cuts.line), bool)
    step = max(1, _VERTICES // len(triangles))
    for start in range(0, len(cuts.line), step):
        some = cuts.slice(start, start + step)
        below, cut_below, clean = _sides(some)
        lower = _lower_pieces(some, frame, pieces) * weight[crossings.hits.curves.mesh.part_of[some.triangle]][:, None]
        total = below.astype(float) @ triangles
        for column in range(3):
            total[:, column] += np.bincount(some.cut, lower[:, column] * cut_below, minlength=len(some.line))
        moments[start : start + step], separates[start : start + step] = total, clean
    moments[~separates] = np.nan
    return frame.in_section_axes(moments), separates


def _cuts(crossings: Crossings, spans: IntArray, cut: IntArray) -> _Cuts:
    count, size = int(cut.max(initial=-1)) + 1, len(crossings.hits.curves.mesh.triangles)
    line = np.zeros(count, np.int64)
    line[cut] = crossings.span_line[spans]
    # a span may be cut more than once (alone and with the others of its line): repeat its intervals for each
    first = crossings.span_first
    length = np.diff(np.append(first, len(crossings.span)))
    number = length[spans]
    where = np.repeat(first[spans], number) + np.arange(number.sum()) - np.repeat(np.cumsum(number) - number, number)
    keys = np.unique(np.repeat(cut, number) * size + crossings.triangle[where])
    return _Cuts(crossings, line, *np.divmod(keys, size))


def _sides(cuts: _Cuts) -> tuple[BoolArray, BoolArray, BoolArray]:
    """Whole triangles below (C, M), lower pieces below (J,), and whether each cut separates (C,)."""
    count, size = len(cuts.line), len(cuts.crossings.hits.curves.mesh.triangles)
    high = np.arange(count * size)
    high[cuts.keys] = count * size + np.arange(len(cuts.keys))
    a, b = _links(cuts, high)
    graph = sp.coo_matrix((np.ones(len(a), np.int8), (a, b)), shape=(count * size + len(cuts.keys),) * 2)
    _, label = connected_components(graph, directed=False)
    is_low = np.zeros(int(label.max()) + 1, bool)
    is_low[label[cuts.keys]] = True
    clean = np.ones(count, bool)
    clean[cuts.cut[is_low[label[high[cuts.keys]]]]] = False
    below = is_low[label[: count * size]]
    cut_below = below[cuts.keys].copy()
    below[cuts.keys] = False
    return below.reshape(count, size), cut_below, clean


def _links(cuts: _Cuts, high: IntArray) -> tuple[IntArray, IntArray]:
    """Pairs of connected vertices: away from the cut, and along its two sides."""
    curves = cuts.crossings.hits.curves
    size, edge_count = len(curves.mesh.triangles), len(curves.edges.corners)
    inner = np.flatnonzero(curves.edges.triangles[:, 1] >= 0)
    near = np.unique((cuts.cut[:, None] * edge_count + curves.edges.of_triangle[cuts.triangle]).ravel())
    whole = np.ones((len(cuts.line), edge_count), bool)
    whole.ravel()[near] = False
    cut, number = np.nonzero(whole[:, inner])
    sides = curves.edges.triangles[inner[number]] + size * cut[:, None]

    cut, edge = np.divmod(near, edge_count)
    cut, edge = cut[curves.edges.triangles[edge, 1] >= 0], edge[curves.edges.triangles[edge, 1] >= 0]
    crossed = np.isin(cuts.line[cut] * edge_count + edge, cuts.crossed_edges)
    heights = curves.mesh.nodes[curves.edges.corners[edge, 0]] @ cuts.crossings.normal
    above = heights + tolerance(curves) >= cuts.level[cut]
    low = curves.edges.triangles[edge] + size * cut[:, None]
    lower, upper = low[crossed | ~above], high[low[crossed | above]]
    both = np.concatenate([sides, lower, upper])
    return both[:, 0], both[:, 1]


def _triangle_moments(crossings: Crossings, pieces: FloatArray) -> FloatArray:
    """Green's integrals round every triangle, (M, 3), from those of the pieces (J, 3)."""
    curves = crossings.hits.curves
    edges = curves.edges
    per_edge = np.stack(
        [np.bincount(crossings.hits.pieces.edge, pieces[:, k], minlength=len(edges.corners)) for k in range(3)], axis=1
    )
    first = edges.triangles[edges.of_triangle, 0] == np.arange(len(edges.of_triangle))[:, None]
    result: FloatArray = np.einsum("me,mek->mk", np.where(first, 1.0, -1.0), per_edge[edges.of_triangle])
    return result


def _lower_pieces(cuts: _Cuts, frame: EdgeMoments, pieces: FloatArray) -> FloatArray:
    """Green's integrals of the part of each cut triangle below its line, (J, 3)."""
    hits, edges = cuts.crossings.hits, frame.curves.edges
    of = edges.of_triangle[cuts.triangle]
    first = np.searchsorted(frame.pieces.edge, of.ravel(), side="left")
    count = np.searchsorted(frame.pieces.edge, of.ravel(), side="right") - first
    which = np.repeat(np.arange(of.size), count)
    piece = first[which] + np.arange(len(which)) - np.repeat(np.cumsum(count) - count, count)
    pair = which // 3
    sign = np.where(edges.triangles[frame.pieces.edge[piece], 0] == cuts.triangle[pair], 1.0, -1.0)
    level, line = cuts.level[cuts.cut[pair]], cuts.line[cuts.cut[pair]]
    slack = tolerance(frame.curves)
    fully = frame.pieces.high[piece] + slack < level
    partly = (frame.pieces.low[piece] + slack < level) & ~fully
    values = np.where(fully[:, None], pieces[piece], 0.0)
    keys = hits.line * len(frame.pieces.edge) + hits.piece
    order = np.argsort(keys)
    wanted = line[partly] * len(frame.pieces.edge) + piece[partly]
    values[partly] = frame.below(hits, order[np.searchsorted(keys[order], wanted)])
    return np.stack([np.bincount(pair, sign * values[:, k], minlength=len(cuts.triangle)) for k in range(3)], axis=1)
