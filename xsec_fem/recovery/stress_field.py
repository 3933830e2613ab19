"""Stresses at the nodes, part by part, under unit actions and under any combination of them.

sigma_x = E (N/EA + kappa . r) and tau from the warping fields; actions are combined with their signs at every point, never
as magnitudes. Where two parts meet each keeps its own values.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.locate import find_triangles
from xsec_fem.fem.part_nodes import PartNodes
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION, Warping

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class SectionForces:
    """Actions reduced to the shear centre of zero mean twist: N, Vy, Vz [N] and T, My, Mz [N mm]."""

    N: float = 0.0
    Vy: float = 0.0
    Vz: float = 0.0
    T: float = 0.0
    My: float = 0.0
    Mz: float = 0.0


@dataclass(frozen=True)
class PointStress:
    """Stress at one point of one part [MPa]."""

    part: str
    tau_xy: float
    tau_xz: float
    sigma_x: float

    @property
    def tau(self) -> float:
        """Magnitude of the shear stress [MPa]."""
        return float(np.hypot(self.tau_xy, self.tau_xz))

    @property
    def von_mises(self) -> float:
        """Equivalent stress sqrt(sigma² + 3 tau²) [MPa] (R. von Mises, 1913)."""
        return float(np.sqrt(self.sigma_x**2 + 3 * self.tau**2))


@dataclass(frozen=True)
class StressField:
    """The stresses of one load case on the nodes split by part.

    Attributes
    ----------
    part_nodes : the numbering; S values.
    tau_components : (S, 2) tau_xy and tau_xz [MPa].
    sigma_x : (S,) [MPa].
    """

    part_nodes: PartNodes
    tau_components: FloatArray
    sigma_x: FloatArray

    @property
    def tau_xy(self) -> FloatArray:
        """Shear stress along y, shape (S,) [MPa]."""
        return self.tau_components[:, 0]

    @property
    def tau_xz(self) -> FloatArray:
        """Shear stress along z, shape (S,) [MPa]."""
        return self.tau_components[:, 1]

    @cached_property
    def tau(self) -> FloatArray:
        """Magnitude of the shear stress, shape (S,) [MPa]."""
        return np.asarray(np.hypot(self.tau_xy, self.tau_xz))

    @cached_property
    def von_mises(self) -> FloatArray:
        """Equivalent stress sqrt(sigma² + 3 tau²), shape (S,) [MPa] (R. von Mises, 1913)."""
        return np.asarray(np.sqrt(self.sigma_x**2 + 3 * self.tau**2))

    def at(self, y: float, z: float) -> tuple[PointStress, ...]:
        """Return the stress at a point of the file's axes [mm], one entry for each part that holds it.

        Raises ValueError when the point lies outside the section.
        """
        mesh = self.part_nodes.mesh
        elements, reference = find_triangles(mesh, (y, z))
        if not len(elements):
            raise ValueError(f"the point ({y:g}, {z:g}) lies outside the section")
        values = mesh.element.values(reference)
        found: dict[int, PointStress] = {}
        for part in np.unique(mesh.part_of[elements]):
            mine = mesh.part_of[elements] == part
            nodes, weights = self.part_nodes.triangles[elements[mine]], values[mine]
            tau = np.einsum("mn,mnd->d", weights, self.tau_components[nodes]) / mine.sum()
            sigma = float(np.einsum("mn,mn->", weights, self.sigma_x[nodes]) / mine.sum())
            found[int(part)] = PointStress(mesh.part_names[part], float(tau[0]), float(tau[1]), sigma)
        return tuple(found.values())


@dataclass(frozen=True)
class UnitFields:
    """Fields of unit actions on the nodes split by part.

    Attributes
    ----------
    part_nodes : the numbering; S values.
    tau : (S, 3, 2) of unit Vy and Vz through the shear centre of zero mean twist, and of unit T [MPa per N, MPa per N mm].
    sigma : (S, 3) of unit N, My and Mz [MPa per N, MPa per N mm].
    """

    part_nodes: PartNodes
    tau: FloatArray
    sigma: FloatArray

    def combine(self, forces: SectionForces) -> StressField:
        """Return the stresses under the given forces, arrays of shape (S,) and (S, 2) as in StressField [MPa]."""
        tau = np.einsum("skd,k->sd", self.tau, np.array([forces.Vy, forces.Vz, forces.T]))
        sigma = self.sigma @ np.array([forces.N, forces.My, forces.Mz])
        return StressField(self.part_nodes, tau, sigma)


def unit_fields(warping: Warping, stiffness: ShearStiffness) -> UnitFields:
    """Recover the nodal fields of unit actions from the solved warping functions, shapes (S, 3, 2) and (S, 3).

    In MPa per N and MPa per N mm. tau is the mean over the triangles of the part at a node; sigma_x is exact.
    Source: xsec_fem.theory.warping (Sokolnikoff 1956).
    """
    problem = warping.problem
    part_nodes = PartNodes.of(problem.mesh)
    r = part_nodes.positions - problem.area.centroid
    functions = warping.functions
    twist_and_shear = np.column_stack([functions[:, TORSION], functions[:, SHEAR] + functions[:, POISSON]])
    strain = part_nodes.mean_gradients(twist_and_shear)
    strain[:, :1] += problem.twist_field(r[:, None, :])[:, 0]
    strain[:, 1:] += problem.poisson_field(part_nodes.part, r[:, None, :])[:, 0]
    tau = problem.stress(part_nodes.part, strain[:, None])[:, 0]
    unit_tau = np.concatenate([tau[:, 1:], tau[:, :1] / stiffness.GIT], axis=1)

    # sigma_x = E (kappa . r) with EI kappa = (-Mz, My)
    E = problem.moduli.E[part_nodes.part]
    along = r @ problem.a.T
    sigma = E[:, None] * np.column_stack([np.full(len(E), 1 / problem.area.EA), along[:, 1], -along[:, 0]])
    return UnitFields(part_nodes, unit_tau, sigma)
