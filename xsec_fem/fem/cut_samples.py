"""Points along the intervals of lines through the mesh, and integrals of nodal functions along them."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.line_crossings import Crossings
from xsec_fem.fem.quadrature import interval_rule
from xsec_fem.fem.reference_triangle import lagrange_triangle

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_NEWTON_STEPS = 12  # from the chord in the reference triangle; quadratic: 5 reach round-off on an ordinary triangle
_CONVERGED = 1e-7  # of reference coordinates; the step after one of this size would be of 1e-14
_AT_A_TIME = 4096  # points whose monomials stay in the cache
_MORE_ON_CURVES = 4  # degrees more on curved triangles, where a nodal function is no polynomial along the line


@lru_cache
def _basis_table(order: int) -> tuple[IntArray, IntArray, FloatArray]:
    """Exponents (n,), (n,) of the monomials and their coefficients (n, n) in the basis."""
    first, second = np.array([(i, k - i) for k in range(order + 1) for i in range(k + 1)]).T
    y, z = lagrange_triangle(order).nodes.T[:, :, None]
    return first, second, np.asarray(np.linalg.inv(y**first * z**second), dtype=np.float64)


def _powers(order: int, flat: FloatArray) -> FloatArray:
    """Powers (p+1, 2, K) of reference coordinates (2, K)."""
    powers = np.ones((order + 1, *flat.shape))
    for k in range(1, order + 1):
        np.multiply(powers[k - 1], flat, out=powers[k])
    return powers


def basis_values(order: int, points: FloatArray) -> FloatArray:
    """Return the basis functions of an order at reference points (..., 2): shape (..., n) [-].

    The same numbers as LagrangeTriangle.values, by products instead of powers: these points are many, each used once.
    """
    first, second, table = _basis_table(order)
    flat = points.reshape(-1, 2)
    values = np.empty((len(flat), len(first)))
    for start in range(0, len(flat), _AT_A_TIME):
        powers = _powers(order, flat[start : start + _AT_A_TIME].T)
        np.matmul((powers[first, 0] * powers[second, 1]).T, table, out=values[start : start + _AT_A_TIME])
    return values.reshape(*points.shape[:-1], len(first))


def reference_points(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Return reference coordinates, shape (m, Q, 2) [-], at the shares (Q,), 0 to 1, of the chosen intervals (m,).

    Straight triangles: on the chord. Curved ones: Newton's method on the map, to the point of the line.
    """
    ends = crossings.reference[chosen]
    result: FloatArray = ends[:, None, 0] + shares[:, None] * (ends[:, 1] - ends[:, 0])[:, None]
    mesh = crossings.hits.curves.mesh
    bent = np.flatnonzero(mesh.curved[crossings.triangle[chosen]])
    step = max(1, _AT_A_TIME // len(shares))
    for start in range(0, len(bent), step):
        some = bent[start : start + step]
        nodes = mesh.nodes[mesh.triangles[crossings.triangle[chosen[some]]]]
        result[some] = _inverse_map(mesh.order, nodes, result[some], _places(crossings, chosen[some], shares))
    return result


def _inverse_map(order: int, nodes: FloatArray, at: FloatArray, target: FloatArray) -> FloatArray:
    """Newton's method from reference points (m, Q, 2) to those that triangles of nodes (m, n, 2) map to the target (m, Q, 2)."""
    first, second, table = _basis_table(order)
    x = table @ nodes  # coefficients of the monomials
    for _ in range(_NEWTON_STEPS):
        powers = _powers(order, at.reshape(-1, 2).T)
        terms = (
            powers[first, 0] * powers[second, 1],
            first[:, None] * powers[np.maximum(first - 1, 0), 0] * powers[second, 1],
            second[:, None] * powers[first, 0] * powers[np.maximum(second - 1, 0), 1],
        )
        value, by_y, by_z = (term.T.reshape(*at.shape[:2], -1) @ x for term in terms)
        off, det = target - value, by_y[..., 0] * by_z[..., 1] - by_y[..., 1] * by_z[..., 0]
        step = np.stack(
            [
                by_z[..., 1] * off[..., 0] - by_z[..., 0] * off[..., 1],
                by_y[..., 0] * off[..., 1] - by_y[..., 1] * off[..., 0],
            ],
            axis=-1,
        )
        step /= det[..., None]
        at = at + step
        if np.abs(step).max() < _CONVERGED:
            break
    return at


def positions(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Return positions along the line, shape (m, Q), at the shares (Q,) of the chosen intervals (m,) [mm]."""
    start, end = crossings.start[chosen, None], crossings.end[chosen, None]
    return np.asarray(start + shares * (end - start))


def _places(crossings: Crossings, chosen: IntArray, shares: FloatArray) -> FloatArray:
    """Places (m, Q, 2) at the shares (Q,) of the chosen intervals (m,) [mm]."""
    along = positions(crossings, chosen, shares)
    return crossings.point(np.broadcast_to(crossings.line[chosen, None], along.shape), along)


def sample_places(crossings: Crossings, shares: FloatArray) -> FloatArray:
    """Return the places, shape (I, Q, 2), at the shares (Q,) of all intervals [mm]."""
    return _places(crossings, np.arange(len(crossings.span)), shares)


def sample_values(crossings: Crossings, shares: FloatArray, at_nodes: FloatArray, numbering: IntArray) -> FloatArray:
    """Return functions at the shares (Q,) of all intervals, shape (I, Q, k), in the unit of `at_nodes`.

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
