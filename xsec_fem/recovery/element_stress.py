"""Stresses of unit actions at the nodes of every triangle, triangle by triangle: nothing is averaged between neighbours.

On straight triangles of degree 2 and more these values hold the whole field of the warping functions, G (grad u + g), whose degree
is at most that of the triangle, and the equilibrated field too (RT_(p-1)); on curved triangles they interpolate it.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.equilibrated import EquilibratedFlux
from xsec_fem.fem.mapping import Batch, map_points
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import Rule
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION, Warping

FloatArray = npt.NDArray[np.float64]

_BATCH = 4096  # triangles at a time, to bound memory


def element_stress(warping: Warping, stiffness: ShearStiffness) -> FloatArray:
    """Return tau of unit Vy, Vz and T from the warping functions, shape (M, n, 3, 2) [MPa per N, MPa per N mm]."""
    return _at_nodes(warping.problem.mesh, warping.stresses, stiffness.GIT)


def equilibrated_stress(flux: EquilibratedFlux, stiffness: ShearStiffness) -> FloatArray:
    """Return the equilibrated field of unit Vy, Vz and T, shape (M, n, 3, 2) [MPa per N, MPa per N mm].

    `flux` has the five columns of xsec_fem.theory.warping.PROBLEMS.
    """
    return _at_nodes(flux.problem.mesh, flux.values, stiffness.GIT)


def _at_nodes(mesh: Mesh, values: Callable[[Batch], FloatArray], GIT: float) -> FloatArray:
    """Evaluate a field of the five problems at every triangle's own nodes."""
    nodes = mesh.element.nodes
    rule = Rule(nodes, np.full(len(nodes), 0.5 / len(nodes)), 0)  # points only: nothing is integrated with it
    result = np.empty((*mesh.triangles.shape, 3, 2))
    for straight in (True, False):
        chosen = np.flatnonzero(mesh.curved != straight)
        for start in range(0, len(chosen), _BATCH):
            elements = chosen[start : start + _BATCH]
            places, jacobian, det = map_points(mesh, elements, nodes, straight)
            batch = Batch(
                elements, mesh.triangles[elements], mesh.part_of[elements], mesh.element, rule, places, jacobian, det
            )
            tau = values(batch)
            result[elements, :, :2] = tau[:, :, SHEAR] + tau[:, :, POISSON]
            result[elements, :, 2] = tau[:, :, TORSION] / GIT
    return result
