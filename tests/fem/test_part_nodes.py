"""Nodes split by part, and gradients that are never averaged across parts."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.part_nodes import PartNodes

every_order = pytest.mark.parametrize("order", range(1, 6))


def halves(order: int) -> Mesh:
    mesh = structured.moved(structured.rectangle(2, 1, 4, 2, order), 20)
    left = structured.rectangle(2, 1, 4, 2, order).nodes[mesh.triangles[:, :3]].mean(axis=1)[:, 0] < 0
    return structured.relabelled(mesh, np.where(left, 0, 1), ("left", "right"))


@every_order
def test_nodes_of_the_interface_come_twice(order: int) -> None:
    mesh = halves(order)
    numbering = PartNodes.of(mesh)
    assert len(numbering.node) == len(mesh.nodes) + 2 * order + 1
    assert (np.diff(numbering.part) >= 0).all()
    np.testing.assert_array_equal(numbering.node[numbering.triangles], mesh.triangles)
    np.testing.assert_array_equal(
        numbering.part[numbering.triangles], np.repeat(mesh.part_of[:, None], mesh.triangles.shape[1], 1)
    )
    np.testing.assert_array_equal(numbering.positions, mesh.nodes[numbering.node])


@every_order
@pytest.mark.parametrize("curved", [False, True])
def test_gradients_of_polynomials_of_the_degree_are_exact(order: int, curved: bool) -> None:
    """On curved sides only linear functions are (isoparametric elements hold no more)."""
    mesh = structured.ring_sector(0.5, 1.0, (0, 90), 3, 2, order) if curved else halves(order)
    degree = 1 if curved else order
    powers = [(i, j) for i in range(degree + 1) for j in range(degree + 1 - i)]
    y, z = mesh.nodes.T
    u = np.column_stack([y**i * z**j for i, j in powers])
    found = PartNodes.of(mesh).mean_gradients(u)
    y, z = PartNodes.of(mesh).positions.T
    expected = np.stack(
        [np.stack([i * y ** max(i - 1, 0) * z**j, j * y**i * z ** max(j - 1, 0)], axis=-1) for i, j in powers], axis=1
    )
    np.testing.assert_allclose(
        found, expected, atol=1e-10
    )  # differentiated round-off of a degree-5 basis on sides of 0.2


@every_order
def test_a_kink_between_parts_stays_sharp(order: int) -> None:
    """u = |s| across the interface: each part keeps its own slope, at the interface too."""
    mesh = halves(order)
    across = np.array([np.cos(np.radians(20)), np.sin(np.radians(20))])
    u = np.abs(mesh.nodes @ across)[:, None]
    numbering = PartNodes.of(mesh)
    expected = np.where(numbering.part[:, None] == 0, -across, across)
    np.testing.assert_allclose(numbering.mean_gradients(u)[:, 0], expected, atol=1e-11)


@every_order
def test_inside_a_part_it_is_the_mean_over_its_triangles(order: int) -> None:
    mesh = halves(order)
    u = np.random.default_rng(0).normal(size=(len(mesh.nodes), 1))
    numbering = PartNodes.of(mesh)
    found = numbering.mean_gradients(u)[:, 0]
    total, count = np.zeros((len(numbering.node), 2)), np.zeros(len(numbering.node))
    table = mesh.element.gradients(mesh.element.nodes)
    for nodes, pairs in zip(mesh.triangles, numbering.triangles, strict=True):
        for place, pair in enumerate(pairs):
            J = table[place].T @ mesh.nodes[nodes]
            total[pair] += np.linalg.solve(J, table[place].T @ u[nodes, 0])
            count[pair] += 1
    np.testing.assert_allclose(found, total / count[:, None], atol=1e-9 * np.abs(total).max())
