"""Slits: edges of the mesh along which the two sides come apart.

Every triangle-and-node incidence is a vertex of a graph; two incidences of one node are joined when their triangles share an edge
that stays whole. Each connected component becomes a node of its own. So the inner nodes of a slit double, its end on a free
edge doubles too, and an end inside the material, where the triangles go round, stays single.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp
from scipy.sparse.csgraph import connected_components

from xsec_fem.fem.edge_integrals import edge_nodes, local_edge_nodes
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh

IntArray = npt.NDArray[np.int64]


def open_slits(mesh: Mesh, edges: Edges, slit: IntArray) -> Mesh:
    """Return the mesh with the given edges (K,) opened: nodes of shape (N', 2) with N' >= N, same triangles, parts and places [mm].

    Edge numbers are those of `edges`; free edges among them change nothing.
    """
    whole = edges.triangles[:, 1] >= 0
    whole[slit] = False
    sides, local = edges.triangles[whole], edges.local[whole]
    per_triangle = mesh.triangles.shape[1]
    along = local_edge_nodes(mesh.order)
    here = sides[:, :1] * per_triangle + along[local[:, 0]]
    there = sides[:, 1:] * per_triangle + along[local[:, 1]][:, ::-1]  # the neighbour walks the edge the other way
    count = mesh.triangles.size
    graph = sp.coo_matrix((np.ones(here.size), (here.ravel(), there.ravel())), shape=(count, count))
    _, label = connected_components(graph, directed=False)
    # number the new nodes in the order of the old ones, so that a mesh without slits comes back unchanged
    old = mesh.triangles.ravel()
    _, first, number = np.unique(old * np.int64(count) + label, return_index=True, return_inverse=True)
    return replace(mesh, nodes=mesh.nodes[old[first]], triangles=number.reshape(mesh.triangles.shape))


def facing_edges(mesh: Mesh, edges: Edges) -> IntArray:
    """Return the pairs of free edges that lie on each other, the two sides of a slit, the lower number first, shape (K, 2).

    Their nodes have the same coordinates to the last digit, as those of an opened slit do.
    """
    free = edges.free
    places = mesh.nodes[edge_nodes(mesh, edges, free)]
    reverse = (places[:, 0] > places[:, -1])[:, 0] | (
        (places[:, 0, 0] == places[:, -1, 0]) & (places[:, 0, 1] > places[:, -1, 1])
    )
    places[reverse] = places[reverse, ::-1]
    _, first, number, count = np.unique(
        places.reshape(len(free), -1), axis=0, return_index=True, return_inverse=True, return_counts=True
    )
    number = number.ravel()
    twin = np.flatnonzero(count[number] == 2)
    later = twin[first[number[twin]] != twin]
    return np.column_stack([free[first[number[later]]], free[later]])
