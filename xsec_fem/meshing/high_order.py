"""Elevation of triangles to order p: edge nodes by equal division or from a curve, inner nodes by smooth blending.

The displacement d(e) of a curved edge from its chord, e = l2 - l1 in [-1, 1] along it, enters the triangle as
4 l1 l2 / (1 - e²) d(e) (Szabo and Babuska, Finite Element Analysis, 1991, blending functions). Since d is a polynomial
of degree p that vanishes at both ends, the quotient is one of degree p - 2 and the map stays of degree p; its
derivatives shrink with the size of the element as fast as those of the curve, which keeps the order of convergence.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.reference_triangle import lagrange_triangle, lattice

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_SIDES = np.array([[0, 1], [1, 2], [2, 0]])


@dataclass(frozen=True)
class CurvedEdges:
    """Edges whose nodes lie on a curve.

    `ends` (E, 2) are corner node numbers, `nodes` (E, p-1, 2) the inner edge nodes walking from the first end to the
    second.
    """

    ends: IntArray
    nodes: FloatArray


def elevate(nodes: FloatArray, corners: IntArray, order: int, curved: CurvedEdges) -> tuple[FloatArray, IntArray]:
    """Return nodes, shape (N', 2) [mm], and triangles, shape (M, n), of order p over the linear triangles `corners` (M, 3).

    `nodes` (N, 2) are the corner nodes: they keep their numbers; then come the edge nodes, edge by edge, and the inner nodes,
    triangle by triangle. Raises ValueError when an edge in `curved` is no triangle's edge. Source: Szabo & Babuska 1991
    (module docstring).
    """
    if order == 1:
        return nodes, corners
    ends, edge_of, forward = triangle_edges(corners)
    steps = (np.arange(1, order) / order)[:, None]
    first, second = nodes[ends[:, 0], None], nodes[ends[:, 1], None]
    chords = first + steps * (second - first)
    on_edges = chords.copy()
    if len(curved.ends):
        low_first = curved.ends[:, 0] < curved.ends[:, 1]
        where = _find_edges(ends, np.sort(curved.ends, axis=1))
        on_edges[where] = np.where(low_first[:, None, None], curved.nodes, curved.nodes[:, ::-1])
    triangles, inner = _numbered(len(nodes), corners, order, edge_of, forward, len(ends))
    straight = lattice(order)[3 * order :] / order
    weights = lagrange_triangle(1).values(straight)
    inside = np.einsum("qk,mkd->mqd", weights, nodes[corners])
    bent = np.flatnonzero(np.isin(edge_of, np.flatnonzero((on_edges != chords).any(axis=(1, 2)))).any(axis=1))
    if len(bent) and inner:
        shift = (on_edges - chords)[edge_of[bent]]
        shift = np.where(forward[bent, :, None, None], shift, shift[:, :, ::-1])
        inside[bent] += np.einsum("sqj,msjd->mqd", _blending(order), shift)
    return np.vstack([nodes, on_edges.reshape(-1, 2), inside.reshape(-1, 2)]), triangles


def change_order(nodes: FloatArray, triangles: IntArray, order: int) -> tuple[FloatArray, IntArray]:
    """Return nodes and triangles of order p at the points of the map of the given triangles (of any order q, 1 to 5).

    Their shape is (N, 2) [mm] and (M, n), n the nodes of a triangle of order p. Edge nodes of two neighbours agree because
    both sides carry the same polynomial. Edges with equal ends and different inner nodes (a slit one edge long) stay apart.
    """
    own = _order(triangles)
    if own == order:
        return nodes, triangles
    corners = triangles[:, :3]
    middle = triangles[:, [3, 3 + own - 1, 3 + 2 * (own - 1)]] if own > 1 else np.zeros_like(corners)
    last = triangles[:, [own + 1, 2 * own, 3 * own - 1]] if own > 1 else np.zeros_like(corners)
    ends, edge_of, forward = triangle_edges(corners, np.minimum(middle, last))
    values = lagrange_triangle(own).values(lattice(order) / order)
    places = np.einsum("qk,mkd->mqd", values, nodes[triangles])
    raised, _ = _numbered(len(nodes), corners, order, edge_of, forward, len(ends))
    result = np.zeros((len(nodes) + len(ends) * (order - 1) + len(corners) * (order - 1) * (order - 2) // 2, 2))
    result[raised[:, 3:].ravel()] = places[:, 3:].reshape(-1, 2)
    result[corners.ravel()] = nodes[corners.ravel()]
    return result, raised


def triangle_edges(corners: IntArray, key: IntArray | None = None) -> tuple[IntArray, IntArray, npt.NDArray[np.bool_]]:
    """Return the edges of triangles (M, 3): ends, shape (E, 2), low number first; edge and direction of each side, shape (M, 3).

    Direction is True where the triangle walks from the lower to the higher number. `key` (M, 3), one number per side,
    keeps edges with equal ends apart.
    """
    pairs = corners[:, _SIDES]
    low, high = pairs.min(axis=2).ravel(), pairs.max(axis=2).ravel()
    size = int(corners.max()) + 1
    code = low * size + high
    if key is not None:
        code = np.unique(np.column_stack([code, key.ravel()]), axis=0, return_inverse=True)[1].ravel()
    _, first, edge_of = np.unique(code, return_index=True, return_inverse=True)
    ends = np.column_stack([low[first], high[first]])
    return ends, edge_of.reshape(corners.shape), pairs[:, :, 0] < pairs[:, :, 1]


def folded(nodes: FloatArray, triangles: IntArray) -> npt.NDArray[np.bool_]:
    """Return True, shape (M,), where det J <= 0 at a node or the centre of a triangle; the corners run counter-clockwise."""
    element = lagrange_triangle(_order(triangles))
    gradients = element.gradients(np.vstack([element.nodes, [[1 / 3, 1 / 3]]]))
    jacobian = np.einsum("qnr,mnd->mqdr", gradients, nodes[triangles])
    det = jacobian[..., 0, 0] * jacobian[..., 1, 1] - jacobian[..., 0, 1] * jacobian[..., 1, 0]
    result: npt.NDArray[np.bool_] = det.min(axis=1) <= 0
    return result


def _order(triangles: IntArray) -> int:
    return {3: 1, 6: 2, 10: 3, 15: 4, 21: 5}[triangles.shape[1]]


def _numbered(
    count: int, corners: IntArray, order: int, edge_of: IntArray, forward: npt.NDArray[np.bool_], edges: int
) -> tuple[IntArray, int]:
    """Return the triangles of order p with new numbers for edge and inner nodes, and the inner nodes per triangle."""
    per_edge, inner = order - 1, (order - 1) * (order - 2) // 2
    along = np.arange(per_edge)
    sides = count + edge_of[:, :, None] * per_edge + np.where(forward[:, :, None], along, along[::-1])
    inside = count + edges * per_edge + np.arange(len(corners))[:, None] * inner + np.arange(inner)
    return np.hstack([corners, sides.reshape(len(corners), -1), inside]), inner


def _find_edges(ends: IntArray, wanted: IntArray) -> IntArray:
    """Return the row in `ends` (sorted) of each wanted pair of ends, lower number first."""
    size = int(max(ends.max(), wanted.max())) + 1
    codes, wish = ends[:, 0] * size + ends[:, 1], wanted[:, 0] * size + wanted[:, 1]
    where = np.minimum(np.searchsorted(codes, wish), len(codes) - 1)
    if (codes[where] != wish).any():
        raise ValueError(f"no triangle has the edge {wanted[codes[where] != wish][0].tolist()}")
    return np.asarray(where, np.int64)


@lru_cache
def _blending(order: int) -> FloatArray:
    """(3, n inner, p-1): how each inner node follows the displaced nodes of each side."""
    points = lattice(order)[3 * order :] / order
    bary = np.column_stack([1 - points.sum(axis=1), points])
    nodes = 2 * np.arange(order + 1) / order - 1
    result = np.zeros((3, len(points), order - 1))
    for side, (i, j) in enumerate(_SIDES):
        e = bary[:, j] - bary[:, i]
        for k in range(1, order):
            others = np.delete(nodes, k)
            lagrange = np.prod((e[:, None] - others) / (nodes[k] - others), axis=1)
            result[side, :, k - 1] = 4 * bary[:, i] * bary[:, j] / (1 - e**2) * lagrange
    return result
