"""Maps, determinants and batches against sums and differences."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.mapping import batches, curved_rule, map_points, physical_gradients, straight_rule

every_order = pytest.mark.parametrize("order", range(1, 6))
INSIDE = np.array([[0.2, 0.3], [0.1, 0.7], [1 / 3, 1 / 3], [0.0, 0.0], [0.5, 0.5]])


def mixed(order: int) -> structured.Mesh:
    """A disc: straight triangles in the middle, curved ones outside."""
    return structured.disc(1.5, 2, order)


@every_order
def test_every_triangle_comes_once(order: int) -> None:
    seen = np.concatenate([batch.elements for batch in batches(mixed(order))])
    np.testing.assert_array_equal(np.sort(seen), np.arange(len(mixed(order).triangles)))


@every_order
def test_straight_triangles_have_one_jacobian_and_curved_ones_one_a_point(order: int) -> None:
    mesh = mixed(order)
    for batch in batches(mesh):
        curved = mesh.curved[batch.elements]
        assert curved.all() or not curved.any()
        assert batch.det.shape[1] == (len(batch.rule.weights) if curved.all() else 1)


@every_order
def test_weights_sum_to_the_area(order: int) -> None:
    mesh = structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 3, order)
    corner = structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 1, 1).nodes[1:]
    y, z = corner.T
    shoelace = 0.5 * (y * np.roll(z, -1) - z * np.roll(y, -1)).sum()
    assert sum(batch.weights.sum() for batch in batches(mesh)) == pytest.approx(shoelace, rel=1e-14)


@every_order
def test_rules_know_their_degree(order: int) -> None:
    assert straight_rule(order).exact_to >= max(2 * order, 4)
    assert curved_rule(order).exact_to >= 4 * order - 2


@pytest.mark.parametrize("order", range(2, 6))
def test_area_of_a_curved_mesh_is_the_area_within_its_side_curves(order: int) -> None:
    """Green's theorem along the free sides, which are polynomials of the order: exact up to round-off."""
    mesh = structured.ring_sector(0.5, 1.0, (0, 90), 2, 1, order)
    area = sum(batch.weights.sum() for batch in batches(mesh))
    # the exact area differs by the geometry's error only
    assert area == pytest.approx(np.pi / 4 * 0.75, rel=10.0 ** (-order))
    finer = structured.ring_sector(0.5, 1.0, (0, 90), 4, 2, order)
    error = [abs(sum(b.weights.sum() for b in batches(m)) - np.pi / 4 * 0.75) for m in (mesh, finer)]
    # even nodes: the area error of the side curves is of order p + 1 (odd p) or p + 2 (even p)
    assert np.log2(error[0] / error[1]) > order + 1 + (order % 2 == 0) - 0.3


@every_order
@pytest.mark.parametrize("straight", [True, False])
def test_jacobian_is_the_derivative_of_the_map(order: int, straight: bool) -> None:
    mesh = structured.moved(structured.rectangle(1, 2, 1, 1, order), 30) if straight else mixed(order)
    elements = np.arange(len(mesh.triangles))
    position, jacobian, det = map_points(mesh, elements, INSIDE, straight)
    h = 1e-5
    for column, step in enumerate(np.eye(2) * h):
        there, _, _ = map_points(mesh, elements, INSIDE + step, straight)
        back, _, _ = map_points(mesh, elements, INSIDE - step, straight)
        slope = np.broadcast_to(jacobian[..., column], position.shape)
        np.testing.assert_allclose(
            (there - back) / (2 * h), slope, atol=1e-8
        )  # h² times a third derivative, and 1e-16/h
    expected = jacobian[..., 0, 0] * jacobian[..., 1, 1] - jacobian[..., 0, 1] * jacobian[..., 1, 0]
    np.testing.assert_allclose(det, expected, rtol=1e-14)


@every_order
def test_straight_and_curved_path_agree_on_straight_triangles(order: int) -> None:
    mesh = structured.star_polygon([1, 0.8, 1.2, 0.9], 2, order)
    elements = np.arange(len(mesh.triangles))
    for one, other in zip(
        map_points(mesh, elements, INSIDE, True), map_points(mesh, elements, INSIDE, False), strict=True
    ):
        np.testing.assert_allclose(np.broadcast_to(one, other.shape), other, atol=1e-12)


@every_order
def test_gradients_of_linear_functions_are_exact_on_curved_triangles_too(order: int) -> None:
    mesh = mixed(order)
    u = np.column_stack([mesh.nodes @ [2.0, -3.0] + 5.0, mesh.nodes[:, 1]])
    for batch in batches(mesh):
        gradients = batch.gradients(u)
        np.testing.assert_allclose(
            gradients[:, :, 0], np.broadcast_to([2.0, -3.0], (*gradients.shape[:2], 2)), atol=1e-11
        )
        np.testing.assert_allclose(
            gradients[:, :, 1], np.broadcast_to([0.0, 1.0], (*gradients.shape[:2], 2)), atol=1e-11
        )


@every_order
def test_flux_is_adj_j_times_q(order: int) -> None:
    rng = np.random.default_rng(0)
    for batch in batches(mixed(order)):
        q = rng.normal(size=(*batch.points.shape[:2], 3, 2))
        adjugate = np.linalg.inv(batch.jacobian) * batch.det[..., None, None]
        np.testing.assert_allclose(batch.flux(q), np.einsum("mqab,mqkb->mqka", np.broadcast_to(
            adjugate, (*batch.points.shape[:2], 2, 2)), q), atol=1e-12)  # fmt: skip


@every_order
def test_physical_gradients_solve_the_transposed_jacobian(order: int) -> None:
    mesh = mixed(order)
    elements = np.arange(len(mesh.triangles))
    u = np.random.default_rng(1).normal(size=(len(mesh.nodes), 2))
    _, jacobian, det = map_points(mesh, elements, INSIDE, False)
    found = physical_gradients(mesh.element, INSIDE, u[mesh.triangles], jacobian, det)
    reference = np.einsum("qnr,mnk->mqkr", mesh.element.gradients(INSIDE), u[mesh.triangles])
    np.testing.assert_allclose(np.einsum("mqrd,mqkr->mqkd", jacobian, found), reference, atol=1e-10)
