"""Raviart-Thomas fields on the reference triangle, in a basis that keeps flux and divergence apart.

RT_k = (P_k)² + (xi, eta) P_k: the divergence is any polynomial of degree k, the normal component any polynomial of degree k on
each side (P.-A. Raviart, J. M. Thomas, A mixed finite element method for 2nd order elliptic problems, LNM 606, 1977). Its
(k + 1)(k + 3) functions are dual to

    3 (k + 1)          fluxes: Gauss weight times normal component at the k + 1 Gauss points of sides 0, 1, 2, walking
                       counter-clockwise as drawn in `xsec_fem.fem.mesh`, n outward and as long as the side;
    k (k + 3)/2        moments of the divergence with the orthonormal polynomials 1, 2, ... (the constant follows from the fluxes);
    k (k - 1)/2        moments with curl(b pi_q), b = xi eta (1 - xi - eta), pi_q orthonormal of degree k - 2: all fields
                       of RT_k without flux and divergence.

So the coefficients say the flux through the sides and the divergence outright. Gauss points make the side's functions
orthogonal, sum to one and turn round with the side, with no sign to keep.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials, polynomial_count
from xsec_fem.fem.quadrature import interval_rule, triangle_rule

FloatArray = npt.NDArray[np.float64]

_CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


@dataclass(frozen=True)
class RaviartThomas:
    """The fields RT_k of one degree k >= 0; all arrays are on the reference triangle, dimensionless."""

    degree: int

    @property
    def flux_count(self) -> int:
        """Number of the flux functions, 3 (k + 1); they come first."""
        return 3 * (self.degree + 1)

    @property
    def divergence_count(self) -> int:
        """Number of functions without flux whose divergence is one orthonormal polynomial each; they come second."""
        return polynomial_count(self.degree) - 1

    @property
    def curl_count(self) -> int:
        """Number of functions without flux and divergence; they come last."""
        return polynomial_count(self.degree - 2) if self.degree >= 2 else 0

    @cached_property
    def flux_points(self) -> FloatArray:
        """Gauss points of the sides, walking counter-clockwise, shape (ne, 2) [-], ne = `flux_count`."""
        s = interval_rule(2 * self.degree + 1).points
        return np.vstack([(1 - s) * _CORNERS[e] + s * _CORNERS[(e + 1) % 3] for e in range(3)])

    @cached_property
    def flux_weights(self) -> FloatArray:
        """Gauss weights of the sides, shape (ne,) [-]; they sum to 1 on each."""
        return np.tile(interval_rule(2 * self.degree + 1).weights, 3)

    @cached_property
    def side_normals(self) -> FloatArray:
        """Outward normals at the flux points, as long as the side, shape (ne, 2) [-]."""
        side = np.roll(_CORNERS, -1, axis=0) - _CORNERS
        return np.repeat(np.column_stack([side[:, 1], -side[:, 0]]), self.degree + 1, axis=0)

    def _span(self, points: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Values (Q, n, 2) and divergences (Q, n) of (pi, 0), (0, pi) and, for pi of degree k, (xi, eta) pi."""
        value, gradient = orthonormal_polynomials(self.degree, points)
        zero = np.zeros_like(value)
        top = slice(polynomial_count(self.degree - 1), None)
        radial = points[:, None, :] * value[:, top, None]
        values = np.concatenate([np.stack([value, zero], -1), np.stack([zero, value], -1), radial], axis=1)
        swelling = 2 * value[:, top] + (points[:, None, :] * gradient[:, top]).sum(axis=-1)
        return values, np.concatenate([gradient[..., 0], gradient[..., 1], swelling], axis=1)

    def _curls(self, points: FloatArray) -> FloatArray:
        """(Q, nb, 2) curl(b pi_q) = (d/deta, -d/dxi)(b pi_q)."""
        if not self.curl_count:
            return np.zeros((len(points), 0, 2))
        value, gradient = orthonormal_polynomials(self.degree - 2, points)
        xi, eta = points.T[:, :, None]
        bubble = xi * eta * (1 - xi - eta)
        by_xi = eta * (1 - 2 * xi - eta) * value + bubble * gradient[..., 0]
        by_eta = xi * (1 - xi - 2 * eta) * value + bubble * gradient[..., 1]
        return np.stack([by_eta, -by_xi], axis=-1)

    @cached_property
    def _coefficients(self) -> FloatArray:
        """(n, n) the basis in terms of `_span`: inverse of the functionals of the module docstring."""
        on_sides, _ = self._span(self.flux_points)
        fluxes = self.flux_weights[:, None] * (on_sides * self.side_normals[:, None]).sum(axis=-1)
        rule = triangle_rule(2 * self.degree + 2)  # field of degree k + 1 times a curl of degree k
        values, divergences = self._span(rule.points)
        tests = orthonormal_polynomials(self.degree, rule.points)[0][:, 1:]
        swellings = (tests * rule.weights[:, None]).T @ divergences
        curls = np.einsum("q,qbd,qnd->bn", rule.weights, self._curls(rule.points), values)
        inverse: FloatArray = np.linalg.inv(np.vstack([fluxes, swellings, curls]))
        return inverse

    def values(self, points: FloatArray) -> FloatArray:
        """Return the fields at points (Q, 2): shape (Q, n, 2) [-]. Source: Raviart & Thomas 1977."""
        result: FloatArray = np.einsum("qsd,sn->qnd", self._span(points)[0], self._coefficients, optimize=True)
        return result

    def divergences(self, points: FloatArray) -> FloatArray:
        """Return the divergences at points (Q, 2): shape (Q, n) [-]. Source: Raviart & Thomas 1977."""
        result: FloatArray = self._span(points)[1] @ self._coefficients
        return result


@lru_cache
def raviart_thomas(degree: int) -> RaviartThomas:
    """Return the fields of that degree, with their tables kept."""
    return RaviartThomas(degree)
