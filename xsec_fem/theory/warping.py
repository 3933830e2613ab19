"""The Saint-Venant warping problems, all on one matrix: torsion and flexure by Vy and Vz.

    torsion   tau = G (grad omega + t),  t = (-z, y)          ∫G grad omega . grad v = -∫G t . grad v
    flexure   tau = G (grad psi - d),    div tau = -E f       ∫G grad psi . grad v = ∫E f v + ∫G d . grad v

f = a . r, a = EI^-1 e for a unit force along e, r from the E-weighted centroid; d is the Poisson term. Flexure is solved
in two parts that add up: psi0 with d = 0, and psi1 with f = 0 (the Poisson part), because their energies are bounded apart.
Source: I. S. Sokolnikoff, Mathematical Theory of Elasticity, 2nd ed. 1956, ch. 4 (torsion and flexure as Neumann problems).

Columns of every array with a problem axis: TORSION, Vy, Vz, Vy's Poisson part, Vz's Poisson part.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.assembly import add_at_nodes, element_loads, stiffness_matrix
from xsec_fem.fem.dissection import dissection_numbering
from xsec_fem.fem.linear_solve import NeumannFactor, factorise
from xsec_fem.fem.mapping import Batch, batches, by_component
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.moduli import Moduli
from xsec_fem.theory.poisson import poisson_term

FloatArray = npt.NDArray[np.float64]

TORSION, SHEAR, POISSON = 0, slice(1, 3), slice(3, 5)
PROBLEMS = ("torsion", "flexure by Vy", "flexure by Vz", "Poisson part of Vy", "Poisson part of Vz")


def apply_tensor(tensor: FloatArray, vectors: FloatArray) -> FloatArray:
    """Return tensor . vector for tensors (m, 2, 2), one a triangle, and vectors (m, Q, k, 2), same shape [product of their units].

    Written out by components: tiny matrix products are ten times slower.
    """
    t = tensor[:, None, None]
    if not tensor[:, 0, 1].any() and not tensor[:, 1, 0].any() and (tensor[:, 0, 0] == tensor[:, 1, 1]).all():
        return np.asarray(vectors * t[..., 0, :1])
    result = np.empty_like(vectors)
    for row in (0, 1):
        result[..., row] = t[..., row, 0] * vectors[..., 0] + t[..., row, 1] * vectors[..., 1]
    return result


@dataclass(frozen=True)
class WarpingProblem:
    """What all five problems share: mesh, constants, origin and the two unit vectors a.

    `a` has shape (2, 2): row k is EI^-1 e_k for unit Vy (k = 0) and unit Vz (k = 1) [1/(N mm²)].
    """

    mesh: Mesh
    moduli: Moduli
    area: AreaProperties

    @property
    def a(self) -> FloatArray:
        """Rows a = EI^-1 e for unit Vy and unit Vz, shape (2, 2) [1/(N mm²)]. Source: Sokolnikoff 1956, ch. 4."""
        return np.asarray(np.linalg.inv(self.area.EI), dtype=np.float64)

    def position(self, batch: Batch) -> FloatArray:
        """Return the position of the batch's points from the centroid, shape (m, Q, 2) [mm]."""
        result: FloatArray = batch.points - self.area.centroid
        return result

    def twist_field(self, r: FloatArray) -> FloatArray:
        """Return t = (-z, y) at positions r (m, Q, 2) from the centroid, shape (m, Q, 1, 2) [mm]. Source: Sokolnikoff 1956."""
        t = by_component((*r.shape[:2], 1))
        t[..., 0, 0], t[..., 0, 1] = -r[..., 1], r[..., 0]
        return t

    def poisson_field(self, part: npt.NDArray[np.int64], r: FloatArray) -> FloatArray:
        """Return -d of unit Vy and Vz, shape (m, Q, 2, 2) [1/N], for triangles of the parts (m,) at r (m, Q, 2) [mm].

        Source: Love 1927.
        """
        return -poisson_term(self.moduli.nu[part], r, self.a)

    def prescribed(self, part: npt.NDArray[np.int64], r: FloatArray) -> FloatArray:
        """Return g of tau = G (grad u + g) for all problems: t for torsion [mm], 0, and -d [1/N]; shape (m, Q, 5, 2).

        part : (m,) part index; r : (m, Q, 2) position from the centroid [mm]. Source: Sokolnikoff 1956, ch. 4.
        """
        g = np.zeros((*r.shape[:2], len(PROBLEMS), 2))
        g[:, :, TORSION] = self.twist_field(r)[:, :, 0]
        g[:, :, POISSON] = self.poisson_field(part, r)
        return g

    def stress(self, batch_part: npt.NDArray[np.int64], strain: FloatArray) -> FloatArray:
        """Return G strain for strains (m, Q, k, 2), same shape [MPa per unit action]. Source: Sokolnikoff 1956, ch. 4."""
        return apply_tensor(self.moduli.G[batch_part], strain)


