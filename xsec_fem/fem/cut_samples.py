"""Points along the intervals of lines through the mesh, and integrals of nodal functions along them."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.line_crossings import Crossings
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import interval_rule
from xsec_fem.fem.reference_triangle import lagrange_triangle

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_NEWTON_STEPS = 12  # from the chord in the reference triangle; quadratic: 5 reach round-off on an ordinary triangle
_CONVERGED = 1e-13  # reference coordinates are of size 1
_MORE_ON_CURVES = 4  # degrees more on curved triangles, where a nodal function is no polynomial along the line


@lru_cache
def _basis_table(order: int) -> tuple[IntArray, IntArray, FloatArray]:
    """Exponents (n,), (n,) of the monomials and their coefficients (n, n) in the basis."""
    first, second = np.array([(i, k - i) for k in range(order + 1) for i in range(k + 1)]).T
    y, z = lagrange_triangle(order).nodes.T[:, :, None]
    return first, second, np.asarray(np.linalg.inv(y**first * z**second), dtype=np.float64)


def basis_values(order: int, points: FloatArray) -> FloatArray:
    """Return the basis functions of an order at reference points (..., 2): shape (..., n).

    The same numbers as LagrangeTriangle.values, by products instead of powers: these points are many, each used once.
    """
    first, second, table = _basis_table(order)
    flat = points.reshape(-1, 2).T
    powers = np.ones((order + 1, *flat.shape))
    for k in range(1, order + 1):
        powers[k] = powers[k - 1] * flat
    products = powers[first, 0] * powers[second, 1]  # (n, K)
    values = products.T @ table
    return np.asarray(values.reshape(*points.shape[:-1], len(first)), dtype=np.float64)


def reference_points(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Return reference coordinates (m, Q, 2) at the shares (Q,), 0 to 1, of the chosen intervals (m,).

    Straight triangles: on the chord. Curved ones: Newton's method on the map, to the point of the line.
    """
    ends = crossings.reference[chosen]
    result: FloatArray = ends[:, None, 0] + shares[:, None] * (ends[:, 1] - ends[:, 0])[:, None]
    mesh = crossings.hits.curves.mesh
    bent = np.flatnonzero(mesh.curved[crossings.triangle[chosen]])
    if not len(bent):
        return result
    x = mesh.nodes[mesh.triangles[crossings.triangle[chosen[bent]]]]
    target = _places(crossings, chosen[bent], shares)
    at = result[bent]
    for _ in range(_NEWTON_STEPS):
        step = _newton_step(mesh, x, at, target)
        at = at + step
        if np.abs(step).max() < _CONVERGED:
            break
    result[bent] = at
    return result


def _newton_step(mesh: Mesh, x: FloatArray, at: FloatArray, target: FloatArray) -> FloatArray:
    """J^-1 (target - x(at)) for nodes x (m, n, 2) at reference points (m, Q, 2)."""
    flat = at.reshape(-1, 2)
    gradients = mesh.element.gradients(flat).reshape(*at.shape[:2], -1, 2)
    off = target - basis_values(mesh.order, at) @ x
    jacobian = np.einsum("mqnr,mnd->mqdr", gradients, x, optimize=True)
    det = jacobian[..., 0, 0] * jacobian[..., 1, 1] - jacobian[..., 0, 1] * jacobian[..., 1, 0]
    by_y = (jacobian[..., 1, 1] * off[..., 0] - jacobian[..., 0, 1] * off[..., 1]) / det
    by_z = (jacobian[..., 0, 0] * off[..., 1] - jacobian[..., 1, 0] * off[..., 0]) / det
    return np.stack([by_y, by_z], axis=-1)


def positions(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Return positions along the line (m, Q) at the shares (Q,) of the chosen intervals (m,) [mm]."""
    start, end = crossings.start[chosen, None], crossings.end[chosen, None]
    return np.asarray(start + shares * (end - start))


def _places(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Places (m, Q, 2) at the shares (Q,) of the chosen intervals (m,) [mm]."""
    along = positions(crossings, chosen, shares)
    return crossings.point(np.broadcast_to(crossings.line[chosen, None], along.shape), along)


def sample_places(crossings: Crossings, shares: FloatArray) -> FloatArray:
    """Return the places (I, Q, 2) at the shares (Q,) of all intervals [mm]."""
    return _places(crossings, np.arange(len(crossings.span)), shares)


def sample_values(crossings: Crossings, shares: FloatArray, at_nodes: FloatArray, numbering: IntArray) -> FloatArray:
    """Return functions at the shares (Q,) of all intervals, shape (I, Q, k).

    at_nodes : (S, k) values; numbering : (M, n) which of them are at a triangle's nodes.
    """
    order = crossings.hits.curves.mesh.order
    basis = basis_values(order, reference_points(crossings, np.arange(len(crossings.span)), shares))
    result: FloatArray = basis @ at_nodes[numbering[crossings.triangle]]
    return result


def span_integrals(crossings: Crossings, per_triangle: FloatArray) -> FloatArray:
    """Return ∫ ds over each span of functions given at the nodes of every triangle (M, n, k): shape (S, k) [mm times theirs].

    Exact for polynomials of the mesh's order on straight triangles.
    """
    mesh = crossings.hits.curves.mesh
    result = np.zeros((len(crossings.span), per_triangle.shape[2]))
    curved = mesh.curved[crossings.triangle]
    for kind, degree in ((False, mesh.order), (True, 2 * mesh.order + _MORE_ON_CURVES)):
        chosen = np.flatnonzero(curved == kind)
        rule = interval_rule(degree)
        basis = basis_values(mesh.order, reference_points(crossings, chosen, rule.points[:, 0]))
        weights = np.einsum("q,mqn->mn", rule.weights, basis) * (crossings.end - crossings.start)[chosen, None]
        result[chosen] = np.einsum("mn,mnk->mk", weights, per_triangle[crossings.triangle[chosen]], optimize=True)
    sums = np.zeros((len(crossings.span_line), result.shape[1]))
    for column in range(result.shape[1]):
        sums[:, column] = np.bincount(crossings.span, result[:, column], minlength=len(sums))
    return sums
