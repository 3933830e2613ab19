"""Nested dissection: a permutation whose factor is smaller than that of the mesh's own order."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.assembly import stiffness_matrix
from xsec_fem.fem.dissection import dissection_numbering
from xsec_fem.fem.linear_solve import factorise
from xsec_fem.fem.mesh import Mesh

every_order = pytest.mark.parametrize("order", range(1, 6))

MESHES = {
    "one triangle": lambda p: structured.triangle([(0, 0), (1, 0), (0, 1)], 1, p),
    "two triangles": lambda p: structured.rectangle(1, 1, 1, 1, p),
    "rectangle": lambda p: structured.rectangle(2, 1, 10, 5, p),
    "ring": lambda p: structured.ring_sector(0.8, 1.0, (0, 360), 40, 2, p),
    "angle": lambda p: structured.l_shape(10, 1, p),
}


@every_order
@pytest.mark.parametrize("name", MESHES)
def test_it_is_a_permutation(name: str, order: int) -> None:
    mesh = MESHES[name](order)
    np.testing.assert_array_equal(np.sort(dissection_numbering(mesh)), np.arange(len(mesh.nodes)))


def entries(mesh: Mesh, numbering: np.ndarray) -> int:
    lu = factorise(stiffness_matrix(mesh, np.eye(2)[None], numbering), numbering, 0).lu
    return int(lu.L.nnz + lu.U.nnz)


@pytest.mark.parametrize("order", [1, 2, 4])
def test_fill_is_below_that_of_the_natural_order(order: int) -> None:
    mesh = structured.rectangle(1, 1, 32 // order, 32 // order, order)
    natural = entries(mesh, np.arange(len(mesh.nodes)))
    # n log n against n^1.5: a factor of 2 on a thousand nodes at degree 1, more at higher degree
    assert entries(mesh, dissection_numbering(mesh)) < natural / 2


def test_fill_grows_almost_linearly() -> None:
    """n log n: four times the nodes, less than 4 (1 + log 4/log n) = 5.2 times the entries; n^1.5 would be 8."""
    small, large = (structured.rectangle(1, 1, n, n, 2) for n in (16, 32))
    ratio = entries(large, dissection_numbering(large)) / entries(small, dissection_numbering(small))
    assert ratio < 5.5


def test_the_last_nodes_separate_the_mesh() -> None:
    """Eliminating last what two halves share: without the last nodes the rest falls apart into two like parts."""
    mesh = structured.rectangle(4, 1, 32, 8, 1)
    numbering = dissection_numbering(mesh)
    separator = numbering >= len(mesh.nodes) - 9  # 9 nodes on a line across
    keep = ~separator[mesh.triangles].any(axis=1)
    centre = mesh.nodes[mesh.triangles[keep]].mean(axis=1)[:, 0]
    assert np.ptp(mesh.nodes[separator, 0]) < 0.5
    middle = mesh.nodes[separator, 0].mean()
    left, right = (centre < middle).sum(), (centre > middle).sum()
    assert min(left, right) > 0.4 * keep.sum()
