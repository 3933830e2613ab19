"""The integrals over the solved fields from which every constant of the section follows, in one pass over the mesh."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mapping import batches
from xsec_fem.theory.warping import PROBLEMS, TORSION, Warping

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class FieldIntegrals:
    """Integrals with the five problems' axis first (xsec_fem.theory.warping.PROBLEMS).

    Attributes
    ----------
    energy : (5, 5) ∫ tau_i . G^-1 tau_j.
    resultant : (5, 2) ∫ tau_i.
    moment : (5,) ∫ (y tau_xz - z tau_xy), about the centroid.
    E_omega_r : (2,) ∫ E omega r [N mm³].
    E_omega2 : ∫ E omega² [N mm⁴].
    """

    energy: FloatArray
    resultant: FloatArray
    moment: FloatArray
    E_omega_r: FloatArray
    E_omega2: float


def field_integrals(warping: Warping) -> FieldIntegrals:
    """Integrate the fields of `warping`; shapes as in FieldIntegrals (5, ...), units per unit force or twist (N, mm).

    Source: definitions in Sokolnikoff 1956, ch. 4.
    """
    problem, count = warping.problem, len(PROBLEMS)
    energy, resultant, moment = np.zeros((count, count)), np.zeros((count, 2)), np.zeros(count)
    E_omega_r, E_omega2 = np.zeros(2), 0.0
    for batch in batches(problem.mesh):
        strain, r, weights = warping.strains(batch), problem.position(batch), batch.weights
        weighted = problem.stress(batch.part, strain) * weights[..., None, None]
        for component in (0, 1):
            force = weighted[..., component].reshape(-1, count)
            energy += force.T @ strain[..., component].reshape(-1, count)
            resultant[:, component] += force.sum(axis=0)
            arm = r[..., 1 - component].ravel()
            moment += (1 if component else -1) * (arm @ force)
        omega = warping.functions[batch.nodes, TORSION] @ batch.shape_values.T
        E_weights = weights * problem.moduli.E[batch.part][:, None] * omega
        E_omega_r += E_weights.ravel() @ r.reshape(-1, 2)
        E_omega2 += float((E_weights * omega).sum())
    return FieldIntegrals((energy + energy.T) / 2, resultant, moment, E_omega_r, E_omega2)
