"""The pure Neumann system: one factorisation, any number of right-hand sides, the null space owned.

K has the constants as its null space. A spring of the matrix's own size at one node makes K + alpha e eᵀ positive definite;
a load that sums to zero leaves that spring unstretched, so the solution is the one that is zero at that node and
no equation is altered. Loads are checked before, residuals after.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp
import scipy.sparse.linalg as spla
from scipy.sparse.csgraph import connected_components

from xsec_fem.errors import SolveError

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

LOAD_SUM_LIMIT = 1e-9  # |sum of load| over the sum of |load|: round-off of N terms is below 1e-12 at N = 1e6
RESIDUAL_LIMIT = (
    1e-9  # backward-stable factors reach 1e-13; a thousandfold loss still leaves every digit that is printed
)


@dataclass(frozen=True)
class NeumannFactor:
    """A factorised Neumann matrix.

    Attributes
    ----------
    matrix : (N, N) the matrix in elimination order, without the spring.
    numbering : (N,) place of each node in that order.
    lu : the factors.
    """

    matrix: sp.csc_matrix
    numbering: IntArray
    lu: spla.SuperLU

    def solve(self, loads: FloatArray, sizes: FloatArray, names: tuple[str, ...]) -> tuple[FloatArray, float, float]:
        """Solve for nodal loads (N, k), with the sum (k,) of the magnitudes they were added up from, and a name a column.

        Returns the solutions (N, k), the largest relative load sum and the largest relative residual
        |K u - b| / (|K| |u| + |b|) in the maximum norm, both [-].

        Raises
        ------
        SolveError
            When a load does not sum to zero, or the residual is not at round-off: the message names the problem.
        """
        unbalanced = np.abs(loads.sum(axis=0)) / np.where(sizes > 0, sizes, 1.0)
        worst = int(np.argmax(unbalanced))
        if unbalanced[worst] > LOAD_SUM_LIMIT or not np.all(np.isfinite(loads)):
            raise SolveError(
                f"the load of '{names[worst]}' does not sum to zero (relative sum {unbalanced[worst]:.3g}): the problem "
                "has no solution. The centroid or the free-edge terms are not those of this mesh"
            )
        ordered = np.empty_like(loads)
        ordered[self.numbering] = loads - loads.mean(axis=0)
        solution = self.lu.solve(ordered)
        residual = self._residual(solution, ordered)
        if not np.isfinite(residual) or residual > RESIDUAL_LIMIT:
            raise SolveError(f"the linear system was not solved to round-off: relative residual {residual:.3g}")
        return np.asarray(solution[self.numbering]), float(unbalanced[worst]), residual

    def _residual(self, solution: FloatArray, loads: FloatArray) -> float:
        defect = np.abs(self.matrix @ solution - loads).max(axis=0)
        norm = float(abs(self.matrix).sum(axis=0).max())
        scale = norm * np.abs(solution).max(axis=0) + np.abs(loads).max(axis=0)
        return float((defect / np.where(scale > 0, scale, 1.0)).max())


def factorise(matrix: sp.csc_matrix, numbering: IntArray, pinned: int) -> NeumannFactor:
    """Factorise a Neumann matrix (N, N) given in elimination order; `pinned` is the node (its own number) that stays zero.

    Raises SolveError when the matrix is singular beyond the constants (two separate bodies) or not positive.
    """
    size = matrix.shape[0]
    bodies, _ = connected_components(matrix, directed=False)
    if bodies > 1:  # round-off in the pivots would hide it: each body has constants of its own
        raise SolveError(f"the stiffness matrix of {size} unknowns is singular: the mesh falls into {bodies} bodies")
    diagonal = matrix.diagonal()
    spring = sp.csc_matrix(([diagonal.max()], ([numbering[pinned]], [numbering[pinned]])), shape=(size, size))
    try:
        lu = spla.splu(
            matrix + spring,
            permc_spec="NATURAL",
            diag_pivot_thresh=0.0,
            options={"SymmetricMode": True, "Equil": False},
        )
    except RuntimeError as error:
        raise SolveError(f"the stiffness matrix of {size} unknowns is singular: {error}") from error
    return NeumannFactor(matrix, numbering, lu)
