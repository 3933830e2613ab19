"""Lagrange triangles of degree 1 to 5 on the reference triangle (0,0), (1,0), (0,1): one declaration, all else derived.

The numbering is drawn in `xsec_fem.fem.mesh`. The basis is found by inverting the Vandermonde matrix of the monomials
(degree 5: condition number 7e3, so round-off stays below 1e-12).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


def node_count(degree: int) -> int:
    """Return the number of nodes of a triangle of that degree."""
    return (degree + 1) * (degree + 2) // 2


def lattice(degree: int) -> IntArray:
    """Return the nodes' positions times the degree, whole numbers, shape (n, 2) [-], in the numbering of gmsh."""
    if degree == 0:
        return np.zeros((1, 2), np.int64)
    corners = np.array([[0, 0], [degree, 0], [0, degree]])
    steps = np.arange(1, degree)[:, None]
    sides = [a + steps * (b - a) // degree for a, b in ((corners[i], corners[(i + 1) % 3]) for i in range(3))]
    inner = [lattice(degree - 3) + 1] if degree >= 3 else []
    return np.vstack([corners, *sides, *inner]).astype(np.int64)


def reflected_numbering(degree: int) -> IntArray:
    """Return the permutation, shape (n,), that turns a triangle round: corners 0 2 1 instead of 0 1 2."""
    points = [tuple(p) for p in lattice(degree).tolist()]
    return np.array([points.index((z, y)) for y, z in points])


@dataclass(frozen=True)
class LagrangeTriangle:
    """Basis functions of one degree; all arrays are on the reference triangle, dimensionless."""

    degree: int

    @cached_property
    def nodes(self) -> FloatArray:
        """Node positions, shape (n, 2) [-]."""
        return lattice(self.degree) / self.degree

    @cached_property
    def _exponents(self) -> IntArray:
        return np.array([(i, k - i) for k in range(self.degree + 1) for i in range(k + 1)])

    @cached_property
    def _coefficients(self) -> FloatArray:
        y, z = self.nodes.T[:, :, None]
        powers = self._exponents.T[:, None, :]
        inverse: FloatArray = np.linalg.inv(y ** powers[0] * z ** powers[1])
        return inverse

    def values(self, points: FloatArray) -> FloatArray:
        """Return the basis functions at the points (Q, 2): shape (Q, n) [-]."""
        y, z = np.asarray(points, float).T[:, :, None]
        i, j = self._exponents.T[:, None, :]
        result: FloatArray = (y**i * z**j) @ self._coefficients
        return result

    def gradients(self, points: FloatArray) -> FloatArray:
        """Return the derivatives with respect to the reference coordinates at the points (Q, 2): shape (Q, n, 2) [-]."""
        y, z = np.asarray(points, float).T[:, :, None]
        i, j = self._exponents.T[:, None, :]
        by_y = i * y ** np.maximum(i - 1, 0) * z**j
        by_z = j * y**i * z ** np.maximum(j - 1, 0)
        return np.stack([by_y @ self._coefficients, by_z @ self._coefficients], axis=-1)


@lru_cache
def lagrange_triangle(degree: int) -> LagrangeTriangle:
    """Return the triangle of that degree, 1 to 5, with its tables kept."""
    return LagrangeTriangle(degree)
