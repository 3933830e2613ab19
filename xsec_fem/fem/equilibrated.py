"""Equilibrated fluxes: fields that satisfy equilibrium exactly and compatibility as well as they can.

For every column, sigma minimises 1/2 ∫ sigma . G^-1 sigma - ∫ g . sigma over the fields of RT_k on the mesh with

    div sigma = -source in every triangle,   sigma . n continuous across edges,   sigma . n = 0 on the free boundary.

The constraint on edges is freed by multipliers at the k + 1 Gauss points of each (hybridisation: B. M. Fraeijs de Veubeke,
Displacement and equilibrium models in the finite element method, 1965; D. N. Arnold, F. Brezzi, Mixed and nonconforming
finite element methods: implementation, postprocessing and error estimates, RAIRO M2AN 19, 1985). With s = free fields c +
lifted source (`xsec_fem.fem.flux_tables`) each triangle gives

    A c = b + Tᵀ lambda,   A = ∫ free . (Jᵀ G^-1 J/det J) free,   b = ∫ free . (Jᵀ g - (Jᵀ G^-1 J/det J) lift),

T the fluxes of the free fields; the fluxes of neighbours cancel: sum of T A^-1 Tᵀ lambda = -(T A^-1 b + fluxes of the lift).
The system is symmetric, its null space the constants, lambda the trace of the warping function. Nothing changes at holes,
slits and where materials meet.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp

from xsec_fem.fem.edge_dissection import edge_numbering
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.flux_tables import flux_degree, flux_tables, free_fields, lift_fields, source_degree
from xsec_fem.fem.linear_solve import factorise
from xsec_fem.fem.mapping import Batch, batches, map_points
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials
from xsec_fem.fem.raviart_thomas import raviart_thomas

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
Field = Callable[[IntArray, FloatArray], FloatArray]


@dataclass(frozen=True)
class FluxProblem:
    """What the fluxes must balance.

    Attributes
    ----------
    mesh, edges : the triangles and their edges.
    G : (P, 2, 2) tensor per part [MPa].
    source : parts (m,) and positions (m, Q, 2) -> (m, Q, k), minus the divergence, linear in the position.
    prescribed : the same -> (m, Q, k, 2), the field g.
    """

    mesh: Mesh
    edges: Edges
    G: FloatArray
    source: Field
    prescribed: Field

    @cached_property
    def inverse_G(self) -> FloatArray:
        """Inverse of G per part, shape (P, 2, 2) [1/MPa]."""
        return np.asarray(np.linalg.inv(self.G), dtype=np.float64)

    @property
    def degree(self) -> int:
        """Degree k of the Raviart-Thomas fields."""
        return flux_degree(self.mesh.order)

    @property
    def flux_count(self) -> int:
        """Fluxes per triangle, 3 (k + 1)."""
        return 3 * (self.degree + 1)

    def source_coefficients(self, batch: Batch) -> FloatArray:
        """Return div s of a batch's triangles, -source det J, shape (m, k, nl) [MPa mm per unit of each column].

        k columns; nl coefficients of the orthonormal polynomials of the reference triangle.
        """
        curved = _is_curved(batch)
        tables = flux_tables(self.mesh.order, curved)
        positions, _, det = map_points(self.mesh, batch.elements, tables.source_points, not curved)
        values = self.source(batch.part, positions) * -det[..., None]
        result: FloatArray = values.transpose(0, 2, 1) @ tables.source_weights
        return result


@dataclass(frozen=True)
class EquilibratedFlux:
    """The solved fields.

    Attributes
    ----------
    problem : what was solved.
    coefficients : (M, k, nz) of the fields without divergence.
    residual : largest relative residual of the linear solves.
    """

    problem: FluxProblem
    coefficients: FloatArray
    residual: float

    def values(self, batch: Batch) -> FloatArray:
        """Return sigma at the batch's points, shape (m, Q, k, 2) [MPa per unit of each column]."""
        curved = _is_curved(batch)
        tables = flux_tables(self.problem.mesh.order, curved)
        if batch.rule is tables.rule:
            free, lift = tables.free, tables.lift
        else:
            degree, points = self.problem.degree, batch.rule.points
            free = free_fields(degree, points)
            lift = lift_fields(degree, source_degree(self.problem.mesh.order, curved), points)
        s = _combine(self.coefficients[batch.elements], free) + _combine(self.problem.source_coefficients(batch), lift)
        j, det = batch.jacobian[:, None], batch.det[:, None]
        rows = [(j[..., i, 0] * s[:, :, 0] + j[..., i, 1] * s[:, :, 1]) / det for i in (0, 1)]
        return np.stack(rows, axis=-1).transpose(0, 2, 1, 3)

    def divergence(self, batch: Batch) -> FloatArray:
        """Return div sigma at the batch's points, shape (m, Q, k) [MPa/mm per unit of each column]."""
        degree = source_degree(self.problem.mesh.order, _is_curved(batch))
        polynomials = orthonormal_polynomials(degree, batch.rule.points)[0]
        result: FloatArray = (self.problem.source_coefficients(batch) @ polynomials.T).transpose(0, 2, 1)
        return result / batch.det[..., None]

    def edge_fluxes(self, batch: Batch) -> FloatArray:
        """Return the fluxes outward at the Gauss points of edges 0, 1, 2, walking counter-clockwise [N/mm per unit of each column].

        Their shape is (m, ne, k), ne = `flux_count` and k columns. They are Gauss weight times normal stress times edge length
        per unit of parameter, so that they sum to the resultant of each edge.
        """
        last = self.problem.flux_count - 1
        fluxes = _lift_fluxes(self.problem, self.problem.source_coefficients(batch))
        return (fluxes + _with_last(self.coefficients[batch.elements, :, :last])).transpose(0, 2, 1)


