"""Numbers that must be small for a result to be trusted, each with its limit and the reason for it."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from xsec_fem.fem.edge_integrals import edge_nodes, edge_weights
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.linear_solve import LOAD_SUM_LIMIT, RESIDUAL_LIMIT
from xsec_fem.pipeline.solution import Solution
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.stress_field import UnitFields
from xsec_fem.results import Check
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION

# Identities of the discrete equations: they hold to round-off on any mesh. 1e-8 leaves room for the condition number of
# very thin sections (thickness/size = 1e-4 loses about four digits) and still catches any wrong term.
IDENTITY_LIMIT = 1e-8

# Shear across the free edge over the shear along it, root mean square: zero in the exact field, so it measures the mesh.
# Default meshes stay below 0.02; 0.1 means that stresses near the edge are off by about 10 %.
FREE_EDGE_LIMIT = 0.1


def checks(solution: Solution, fields: UnitFields) -> tuple[Check, ...]:
    """Return the checks of one solve, all dimensionless."""
    warping, integrals = solution.warping, solution.integrals
    free_edge = free_edge_ratio(fields, solution.edges, solution.corners)
    force = integrals.resultant[SHEAR] + integrals.resultant[POISSON]
    GIT = integrals.energy[TORSION, TORSION]
    coupling = integrals.energy[SHEAR, TORSION] + integrals.energy[POISSON, TORSION]
    torque = integrals.moment[SHEAR] + integrals.moment[POISSON]
    expected = torque + warping.problem.a @ integrals.E_omega_r
    size = np.sqrt(GIT * np.diag(integrals.energy)[SHEAR]) + np.abs(torque)
    return (
        Check("loads sum to zero", warping.load_sum, LOAD_SUM_LIMIT),
        Check("equilibrium (residual of the linear system)", warping.residual, RESIDUAL_LIMIT),
        Check("resultants of tau equal Vy, Vz", float(np.abs(force - np.eye(2)).max()), IDENTITY_LIMIT),
        Check("torque of the unit twist equals G IT", float(abs(integrals.moment[TORSION] / GIT - 1)), IDENTITY_LIMIT),
        Check(
            "shear-torsion coupling by two routes", float((np.abs(coupling - expected) / size).max()), IDENTITY_LIMIT
        ),
        *_proof_checks(solution),
        Check("free edge (shear across over shear along)", free_edge, FREE_EDGE_LIMIT),
    )


def _proof_checks(solution: Solution) -> tuple[Check, ...]:
    """The identity that the bounds rest on, and the constants inside their own intervals."""
    if solution.bounds is None:
        return ()
    proof, stiffness = solution.bounds.certificate, solution.stiffness
    flexibility = stiffness.shear_flexibility
    pairs = (
        (stiffness.GIT, proof.GIT),
        (1 / flexibility[0, 0], proof.GAsy),
        (1 / flexibility[1, 1], proof.GAsz),
    )
    outside = max(max(low - value, value - high, 0.0) / value for value, (low, high) in pairs)
    return (
        Check("Prager-Synge identity of both solutions", solution.bounds.identity_defect, IDENTITY_LIMIT),
        Check("bounds bracket IT, Asy, Asz (share outside)", float(outside), IDENTITY_LIMIT),
    )


def free_edge_ratio(fields: UnitFields, edges: Edges, corners: Sequence[Corner]) -> float:
    """Return the worst root mean square of tau . n over that of |tau| on the free boundary, of unit Vy, Vz and T [-].

    Nodes within the stated distance of a singular corner do not count.
    """
    mesh = fields.part_nodes.mesh
    own = edges.triangles[edges.free, 0]
    nodes, normals = edge_nodes(mesh, edges, edges.free, of=own, with_normals=True)
    weights, _ = edge_weights(mesh, edges, edges.free)
    place = np.argmax(mesh.triangles[own][:, None, :] == nodes[:, :, None], axis=2)
    pairs = np.take_along_axis(fields.part_nodes.triangles[own], place, axis=1)
    tau = fields.tau[pairs]  # (K, p+1, 3, 2)
    share = weights[nodes] * corner_mask(fields.part_nodes.positions, corners)[pairs]
    across = np.einsum("kn,knj->j", share, np.einsum("knjd,knd->knj", tau, normals) ** 2)
    along = np.einsum("kn,knj->j", share, (tau**2).sum(axis=-1))
    return float(np.sqrt((across / along).max()))
