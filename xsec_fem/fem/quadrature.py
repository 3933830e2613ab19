"""Quadrature rules that know their degree: nodes, weights and the highest polynomial degree they integrate exactly.

On the triangle, up to degree 8: fully symmetric rules of 6, 12 and 16 points (D. A. Dunavant, High degree efficient symmetrical
Gaussian quadrature rules for the triangle, Int. J. Numer. Meth. Eng. 21, 1985, table II; the digits below were recomputed from the
moment equations). Above: Gauss-Legendre points in both directions of the collapsed square, (u, v) -> (u, v (1 - u)); n x n
points integrate degree 2n - 2 exactly (A. H. Stroud, Approximate Calculation of Multiple Integrals, 1971, conical product rules).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from itertools import permutations

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

# degree: (weight as a share of the area, first barycentric coordinates) of each orbit; the last coordinate makes the sum 1
_SYMMETRIC: dict[int, tuple[tuple[float, tuple[float, float]], ...]] = {
    4: (
        (0.2233815896780114657, (0.44594849091596488632, 0.44594849091596488632)),
        (0.10995174365532186764, (0.09157621350977074346, 0.09157621350977074346)),
    ),
    6: (
        (0.11678627572637936603, (0.24928674517091042129, 0.24928674517091042129)),
        (0.050844906370206816921, (0.06308901449150222834, 0.06308901449150222834)),
        (0.082851075618373575194, (0.053145049844816947353, 0.31035245103378440542)),
    ),
    8: (
        (0.14431560767778716825, (1 / 3, 1 / 3)),
        (0.095091634267284624794, (0.45929258829272315603, 0.45929258829272315603)),
        (0.10321737053471825028, (0.17056930775176020662, 0.17056930775176020662)),
        (0.032458497623198080311, (0.050547228317030975458, 0.050547228317030975458)),
        (0.027230314174434994265, (0.26311282963463811342, 0.0083947774099576053372)),
    ),
}


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
    """Return a Gauss rule on [0, 1], points of shape (Q, 1) [-], exact for polynomials of that degree."""
    n = degree // 2 + 1
    x, w = _gauss(n)
    return Rule(x[:, None], w, 2 * n - 1)


def _symmetric_rule(degree: int) -> Rule:
    points: list[tuple[float, float]] = []
    weights: list[float] = []
    for weight, (first, second) in _SYMMETRIC[degree]:
        centre = first == second == 1 / 3  # 1 - 2/3 is not 1/3 in binary: the centre is no orbit of three
        positions = (
            [(1 / 3, 1 / 3, 1 / 3)] if centre else sorted(set(permutations((first, second, 1 - first - second))))
        )
        points += [(a, b) for a, b, _ in positions]
        weights += [weight / 2] * len(positions)
    return Rule(np.array(points), np.array(weights), degree)


@lru_cache
def triangle_rule(degree: int) -> Rule:
    """Return a rule on the reference triangle (area 1/2), points of shape (Q, 2) [-], exact for polynomials of that degree.

    Source: Dunavant 1985 up to degree 8, Stroud 1971 above.
    """
    for known in _SYMMETRIC:
        if degree <= known:
            return _symmetric_rule(known)
    n = (degree + 3) // 2
    x, w = _gauss(n)
    u, v = np.repeat(x, n), np.tile(x, n)
    points = np.column_stack([u, v * (1 - u)])
    return Rule(points, np.repeat(w, n) * np.tile(w, n) * (1 - u), 2 * n - 2)
