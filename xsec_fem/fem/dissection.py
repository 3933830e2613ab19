"""Nested dissection from coordinates: the elimination order that keeps the factor of a plane mesh small.

The triangles are halved again and again, each set across its longest extent in one of four directions. A node that only
triangles of one set use belongs to that set; a node that two halves share is eliminated after both (A. George, Nested
dissection of a regular finite element mesh, SIAM J. Numer. Anal. 10, 1973). All sets of a level are halved at once.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh

IntArray = npt.NDArray[np.int64]

_LEAF = 8  # triangles left in a set when halving stops; 4 to 16 measure alike
_SHARE = 0.999  # positions inside a set are scaled to stay below the next set's number
_DIRECTIONS = np.array([[1.0, 0.0], [0.0, 1.0], [0.70710678, 0.70710678], [0.70710678, -0.70710678]])


def bisection_codes(mesh: Mesh) -> IntArray:
    """Return the path of each triangle through the halvings, shape (M,): one bit a level, the first halving in the highest bit."""
    levels = max(0, int(np.floor(np.log2(max(len(mesh.triangles), 1) / _LEAF))))
    centre = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)
    projections = centre @ _DIRECTIONS.T
    order = np.arange(len(centre))  # triangles sorted by set
    bounds = np.array([0, len(centre)])
    codes = np.zeros(len(centre), np.int64)
    for _ in range(levels):
        local = projections[order]
        low = np.minimum.reduceat(local, bounds[:-1])
        extent = np.maximum.reduceat(local, bounds[:-1]) - low
        direction = np.argmax(extent, axis=1)
        sizes = np.diff(bounds)
        sets = np.arange(len(sizes))
        set_of = np.repeat(sets, sizes)
        scale = _SHARE / np.maximum(extent[sets, direction], np.finfo(float).tiny)
        # one key, set number plus position in the set: a plain sort of numbers is much faster than a sort by two keys
        key = set_of + (local[np.arange(len(order)), direction[set_of]] - low[sets, direction][set_of]) * scale[set_of]
        order = order[np.argsort(key)]
        middle = bounds[:-1] + sizes // 2
        codes[order] = 2 * codes[order] + (np.arange(len(order)) >= middle[set_of])
        bounds = np.column_stack([bounds[:-1], middle]).ravel()
        bounds = np.append(bounds, len(order))
    return codes


def dissection_numbering(mesh: Mesh) -> IntArray:
    """Return the place of each node in the elimination order, a permutation of shape (N,). Source: George 1973."""
    codes = bisection_codes(mesh)
    size = len(mesh.nodes)
    flat = mesh.triangles.ravel()
    by_node = np.argsort(flat, kind="stable")
    starts = np.searchsorted(flat[by_node], np.arange(size))
    repeated = np.repeat(codes, mesh.triangles.shape[1])[by_node]
    low, high = np.minimum.reduceat(repeated, starts), np.maximum.reduceat(repeated, starts)
    return place_behind_sets(low, high)


def place_behind_sets(low: IntArray, high: IntArray) -> IntArray:
    """Return the places (n,) in the elimination order of unknowns whose triangles' paths reach from `low` (n,) to `high` (n,).

    The triangles of an unknown share the leading bits of their paths; the bits below the first difference are filled with
    ones, which puts the unknown behind everything in the set it separates.
    """
    below = np.frexp((low ^ high).astype(np.float64))[1].astype(np.int64)
    last = high | ((np.int64(1) << below) - 1)
    order = np.lexsort((below, last))
    places = np.empty(len(order), np.int64)
    places[order] = np.arange(len(order))
    return places
