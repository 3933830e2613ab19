"""Numbering of edges: a permutation that separates, with a smaller factor than the edges' own order."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.sparse as sp

from tests import structured
from xsec_fem.fem.edge_dissection import edge_numbering
from xsec_fem.fem.edges import mesh_edges
from xsec_fem.fem.linear_solve import factorise
from xsec_fem.fem.mesh import Mesh

MESHES = {
    "one triangle": structured.triangle([(0, 0), (1, 0), (0, 1)], 1, 1),
    "two triangles": structured.rectangle(1, 1, 1, 1, 2),
    "rectangle": structured.rectangle(2, 1, 20, 10, 1),
    "ring": structured.ring_sector(0.8, 1.0, (0, 360), 40, 2, 2),
}


@pytest.mark.parametrize("name", MESHES)
def test_it_is_a_permutation(name: str) -> None:
    edges = mesh_edges(MESHES[name])
    np.testing.assert_array_equal(np.sort(edge_numbering(MESHES[name], edges)), np.arange(len(edges.corners)))


def entries(mesh: Mesh, numbering: np.ndarray) -> int:
    """Entries of the factors of the graph Laplacian of edges that share a triangle."""
    of_triangle = numbering[mesh_edges(mesh).of_triangle]
    local = np.array([[2.0, -1, -1], [-1, 2, -1], [-1, -1, 2]]).ravel()
    rows, cols = np.repeat(of_triangle, 3, axis=1).ravel(), np.tile(of_triangle, 3).ravel()
    size = len(numbering)
    matrix = sp.coo_matrix((np.tile(local, len(of_triangle)), (rows, cols)), shape=(size, size)).tocsc()
    lu = factorise(matrix, numbering, 0).lu
    return int(lu.L.nnz + lu.U.nnz)


def test_fill_is_below_half_that_of_the_natural_order() -> None:
    mesh = structured.rectangle(1, 1, 24, 24, 1)
    edges = mesh_edges(mesh)
    assert entries(mesh, edge_numbering(mesh, edges)) < 0.5 * entries(mesh, np.arange(len(edges.corners)))
