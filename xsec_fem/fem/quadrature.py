"""Quadrature rules that know their degree: nodes, weights and the highest polynomial degree they integrate exactly.

On the triangle: Gauss-Legendre points in both directions of the collapsed square, (u, v) -> (u, v (1 - u)); n x n points
integrate degree 2n - 2 exactly (Stroud, Approximate Calculation of Multiple Integrals, 1971, conical product rules).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Rule:
    """Points (Q, d), weights (Q,) and the degree up to which the rule is exact; dimensionless reference coordinates."""

    points: FloatArray
    weights: FloatArray
    exact_to: int


def _gauss(n: int) -> tuple[FloatArray, FloatArray]:
    x, w = np.polynomial.legendre.leggauss(n)
    return (x + 1) / 2, w / 2


@lru_cache
def interval_rule(degree: int) -> Rule:
    """Return a Gauss rule on [0, 1], points (Q, 1), exact for polynomials of that degree."""
    n = degree // 2 + 1
    x, w = _gauss(n)
    return Rule(x[:, None], w, 2 * n - 1)


@lru_cache
def triangle_rule(degree: int) -> Rule:
    """Return a rule on the reference triangle (area 1/2), points (Q, 2), exact for polynomials of that degree."""
    n = (degree + 3) // 2
    x, w = _gauss(n)
    u, v = np.repeat(x, n), np.tile(x, n)
    points = np.column_stack([u, v * (1 - u)])
    return Rule(points, np.repeat(w, n) * np.tile(w, n) * (1 - u), 2 * n - 2)