@dataclass(frozen=True)
class _Local:
    """The triangles' systems: A^-1 (M, nz, nz), b (M, k, nz), fluxes without multipliers and of the lift alone (M, k, ne), and the
    multipliers' numbers (M, ne)."""

    inverse: FloatArray
    loads: FloatArray
    fluxes: FloatArray
    lift_fluxes: FloatArray
    unknowns: IntArray


def _is_curved(batch: Batch) -> bool:
    return bool(batch.jacobian.shape[1] > 1)


def _combine(coefficients: FloatArray, fields: FloatArray) -> FloatArray:
    """(m, k, n) times (n, 2, Q) -> (m, k, 2, Q) as one matrix product."""
    m, k, n = coefficients.shape
    product = coefficients.reshape(m * k, n) @ fields.reshape(n, -1)
    return product.reshape(m, k, 2, -1)


def _with_last(fluxes: FloatArray) -> FloatArray:
    """Append minus the sum along the last axis: the flux of a free field at the last Gauss point."""
    return np.concatenate([fluxes, -fluxes.sum(axis=-1, keepdims=True)], axis=-1)


def _lift_fluxes(problem: FluxProblem, source: FloatArray) -> FloatArray:
    """(m, k, ne) fluxes of the lifted source: the total outflow, ∫pi_0 = 1/sqrt 2 of coefficient 0, a third through each side."""
    outflow = source[..., 0] / np.sqrt(2)
    result: FloatArray = outflow[..., None] * raviart_thomas(problem.degree).flux_weights / 3
    return result


def _metric(batch: Batch, inverse_G: FloatArray) -> FloatArray:
    """(m, Q or 1, 3) components yy, yz, zz of Jᵀ G^-1 J/det J."""
    j, flexible = batch.jacobian, inverse_G[batch.part][:, None]
    strain = flexible @ j  # column a: G^-1 times the tangent along reference axis a
    rows = [
        (j[..., 0, a] * strain[..., 0, b] + j[..., 1, a] * strain[..., 1, b]) / batch.det
        for a, b in ((0, 0), (0, 1), (1, 1))
    ]
    return np.stack(rows, axis=-1)


def _batch_loads(problem: FluxProblem, batch: Batch, metric: FloatArray, source: FloatArray) -> FloatArray:
    """(m, k, nz) b of the module docstring."""
    tables = flux_tables(problem.mesh.order, _is_curved(batch))
    g = problem.prescribed(batch.part, batch.points).transpose(0, 2, 3, 1)  # (m, k, 2, Q)
    s = _combine(source, tables.lift)
    j, h = batch.jacobian[:, None], metric[:, None]
    w = np.empty_like(s)
    for a, (first, second) in enumerate(((0, 1), (1, 2))):
        w[:, :, a] = j[..., 0, a] * g[:, :, 0] + j[..., 1, a] * g[:, :, 1]
        w[:, :, a] -= h[..., first] * s[:, :, 0] + h[..., second] * s[:, :, 1]
    w *= tables.rule.weights
    m, k = w.shape[:2]
    product = w.reshape(m * k, -1) @ tables.free.reshape(len(tables.free), -1).T
    return product.reshape(m, k, -1)


def _unknowns(problem: FluxProblem) -> IntArray:
    """(M, ne) multiplier at each of a triangle's Gauss points: an edge's run from its smaller to its larger node."""
    count = problem.degree + 1
    corner = problem.mesh.triangles[:, :3]
    forward = corner < np.roll(corner, -1, axis=1)
    along = np.arange(count)
    places = np.where(forward[..., None], along, count - 1 - along)
    return (problem.edges.of_triangle[..., None] * count + places).reshape(len(corner), -1)


