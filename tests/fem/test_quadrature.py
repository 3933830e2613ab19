"""A rule integrates every polynomial up to `exact_to`, and not one degree more."""

from __future__ import annotations

from math import factorial

import numpy as np
import pytest

from xsec_fem.fem.quadrature import interval_rule, triangle_rule

ROUND_OFF = 1e-14  # sums of at most 150 positive terms below 1

degrees = pytest.mark.parametrize("degree", range(21))


def exact_on_triangle(i: int, j: int) -> float:
    """∫ y^i z^j over the triangle (0,0), (1,0), (0,1): i! j!/(i + j + 2)!."""
    return factorial(i) * factorial(j) / factorial(i + j + 2)


@degrees
def test_triangle_rule_is_exact_to_its_claim(degree: int) -> None:
    rule = triangle_rule(degree)
    assert rule.exact_to >= degree
    y, z = rule.points.T
    for total in range(rule.exact_to + 1):
        for i in range(total + 1):
            assert rule.weights @ (y**i * z ** (total - i)) == pytest.approx(
                exact_on_triangle(i, total - i), abs=ROUND_OFF
            )


@degrees
def test_triangle_rule_claims_no_less_than_it_does(degree: int) -> None:
    rule = triangle_rule(degree)
    y, z = rule.points.T
    total = rule.exact_to + 1
    relative = [
        rule.weights @ (y**i * z ** (total - i)) / exact_on_triangle(i, total - i) - 1 for i in range(total + 1)
    ]
    # the error of n Gauss points on x^2n is n!⁴/((2n + 1) (2n)!²) relative to 1/(2n + 1): 2e-12 at n = 11
    assert max(np.abs(relative)) > 1e-13


@degrees
def test_interval_rule_is_exact_to_its_claim_and_no_more(degree: int) -> None:
    rule = interval_rule(degree)
    assert rule.exact_to >= degree
    x = rule.points[:, 0]
    for k in range(rule.exact_to + 1):
        assert rule.weights @ x**k == pytest.approx(1 / (k + 1), abs=ROUND_OFF)
    beyond = rule.exact_to + 1
    assert abs(rule.weights @ x**beyond * (beyond + 1) - 1) > 1e-13


@degrees
def test_points_lie_inside_and_weights_are_positive(degree: int) -> None:
    rule = triangle_rule(degree)
    assert rule.points.min() > 0
    assert rule.points.sum(axis=1).max() < 1
    assert rule.weights.min() > 0
    assert rule.weights.sum() == pytest.approx(0.5, abs=ROUND_OFF)
