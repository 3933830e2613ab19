"""What makes a Raviart-Thomas element: dimension, duality, polynomial normal trace and divergence, and all of (P_k)² inside."""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials, polynomial_count
from xsec_fem.fem.quadrature import interval_rule, triangle_rule
from xsec_fem.fem.raviart_thomas import RaviartThomas, raviart_thomas

every_degree = pytest.mark.parametrize("degree", [0, 1, 2, 3, 4, 7, 13])
CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


def side(element: RaviartThomas, number: int, s: np.ndarray) -> np.ndarray:
    """Normal components (Q, n) times side length at parameters s of one side."""
    a, b = CORNERS[number], CORNERS[(number + 1) % 3]
    values = element.values(a + s[:, None] * (b - a))
    return values @ np.array([b[1] - a[1], a[0] - b[0]])


def moments(element: RaviartThomas) -> np.ndarray:
    """Moments of the divergences with all orthonormal polynomials of degree k, (polynomials, n)."""
    rule = triangle_rule(2 * element.degree)
    tests, _ = orthonormal_polynomials(element.degree, rule.points)
    return (tests.T * rule.weights) @ element.divergences(rule.points)


@every_degree
def test_dimension(degree: int) -> None:
    element = raviart_thomas(degree)
    count = element.flux_count + element.divergence_count + element.curl_count
    assert count == (degree + 1) * (degree + 3)
    assert element.values(CORNERS).shape == (3, count, 2)


@every_degree
def test_flux_functions_are_dual_to_the_gauss_points(degree: int) -> None:
    element = raviart_thomas(degree)
    rule = interval_rule(2 * degree + 1)
    found = np.vstack([rule.weights[:, None] * side(element, e, rule.points[:, 0]) for e in range(3)])
    expected = np.eye(element.flux_count, found.shape[1])
    np.testing.assert_allclose(found, expected, atol=1e-11)  # condition of the basis up to 1e4 at degree 13


@every_degree
def test_normal_component_is_a_polynomial_of_degree_k(degree: int) -> None:
    """Its moments with Legendre polynomials above k vanish, though the fields have degree k + 1."""
    element = raviart_thomas(degree)
    rule = interval_rule(2 * degree + 4)
    s = rule.points[:, 0]
    above = np.polynomial.legendre.legvander(2 * s - 1, degree + 2)[:, degree + 1 :]
    for e in range(3):
        np.testing.assert_allclose((above.T * rule.weights) @ side(element, e, s), 0, atol=1e-11)


@every_degree
def test_divergences(degree: int) -> None:
    element = raviart_thomas(degree)
    found = moments(element)
    second = slice(element.flux_count, element.flux_count + element.divergence_count)
    np.testing.assert_allclose(found[1:, second], np.eye(element.divergence_count), atol=1e-11)
    np.testing.assert_allclose(found[0, second], 0, atol=1e-11)  # no outflow, no mean
    np.testing.assert_allclose(found[1:, : element.flux_count], 0, atol=1e-11)
    np.testing.assert_allclose(found[0, : element.flux_count], np.sqrt(2), atol=1e-11)  # outflow 1 times pi_0
    np.testing.assert_allclose(found[:, element.flux_count + element.divergence_count :], 0, atol=1e-11)


@every_degree
def test_divergence_theorem(degree: int) -> None:
    """∫ v . grad q + ∫ div v q = ∮ v . n q for q of degree k + 1: values, divergences and sides belong together."""
    element = raviart_thomas(degree)
    rule, line = triangle_rule(2 * degree + 2), interval_rule(2 * degree + 2)
    q, gradient = orthonormal_polynomials(degree + 1, rule.points)
    inside = np.einsum("q,qnd,qtd->tn", rule.weights, element.values(rule.points), gradient)
    inside += (q.T * rule.weights) @ element.divergences(rule.points)
    outside = np.zeros_like(inside)
    for e in range(3):
        s = line.points[:, 0]
        points = CORNERS[e] + s[:, None] * (CORNERS[(e + 1) % 3] - CORNERS[e])
        outside += (orthonormal_polynomials(degree + 1, points)[0].T * line.weights) @ side(element, e, s)
    np.testing.assert_allclose(inside, outside, atol=1e-10)


@every_degree
def test_contains_all_of_p_k_and_the_radial_fields(degree: int) -> None:
    element = raviart_thomas(degree)
    points = triangle_rule(2 * degree + 3).points
    q, _ = orthonormal_polynomials(degree, points)
    basis = element.values(points).transpose(0, 2, 1).reshape(2 * len(points), -1)
    zero = np.zeros_like(q)
    for field in (np.stack([q, zero], 1), np.stack([zero, q], 1), points[:, :, None] * q[:, None]):
        wanted = field.reshape(2 * len(points), -1)
        parts, *_ = np.linalg.lstsq(basis, wanted, rcond=None)
        np.testing.assert_allclose(basis @ parts, wanted, atol=1e-10)
    assert np.linalg.matrix_rank(basis) == (degree + 1) * (degree + 3)


@every_degree
def test_curl_functions_span_the_fields_without_flux_and_divergence(degree: int) -> None:
    element = raviart_thomas(degree)
    assert element.curl_count == (polynomial_count(degree - 2) if degree >= 2 else 0)
    rule = interval_rule(2 * degree + 1)
    curls = slice(element.flux_count + element.divergence_count, None)
    for e in range(3):
        np.testing.assert_allclose(side(element, e, rule.points[:, 0])[:, curls], 0, atol=1e-10)


@every_degree
def test_a_side_turned_round_reads_the_same_fluxes_backwards(degree: int) -> None:
    """Gauss points are symmetric: what lets two triangles share a side without signs."""
    element = raviart_thomas(degree)
    for e in range(3):
        own = slice(e * (degree + 1), (e + 1) * (degree + 1))
        points, weights = element.flux_points[own], element.flux_weights[own]
        np.testing.assert_allclose(points + points[::-1], np.tile(CORNERS[e] + CORNERS[(e + 1) % 3], (degree + 1, 1)))
        np.testing.assert_allclose(weights, weights[::-1])
        assert weights.sum() == pytest.approx(1, rel=1e-14)
