"""Orthonormal to the degree they claim, gradients that are those of the values, and every polynomial among them."""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials, polynomial_count
from xsec_fem.fem.quadrature import triangle_rule

CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


@pytest.mark.parametrize("degree", [0, 1, 2, 3, 4, 5, 9, 14])
def test_orthonormal(degree: int) -> None:
    rule = triangle_rule(2 * degree)
    values, _ = orthonormal_polynomials(degree, rule.points)
    assert values.shape[1] == polynomial_count(degree) == (degree + 1) * (degree + 2) // 2
    np.testing.assert_allclose((values.T * rule.weights) @ values, np.eye(values.shape[1]), atol=1e-13)


@pytest.mark.parametrize("degree", [1, 3, 5, 14])
def test_lower_degrees_come_first(degree: int) -> None:
    points = np.random.default_rng(1).uniform(0, 0.5, (7, 2))
    low, high = orthonormal_polynomials(degree - 1, points), orthonormal_polynomials(degree, points)
    for a, b in zip(low, high, strict=True):
        np.testing.assert_array_equal(a, b[:, : a.shape[1]])


@pytest.mark.parametrize("degree", [1, 2, 5])
def test_gradients_are_those_of_the_monomials_they_consist_of(degree: int) -> None:
    """Each basis function is a sum of monomials (found by least squares, exact at this degree), whose gradients are known."""
    points = np.vstack([CORNERS, np.random.default_rng(2).uniform(0, 0.5, (60, 2))])
    powers = [(i, k - i) for k in range(degree + 1) for i in range(k + 1)]
    y, z = points.T
    monomials = np.stack([y**i * z**j for i, j in powers], axis=1)
    by_y = np.stack([i * y ** max(i - 1, 0) * z**j for i, j in powers], axis=1)
    by_z = np.stack([j * y**i * z ** max(j - 1, 0) for i, j in powers], axis=1)
    values, gradients = orthonormal_polynomials(degree, points)
    parts, *_ = np.linalg.lstsq(monomials, values, rcond=None)
    scale = np.abs(gradients).max()
    np.testing.assert_allclose(monomials @ parts, values, atol=1e-10)  # monomials of degree 5: condition 1e4
    np.testing.assert_allclose(gradients[..., 0], by_y @ parts, atol=1e-10 * scale)
    np.testing.assert_allclose(gradients[..., 1], by_z @ parts, atol=1e-10 * scale)


def test_the_corner_where_collapsed_coordinates_degenerate_is_finite() -> None:
    values, gradients = orthonormal_polynomials(14, CORNERS)
    assert np.isfinite(values).all()
    assert np.isfinite(gradients).all()
    near, _ = orthonormal_polynomials(14, CORNERS + np.array([[1e-9, 1e-9], [-1e-9, 0], [0, -1e-9]]))
    np.testing.assert_allclose(values, near, atol=1e-9 * 3 * np.abs(gradients).max())
