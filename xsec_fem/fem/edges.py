"""Edges of a mesh: which triangles share them, and which lie on the free boundary."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp
from scipy.sparse.csgraph import connected_components

from xsec_fem.fem.mesh import Mesh

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@dataclass(frozen=True)
class Edges:
    """All edges once.

    Attributes
    ----------
    corners : (K, 2) node numbers of the ends, the smaller first.
    triangles : (K, 2) the triangles on either side; the second is -1 on the free boundary.
    local : (K, 2) the edge's number 0, 1, 2 in each of them (-1 likewise).
    of_triangle : (M, 3) edge number of each triangle's edge 0, 1, 2.
    """

    corners: IntArray
    triangles: IntArray
    local: IntArray
    of_triangle: IntArray

    @property
    def free(self) -> IntArray:
        """Numbers of the edges on the free boundary, shape (F,)."""
        return np.flatnonzero(self.triangles[:, 1] < 0)


def mesh_edges(mesh: Mesh) -> Edges:
    """Return the edges of a mesh, arrays of shape (K, 2) and (M, 3); an edge of more than two triangles raises ValueError."""
    count = len(mesh.triangles)
    ends = np.sort(mesh.triangles[:, [[0, 1], [1, 2], [2, 0]]].reshape(-1, 2), axis=1)
    keys = ends[:, 0] * len(mesh.nodes) + ends[:, 1]
    _, first, number, used = np.unique(keys, return_index=True, return_inverse=True, return_counts=True)
    if used.max() > 2:
        a, b = ends[first[np.argmax(used)]]
        raise ValueError(
            f"the edge between nodes {a} and {b} belongs to {used.max()} triangles; at most 2 can share one"
        )
    order = np.argsort(number, kind="stable")
    start = np.concatenate([[0], np.cumsum(used)[:-1]])
    sides = np.full((len(first), 2), -1)
    sides[:, 0] = order[start]
    sides[used == 2, 1] = order[start[used == 2] + 1]
    triangles = np.where(sides >= 0, sides // 3, -1)
    local = np.where(sides >= 0, sides % 3, -1)
    return Edges(ends[first], triangles, local, number.reshape(count, 3))


def edges_between(mesh: Mesh, edges: Edges, first: Collection[str], second: Collection[str]) -> IntArray:
    """Return the edges, shape (K,), shared by a triangle of a part in `first` and one of a part in `second`."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    sides = [np.array([name in names for name in mesh.part_names]) for names in (first, second)]
    a, b = mesh.part_of[edges.triangles[inner]].T
    found: IntArray = inner[(sides[0][a] & sides[1][b]) | (sides[1][a] & sides[0][b])]
    return found


def edges_round(edges: Edges, inside: npt.NDArray[np.bool_]) -> IntArray:
    """Return the edges, shape (K,), with one triangle inside and one outside; `inside` (M,) marks the triangles."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    sides = inside[edges.triangles[inner]]
    between: IntArray = inner[sides[:, 0] != sides[:, 1]]
    return between


def connected_bodies(mesh: Mesh, edges: Edges, without: IntArray | None = None) -> IntArray:
    """Return the body number of each triangle, shape (M,): triangles are connected when they share an edge.

    `without` are edge numbers that do not connect (a joint taken out).
    """
    connects = edges.triangles[:, 1] >= 0
    if without is not None:
        connects[without] = False
    inner = edges.triangles[connects]
    graph = sp.coo_matrix((np.ones(len(inner)), (inner[:, 0], inner[:, 1])), shape=(len(mesh.triangles),) * 2)
    return np.asarray(connected_components(graph, directed=False)[1], dtype=np.int64)