@dataclass(frozen=True)
class Warping:
    """The solved problems.

    Attributes
    ----------
    problem : what was solved.
    functions : (N, 5) omega [mm²] and the flexure functions [mm/N], E-weighted mean zero.
    load_sum : largest relative sum of a load (0 up to round-off).
    residual : largest relative residual of the linear solves.
    """

    problem: WarpingProblem
    functions: FloatArray
    load_sum: float
    residual: float

    def strains(self, batch: Batch) -> FloatArray:
        """Return G^-1 tau of all five problems at the batch's points, shape (m, Q, 5, 2) [mm per unit twist, 1 per N].

        Source: Sokolnikoff 1956, ch. 4.
        """
        strain = batch.gradients(self.functions)
        r = self.problem.position(batch)
        strain[:, :, TORSION] += self.problem.twist_field(r)[:, :, 0]
        strain[:, :, POISSON] += self.problem.poisson_field(batch.part, r)
        return strain

    def stresses(self, batch: Batch) -> FloatArray:
        """Return tau of all five problems at the batch's points, shape (m, Q, 5, 2) [MPa per unit action or twist].

        Source: Sokolnikoff 1956, ch. 4.
        """
        return self.problem.stress(batch.part, self.strains(batch))


def warping_loads(problem: WarpingProblem) -> tuple[FloatArray, FloatArray]:
    """Return the consistent nodal loads of the five problems (N, 5) [N per unit twist, N/mm per N], and their sizes (5,).

    The size is the sum of the magnitudes of all element loads: on a circle the torsion load itself is zero up to round-off.
    Source: Sokolnikoff 1956, ch. 4.
    """
    loads, sizes = np.zeros((len(problem.mesh.nodes), len(PROBLEMS))), np.zeros(len(PROBLEMS))
    for batch in batches(problem.mesh):
        r = problem.position(batch)
        body = problem.moduli.E[batch.part][:, None, None] * (r @ problem.a.T)
        twist = problem.stress(batch.part, problem.twist_field(r))
        sideways = problem.stress(batch.part, problem.poisson_field(batch.part, r))
        values = np.concatenate(
            [
                -element_loads(batch, None, twist),
                element_loads(batch, body, None),
                -element_loads(batch, None, sideways),
            ],
            axis=2,
        )
        add_at_nodes(loads, batch.nodes, values)
        sizes += np.abs(values).sum(axis=(0, 1))
    return loads, sizes


def factorise_warping(problem: WarpingProblem) -> NeumannFactor:
    """Assemble and factorise the common matrix ∫G grad u . grad v, (N, N) [MPa], pinned at the node nearest the centroid.

    Raises SolveError when it is singular beyond the constants. Source: Sokolnikoff 1956, ch. 4.
    """
    numbering = dissection_numbering(problem.mesh)
    matrix = stiffness_matrix(problem.mesh, problem.moduli.G, numbering)
    pinned = int(np.argmin(((problem.mesh.nodes - problem.area.centroid) ** 2).sum(axis=1)))
    return factorise(matrix, numbering, pinned)


def solve_warping(problem: WarpingProblem, factor: NeumannFactor) -> Warping:
    """Solve the five problems with one factor; functions (N, 5) [mm², mm/N] come back with E-weighted mean zero.

    Raises SolveError as NeumannFactor.solve does. Source: Sokolnikoff 1956, ch. 4.
    """
    functions, load_sum, residual = factor.solve(*warping_loads(problem), PROBLEMS)
    mean = np.zeros(functions.shape[1])
    for batch in batches(problem.mesh):
        weights = batch.weights * problem.moduli.E[batch.part][:, None]
        mean += np.einsum("mq,qn,mnk->k", weights, batch.shape_values, functions[batch.nodes], optimize=True)
    return Warping(problem, functions - mean / problem.area.EA, load_sum, residual)
