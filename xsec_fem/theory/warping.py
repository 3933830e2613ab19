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
from xsec_fem.fem.mapping import Batch, batches
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.moduli import Moduli
from xsec_fem.theory.poisson import poisson_term

FloatArray = npt.NDArray[np.float64]

TORSION, SHEAR, POISSON = 0, slice(1, 3), slice(3, 5)
PROBLEMS = ("torsion", "flexure by Vy", "flexure by Vz", "Poisson part of Vy", "Poisson part of Vz")


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
        """(2, 2) rows a for unit Vy and unit Vz."""
        return np.asarray(np.linalg.inv(self.area.EI), dtype=np.float64)

    def position(self, batch: Batch) -> FloatArray:
        """(m, Q, 2) position of the batch's points from the centroid [mm]."""
        result: FloatArray = batch.points - self.area.centroid
        return result

    def prescribed(self, batch_part: npt.NDArray[np.int64], r: FloatArray) -> FloatArray:
        """Return g of tau = G (grad u + g) for all problems: t for torsion, 0, and -d; shape (m, Q, 5, 2).

        batch_part : (m,) part index; r : (m, Q, 2) position from the centroid [mm]. Source: Sokolnikoff 1956, ch. 4.
        """
        g = np.zeros((*r.shape[:2], len(PROBLEMS), 2))
        g[:, :, TORSION, 0], g[:, :, TORSION, 1] = -r[..., 1], r[..., 0]
        g[:, :, POISSON] = -poisson_term(self.moduli.nu[batch_part], r, self.a)
        return g

    def stress(self, batch_part: npt.NDArray[np.int64], strain: FloatArray) -> FloatArray:
        """Return G strain for strains (m, Q, k, 2), same shape [MPa per unit action]."""
        G = self.moduli.G[batch_part][:, None]
        return strain @ G  # G is symmetric


@dataclass(frozen=True)
class Warping:
    """The solved problems.

    Attributes
    ----------
    problem : what was solved.
    functions : (N, 5) omega [mm²] and the flexure functions [1/N], E-weighted mean zero.
    load_sum : largest relative sum of a load (0 up to round-off).
    residual : largest relative residual of the linear solves.
    """

    problem: WarpingProblem
    functions: FloatArray
    load_sum: float
    residual: float

    def stresses(self, batch: Batch) -> FloatArray:
        """Return tau of all five problems at the batch's points, shape (m, Q, 5, 2) [MPa per unit action or twist]."""
        strain = batch.gradients(self.functions)
        strain += self.problem.prescribed(batch.part, self.problem.position(batch))
        return self.problem.stress(batch.part, strain)


def warping_loads(problem: WarpingProblem) -> FloatArray:
    """Return the consistent nodal loads of the five problems, shape (N, 5). Source: Sokolnikoff 1956, ch. 4."""
    loads = np.zeros((len(problem.mesh.nodes), len(PROBLEMS)))
    for batch in batches(problem.mesh):
        r = problem.position(batch)
        scalar = np.zeros((*r.shape[:2], len(PROBLEMS)))
        scalar[..., SHEAR] = problem.moduli.E[batch.part][:, None, None] * (r @ problem.a.T)
        flux = -problem.stress(batch.part, problem.prescribed(batch.part, r))
        add_at_nodes(loads, batch.nodes, element_loads(batch, scalar, flux))
    return loads


def factorise_warping(problem: WarpingProblem) -> NeumannFactor:
    """Assemble and factorise the common matrix ∫G grad u . grad v, (N, N), pinned at the node nearest the centroid.

    Raises SolveError when it is singular beyond the constants. Source: Sokolnikoff 1956, ch. 4.
    """
    numbering = dissection_numbering(problem.mesh)
    matrix = stiffness_matrix(problem.mesh, problem.moduli.G, numbering)
    pinned = int(np.argmin(((problem.mesh.nodes - problem.area.centroid) ** 2).sum(axis=1)))
    return factorise(matrix, numbering, pinned)


def solve_warping(problem: WarpingProblem, factor: NeumannFactor) -> Warping:
    """Solve the five problems with one factor; functions (N, 5) come back with E-weighted mean zero.

    Raises SolveError as NeumannFactor.solve does. Source: Sokolnikoff 1956, ch. 4.
    """
    functions, load_sum, residual = factor.solve(warping_loads(problem), PROBLEMS)
    mean = np.zeros(functions.shape[1])
    for batch in batches(problem.mesh):
        weights = batch.weights * problem.moduli.E[batch.part][:, None]
        mean += np.einsum("mq,qn,mnk->k", weights, batch.shape_values, functions[batch.nodes], optimize=True)
    return Warping(problem, functions - mean / problem.area.EA, load_sum, residual)
