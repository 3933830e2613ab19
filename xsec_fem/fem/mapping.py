"""Triangles mapped from the reference triangle, in batches that fit the cache.

Straight triangles have one Jacobian each, curved ones one per quadrature point; both come as arrays of shape
(m, Q or 1, ...), so that the code that integrates is written once. `flux` turns a vector field q into adj(J) q, since
∫ q . grad v = ∫ (adj(J) q) . (reference gradient of v) on the reference triangle: no inverse is ever formed.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import Rule, triangle_rule
from xsec_fem.fem.reference_triangle import LagrangeTriangle, lagrange_triangle

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_BATCH = 4096  # triangles at a time: 4096 x 16 points x 5 problems x 2 components are 5 MB, about the size of a cache


@dataclass(frozen=True)
class Batch:
    """Some triangles of one kind (all straight or all curved) with their map evaluated at a rule's points.

    Attributes
    ----------
    elements : (m,) triangle numbers.
    nodes : (m, n) their node numbers.
    part : (m,) their part index.
    element : the reference triangle.
    rule : quadrature on the reference triangle, exact for every product the theory integrates on straight sides.
    points : (m, Q, 2) the rule's points in the section [mm].
    jacobian : (m, Q or 1, 2, 2) d(y, z)/d(reference).
    det : (m, Q or 1) its determinant [mm²].
    """

    elements: IntArray
    nodes: IntArray
    part: IntArray
    element: LagrangeTriangle
    rule: Rule
    points: FloatArray
    jacobian: FloatArray
    det: FloatArray

    @property
    def weights(self) -> FloatArray:
        """Quadrature weights times det J, shape (m, Q): they sum to the area of each triangle [mm²]."""
        return self.rule.weights * self.det

    @property
    def shape_values(self) -> FloatArray:
        """Basis functions at the rule's points, shape (Q, n) [-]."""
        return self.element.values(self.rule.points)

    def flux(self, q: FloatArray) -> FloatArray:
        """Return adj(J) q for vectors q of shape (m, Q, k, 2), same shape [mm times the unit of q]."""
        j = self.jacobian[:, :, None]
        result = by_component(q.shape[:-1])
        result[..., 0] = j[..., 1, 1] * q[..., 0] - j[..., 0, 1] * q[..., 1]
        result[..., 1] = j[..., 0, 0] * q[..., 1] - j[..., 1, 0] * q[..., 0]
        return result

    def gradients(self, u: FloatArray) -> FloatArray:
        """Return the gradients at the rule's points, shape (m, Q, k, 2), of nodal values u of shape (N, k) [unit of u per mm]."""
        return physical_gradients(self.element, self.rule.points, u[self.nodes], self.jacobian, self.det)


def by_component(shape: tuple[int, ...]) -> FloatArray:
    """Return an empty array of shape (*shape, 2) in which each component lies together, so that loops over it are long."""
    return np.moveaxis(np.empty((2, *shape)), 0, -1)


def physical_gradients(
    element: LagrangeTriangle, points: FloatArray, u: FloatArray, jacobian: FloatArray, det: FloatArray
) -> FloatArray:
    """Return J^-T (reference gradient) at reference points (Q, 2), shape (m, Q, k, 2) [unit of u per mm].

    u : (m, n, k) nodal values. jacobian : (m, Q or 1, 2, 2) [mm] and det : (m, Q or 1) [mm²], as in Batch.
    """
    table = element.gradients(points).transpose(0, 2, 1).reshape(-1, u.shape[1])  # (2Q, n)
    reference = (table @ u).reshape(len(u), len(points), 2, u.shape[2])
    inverse = (jacobian / det[..., None, None])[:, :, None]
    ref_y, ref_z = reference[:, :, 0], reference[:, :, 1]
    result = by_component(ref_y.shape)
    result[..., 0] = inverse[..., 1, 1] * ref_y - inverse[..., 1, 0] * ref_z
    result[..., 1] = inverse[..., 0, 0] * ref_z - inverse[..., 0, 1] * ref_y
    return result


def map_points(
    mesh: Mesh, elements: IntArray, points: FloatArray, straight: bool
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Map reference points (Q, 2) into the given triangles (m,).

    Returns positions of shape (m, Q, 2) [mm], Jacobians (m, Q or 1, 2, 2) [mm] and determinants (m, Q or 1) [mm²]; `straight`
    promises that the triangles' sides are straight, and then Q is 1 in the last two.
    """
    x = mesh.nodes[mesh.triangles[elements]]
    if straight:
        side = np.stack([x[:, 1] - x[:, 0], x[:, 2] - x[:, 0]], axis=-1)
        linear = lagrange_triangle(1).values(points).T
        positions = by_component((len(x), len(points)))
        for d in (0, 1):
            positions[..., d] = x[:, :3, d] @ linear
        jacobian = side[:, None]
    else:
        positions = mesh.element.values(points) @ x
        table = mesh.element.gradients(points).transpose(0, 2, 1).reshape(-1, x.shape[1])
        jacobian = (table @ x).reshape(len(x), len(points), 2, 2).transpose(0, 1, 3, 2)
    det = jacobian[..., 0, 0] * jacobian[..., 1, 1] - jacobian[..., 0, 1] * jacobian[..., 1, 0]
    return positions, jacobian, det


def straight_rule(order: int) -> Rule:
    """Return the rule for straight triangles: products of two basis functions, and squares of the quadratic Poisson term."""
    return triangle_rule(max(2 * order, 4))


def curved_rule(order: int) -> Rule:
    """Return the rule for curved triangles: exact for the loads, f(x(ξ)) v det J, of degree p + p + 2 (p - 1)."""
    return triangle_rule(max(4 * order - 2, 4))


def batches(mesh: Mesh) -> Iterator[Batch]:
    """Yield the whole mesh in batches, straight triangles first; every triangle comes exactly once."""
    for straight, rule in ((True, straight_rule(mesh.order)), (False, curved_rule(mesh.order))):
        chosen = np.flatnonzero(mesh.curved != straight)
        for start in range(0, len(chosen), _BATCH):
            elements = chosen[start : start + _BATCH]
            positions, jacobian, det = map_points(mesh, elements, rule.points, straight)
            yield Batch(
                elements, mesh.triangles[elements], mesh.part_of[elements], mesh.element, rule, positions, jacobian, det
            )
