"""Roots and turning points against polynomials built from known ones."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.fem.polynomial_roots import bracketed_roots, derivative, evaluate, turning_points


def _from_roots(roots):
    return np.polynomial.polynomial.polyfromroots(roots)


def test_value_and_derivative_agree_with_numpy() -> None:
    coefficients, u = np.array([[1.0, -2.0, 3.0, 0.5]]), np.array([0.3])
    assert evaluate(coefficients, u) == pytest.approx(np.polynomial.polynomial.polyval(0.3, coefficients[0]), abs=1e-15)
    assert derivative(coefficients).tolist() == [[-2.0, 6.0, 1.5]]


@given(st.floats(0.01, 0.99), st.floats(1.2, 4.0), st.floats(-4.0, -0.2))
@settings(deadline=None, max_examples=40)
def test_the_one_root_in_a_bracket_is_found(root, right, left) -> None:
    coefficients = _from_roots([left, root, right])[None]
    # well-separated roots: the condition number is below 100, so 1e-13 is round-off
    assert bracketed_roots(coefficients, np.zeros(1), np.ones(1))[0] == pytest.approx(root, abs=1e-13)


def test_a_triple_root_converges_by_halving() -> None:
    coefficients = _from_roots([0.3, 0.3, 0.3])[None]
    # a triple root is known to the cube root of round-off only
    assert bracketed_roots(coefficients, np.zeros(1), np.ones(1))[0] == pytest.approx(0.3, abs=1e-5)


def test_without_a_change_of_sign_the_upper_end_comes_back() -> None:
    assert bracketed_roots(np.array([[1.0, 0.0, 1.0]]), np.zeros(1), np.array([0.7]))[0] == 0.7


@pytest.mark.parametrize("roots", [[0.2], [0.2, 0.6], [0.1, 0.5, 0.8], [0.1, 0.35, 0.6, 0.9], [-1.0, 0.4, 2.0, 3.0]])
def test_turning_points_are_the_roots_of_the_derivative_inside(roots) -> None:
    slope = _from_roots(roots)
    integral = np.concatenate([[0.7], slope / np.arange(1, len(slope) + 1)])
    found = turning_points(integral[None])[0]
    assert found.shape == (len(integral),)
    assert np.all(np.diff(found) >= 0)
    for root in roots:
        if 0 < root < 1:
            # simple roots at least 0.2 apart: the condition number is below 1e3
            assert np.abs(found - root).min() < 1e-12
    steps = np.linspace(found[:-1], found[1:], 30)
    assert all(
        (np.diff(np.polynomial.polynomial.polyval(piece, integral)) >= -1e-14).all()
        or (np.diff(np.polynomial.polynomial.polyval(piece, integral)) <= 1e-14).all()
        for piece in steps.T
    )


def test_a_straight_line_turns_nowhere() -> None:
    assert turning_points(np.array([[1.0, 2.0]])).tolist() == [[0.0, 1.0]]