def _local_systems(problem: FluxProblem, columns: int) -> _Local:
    """Eliminate the fields of every triangle, in batches."""
    size, last = len(problem.mesh.triangles), problem.flux_count - 1
    nz = (problem.degree + 1) * (problem.degree + 4) // 2
    local = _Local(
        np.empty((size, nz, nz)),
        np.empty((size, columns, nz)),
        np.empty((size, columns, last + 1)),
        np.empty((size, columns, last + 1)),
        _unknowns(problem),
    )
    for batch in batches(problem.mesh):
        tables = flux_tables(problem.mesh.order, _is_curved(batch))
        metric, source = _metric(batch, problem.inverse_G), problem.source_coefficients(batch)
        inverse = np.linalg.inv((metric.reshape(len(metric), -1) @ tables.products).reshape(-1, nz, nz))
        loads = _batch_loads(problem, batch, metric, source)
        lift = _lift_fluxes(problem, source)
        local.inverse[batch.elements], local.loads[batch.elements] = inverse, loads
        local.lift_fluxes[batch.elements] = lift
        local.fluxes[batch.elements] = _with_last(loads @ inverse[:, :, :last]) + lift
    return local


def _multiplier_matrix(local: _Local, numbering: IntArray) -> sp.csc_matrix:
    """Sum of T A^-1 Tᵀ, in elimination order: A^-1 of the flux functions, bordered by minus its sums."""
    count = local.unknowns.shape[1]
    core = local.inverse[:, : count - 1, : count - 1]
    data = np.empty((len(core), count, count))
    data[:, :-1, :-1] = core
    data[:, :-1, -1] = -core.sum(axis=2)
    data[:, -1, :-1] = data[:, :-1, -1]
    data[:, -1, -1] = core.sum(axis=(1, 2))
    index = numbering.astype(np.int32)[local.unknowns]
    rows, cols = np.repeat(index, count, axis=1), np.tile(index, count)
    size = len(numbering)
    return sp.coo_matrix((data.ravel(), (rows.ravel(), cols.ravel())), shape=(size, size)).tocsc()


def _excess(local: _Local, fluxes: FloatArray) -> FloatArray:
    """(U, k) minus the sum of the neighbours' outward fluxes (M, k, ne) at every multiplier."""
    where, size = local.unknowns.ravel(), int(local.unknowns.max()) + 1
    columns = [-np.bincount(where, column.ravel(), minlength=size) for column in fluxes.transpose(1, 0, 2)]
    return np.stack(columns, axis=1).astype(np.float64)


def _edge_loads(local: _Local, multipliers: FloatArray) -> FloatArray:
    """(M, k, nz) Tᵀ lambda: the difference to the last Gauss point's multiplier, zero for fields without flux."""
    at_edges = multipliers[local.unknowns].transpose(0, 2, 1)
    loads = np.zeros_like(local.loads)
    loads[:, :, : at_edges.shape[2] - 1] = at_edges[..., :-1] - at_edges[..., -1:]
    return loads


def solve_fluxes(problem: FluxProblem, names: tuple[str, ...]) -> EquilibratedFlux:
    """Solve for all columns of the problem, one name each, with one factorisation (N, mm, MPa). Source: Arnold & Brezzi 1985.

    Raises
    ------
    SolveError
        When the sources of a column do not sum to zero, or the system is singular (two bodies) or not solved to round-off.
    """
    mesh, edges, count = problem.mesh, problem.edges, problem.degree + 1
    local = _local_systems(problem, len(names))
    numbering = (edge_numbering(mesh, edges)[:, None] * count + np.arange(count)).ravel()
    middle = mesh.nodes[edges.corners].mean(axis=1)
    pinned = int(np.argmin(((middle - mesh.nodes.mean(axis=0)) ** 2).sum(axis=1))) * count
    factor = factorise(_multiplier_matrix(local, numbering), numbering, pinned)
    sizes = np.abs(local.fluxes).sum(axis=(0, 2))
    multipliers, _, residual = factor.solve(_excess(local, local.fluxes), sizes, names)
    coefficients = (local.loads + _edge_loads(local, multipliers)) @ local.inverse
    # in small or slender triangles the multipliers' differences are few digits of their values; what is left over is
    # small, and solving for it makes the fluxes cancel to round-off of themselves
    left = local.lift_fluxes + _with_last(coefficients[:, :, : problem.flux_count - 1])
    correction, _, _ = factor.solve(_excess(local, left), sizes, names)
    coefficients += _edge_loads(local, correction) @ local.inverse
    return EquilibratedFlux(problem, coefficients, residual)
