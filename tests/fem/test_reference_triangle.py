"""The Lagrange triangles of degree 1 to 5 have these properties:

A  nodal: basis function i is 1 at node i and 0 at every other node
B  partition of unity: the basis sums to 1 and its gradients to 0, everywhere
C  complete: every monomial up to the degree is interpolated exactly
D  no more than complete: every degree has a monomial one degree higher that is not
E  gradients are the derivatives of the values
F  reflected numbering: swapping corners 1 and 2 gives the same nodes in the reflected order, and twice is nothing
G  the numbering is that of gmsh
"""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.fem.reference_triangle import (
    LagrangeTriangle,
    lagrange_triangle,
    lattice,
    node_count,
    reflected_numbering,
)

# round-off of a basis found by inverting a Vandermonde matrix: condition 7e3 at degree 5, times 2e-16, times a sum of 21
ROUND_OFF = 1e-11

every_degree = pytest.mark.parametrize("degree", range(1, 6))


def inside(count: int = 40) -> np.ndarray:
    points = np.random.default_rng(1).random((count, 2))
    return np.where(points.sum(axis=1, keepdims=True) > 1, 1 - points, points)


def monomials(degree: int) -> list[tuple[int, int]]:
    return [(i, degree - i) for i in range(degree + 1)]


@every_degree
def test_a_nodal(degree: int) -> None:
    element = lagrange_triangle(degree)
    np.testing.assert_allclose(element.values(element.nodes), np.eye(node_count(degree)), atol=ROUND_OFF)


@every_degree
def test_b_partition_of_unity(degree: int) -> None:
    element = lagrange_triangle(degree)
    np.testing.assert_allclose(element.values(inside()).sum(axis=1), 1, atol=ROUND_OFF)
    np.testing.assert_allclose(element.gradients(inside()).sum(axis=1), 0, atol=10 * ROUND_OFF)


def interpolation_error(element: LagrangeTriangle, i: int, j: int) -> float:
    at_nodes = element.nodes[:, 0] ** i * element.nodes[:, 1] ** j
    exact = inside()[:, 0] ** i * inside()[:, 1] ** j
    return float(np.abs(element.values(inside()) @ at_nodes - exact).max())


@pytest.mark.parametrize(
    ("degree", "power"), [(p, (i, j)) for p in range(1, 6) for q in range(p + 1) for i, j in monomials(q)]
)
def test_c_complete(degree: int, power: tuple[int, int]) -> None:
    assert interpolation_error(lagrange_triangle(degree), *power) < ROUND_OFF


@every_degree
def test_d_no_more_than_complete(degree: int) -> None:
    # the interpolation error of y^(p+1) at p + 1 even points is at least (1/p)^(p+1)/4: 2e-5 at degree 5
    worst = min(interpolation_error(lagrange_triangle(degree), *power) for power in monomials(degree + 1))
    assert worst > 1e-5


@every_degree
def test_e_gradients_are_derivatives(degree: int) -> None:
    element, h = lagrange_triangle(degree), 1e-4
    differences = [
        (8 * (element.values(inside() + h * e) - element.values(inside() - h * e))
         - (element.values(inside() + 2 * h * e) - element.values(inside() - 2 * h * e))) / (12 * h)
        for e in np.eye(2)
    ]  # fmt: skip
    # fourth-order differences: h⁴ times a fifth derivative (up to 5e5 at degree 5) = 5e-11, round-off 1e-12/h = 1e-8
    np.testing.assert_allclose(element.gradients(inside()), np.stack(differences, axis=-1), atol=1e-7)


@every_degree
def test_f_reflected_numbering(degree: int) -> None:
    turned, nodes = reflected_numbering(degree), lagrange_triangle(degree).nodes
    np.testing.assert_array_equal(turned[:3], [0, 2, 1])
    np.testing.assert_array_equal(turned[turned], np.arange(node_count(degree)))
    np.testing.assert_array_equal(nodes[turned], nodes[:, ::-1])


@every_degree
def test_g_numbering_of_gmsh(degree: int) -> None:
    gmsh = pytest.importorskip("gmsh")
    gmsh.initialize(readConfigFiles=False, interruptible=False)
    try:
        gmsh.option.setNumber("General.Terminal", 0)
        kind = gmsh.model.mesh.getElementType("triangle", degree)
        _, _, order, count, coordinates, _ = gmsh.model.mesh.getElementProperties(kind)
    finally:
        gmsh.finalize()
    assert (order, count) == (degree, node_count(degree))
    # gmsh gives its coordinates to about 12 digits
    np.testing.assert_allclose(np.reshape(coordinates, (-1, 2)), lagrange_triangle(degree).nodes, atol=1e-12)


@every_degree
def test_lattice_has_every_position_once(degree: int) -> None:
    points = lattice(degree)
    assert len({tuple(p) for p in points.tolist()}) == len(points) == node_count(degree)
    assert points.min() == 0
    assert points.sum(axis=1).max() == degree


def test_triangles_are_kept() -> None:
    assert lagrange_triangle(3) is lagrange_triangle(3)
