"""Assembly against plain double loops; symmetry and null space of the matrix."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.assembly import add_at_nodes, element_loads, element_stiffness, stiffness_matrix
from xsec_fem.fem.mapping import batches
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.moduli import rotated_tensor

every_order = pytest.mark.parametrize("order", range(1, 6))
MESHES = pytest.mark.parametrize("curved", [False, True])

TENSORS = np.stack([rotated_tensor(3.0, 0.5, 20.0), rotated_tensor(1.0, 7.0, -65.0)])


def small(order: int, curved: bool) -> Mesh:
    if curved:
        mesh = structured.ring_sector(0.5, 1.0, (20, 110), 2, 1, order)
    else:
        mesh = structured.moved(structured.rectangle(2, 1, 2, 1, order), 25, 1.0, (1, 2))
    parts = np.arange(len(mesh.triangles)) % 2
    return structured.relabelled(mesh, parts, ("a", "b"))


def by_loops(mesh: Mesh, G: np.ndarray) -> np.ndarray:
    """∫ G grad v_i . grad v_j, one triangle, one point, one pair at a time, with inverses of J formed."""
    K = np.zeros((len(mesh.nodes),) * 2)
    for batch in batches(mesh):
        reference = batch.element.gradients(batch.rule.points)
        for m, nodes in enumerate(batch.nodes):
            for q, weight in enumerate(batch.rule.weights):
                J = batch.element.gradients(batch.rule.points[q : q + 1])[0].T @ mesh.nodes[nodes]
                gradients = reference[q] @ np.linalg.inv(J).T
                K[np.ix_(nodes, nodes)] += weight * np.linalg.det(J) * gradients @ G[batch.part[m]] @ gradients.T
    return K


@every_order
@MESHES
def test_matrix_against_double_loop(order: int, curved: bool) -> None:
    mesh = small(order, curved)
    found = stiffness_matrix(mesh, TENSORS, np.arange(len(mesh.nodes))).toarray()
    expected = by_loops(mesh, TENSORS)
    np.testing.assert_allclose(found, expected, atol=1e-12 * np.abs(expected).max())


@every_order
@MESHES
def test_matrix_is_symmetric_with_the_constants_as_null_space(order: int, curved: bool) -> None:
    mesh = small(order, curved)
    K = stiffness_matrix(mesh, TENSORS, np.arange(len(mesh.nodes))).toarray()
    size = np.abs(K).max()
    np.testing.assert_allclose(K, K.T, atol=1e-14 * size)
    np.testing.assert_allclose(K.sum(axis=0), 0, atol=1e-12 * size)
    values = np.linalg.eigvalsh(K)
    assert abs(values[0]) < 1e-12 * values[-1]
    assert values[1] > 1e-6 * values[-1]


@every_order
def test_energy_of_linear_functions(order: int) -> None:
    """u = a . x has energy a . (∫ G) a, on curved triangles too."""
    mesh = small(order, True)
    K = stiffness_matrix(mesh, TENSORS, np.arange(len(mesh.nodes)))
    integral = sum(np.einsum("mq,mab->ab", batch.weights, TENSORS[batch.part]) for batch in batches(mesh))
    energy = mesh.nodes.T @ (K @ mesh.nodes)
    np.testing.assert_allclose(energy, integral, rtol=1e-11, atol=1e-12)


@every_order
def test_numbering_permutes_rows_and_columns(order: int) -> None:
    mesh = small(order, False)
    numbering = np.random.default_rng(0).permutation(len(mesh.nodes))
    plain = stiffness_matrix(mesh, TENSORS, np.arange(len(mesh.nodes))).toarray()
    permuted = stiffness_matrix(mesh, TENSORS, numbering).toarray()
    np.testing.assert_allclose(permuted[np.ix_(numbering, numbering)], plain, atol=1e-12 * np.abs(plain).max())


@every_order
@MESHES
def test_element_matrices_add_up(order: int, curved: bool) -> None:
    mesh = small(order, curved)
    total = np.zeros((len(mesh.nodes),) * 2)
    n = mesh.triangles.shape[1]
    for batch in batches(mesh):
        for nodes, K in zip(batch.nodes, element_stiffness(batch, TENSORS), strict=True):
            total[np.ix_(nodes, nodes)] += K.reshape(n, n)
    expected = stiffness_matrix(mesh, TENSORS, np.arange(len(mesh.nodes))).toarray()
    np.testing.assert_allclose(total, expected, atol=1e-13 * np.abs(expected).max())


@every_order
@MESHES
def test_loads_against_double_loop(order: int, curved: bool) -> None:
    """∫ s v_i + ∫ q . grad v_i for two columns at a time."""
    mesh = small(order, curved)
    rng = np.random.default_rng(3)
    found, expected = np.zeros((len(mesh.nodes), 2)), np.zeros((len(mesh.nodes), 2))
    for batch in batches(mesh):
        s, q = rng.normal(size=(*batch.points.shape[:2], 2)), rng.normal(size=(*batch.points.shape[:2], 2, 2))
        add_at_nodes(found, batch.nodes, element_loads(batch, s, q))
        separately = element_loads(batch, s, None) + element_loads(batch, None, q)
        np.testing.assert_allclose(separately, element_loads(batch, s, q), atol=1e-13)
        for m, nodes in enumerate(batch.nodes):
            for k, weight in enumerate(batch.rule.weights):
                point = batch.rule.points[k : k + 1]
                J = batch.element.gradients(point)[0].T @ mesh.nodes[nodes]
                gradients = batch.element.gradients(point)[0] @ np.linalg.inv(J).T
                values = batch.element.values(point)[0]
                w = weight * np.linalg.det(J)
                expected[nodes] += w * (np.outer(values, s[m, k]) + gradients @ q[m, k].T)
    np.testing.assert_allclose(found, expected, atol=1e-12)


def test_a_load_needs_something() -> None:
    batch = next(batches(small(1, False)))
    with pytest.raises(ValueError, match=r"a load needs a scalar or a flux \(got None and None\)"):
        element_loads(batch, None, None)


def test_add_at_nodes_adds_repeated_nodes() -> None:
    total = np.ones((4, 2))
    add_at_nodes(total, np.array([[0, 1], [1, 3]]), np.arange(8.0).reshape(2, 2, 2))
    np.testing.assert_array_equal(total, [[1, 2], [1 + 2 + 4, 1 + 3 + 5], [1, 1], [7, 8]])
