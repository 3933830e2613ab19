"""The numerical chain from mesh and moduli to constants and fields, without the section file."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges, mesh_edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.recovery.stress_field import UnitFields, unit_fields
from xsec_fem.theory.area_properties import AreaProperties, area_properties
from xsec_fem.theory.field_integrals import FieldIntegrals, field_integrals
from xsec_fem.theory.moduli import Moduli
from xsec_fem.theory.stiffness import ShearStiffness, section_stiffness, shear_stiffness
from xsec_fem.theory.warping import Warping, WarpingProblem, factorise_warping, solve_warping

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Solved:
    """Everything that follows from a mesh and its moduli."""

    mesh: Mesh
    moduli: Moduli

    @cached_property
    def area(self) -> AreaProperties:
        return area_properties(self.mesh, self.moduli)

    @cached_property
    def warping(self) -> Warping:
        problem = WarpingProblem(self.mesh, self.moduli, self.area)
        return solve_warping(problem, factorise_warping(problem))

    @cached_property
    def integrals(self) -> FieldIntegrals:
        return field_integrals(self.warping)

    @cached_property
    def stiffness(self) -> ShearStiffness:
        return shear_stiffness(self.area, self.integrals)

    @cached_property
    def six(self) -> FloatArray:
        return section_stiffness(self.area, self.stiffness)

    @cached_property
    def fields(self) -> UnitFields:
        return unit_fields(self.warping, self.stiffness)

    @cached_property
    def edges(self) -> Edges:
        return mesh_edges(self.mesh)

    @property
    def shear_centre(self) -> FloatArray:
        """Zero mean twist, in the mesh's axes."""
        return self.area.centroid + self.stiffness.shear_centre

    @property
    def trefftz_centre(self) -> FloatArray:
        """Uncoupled energies, in the mesh's axes."""
        return self.area.centroid + self.stiffness.trefftz_centre

    def shear_area(self, G: float) -> FloatArray:
        """Asy and Asz over the given G."""
        return 1 / (G * np.diag(self.stiffness.shear_flexibility))


def solved(mesh: Mesh, nu: float = 0.0, E: float | None = None, G: float | None = None) -> Solved:
    """One isotropic material; by default G = 1, so that G IT is IT."""
    modulus = 2 * (1 + nu) if E is None else E
    return Solved(mesh, Moduli.isotropic(modulus, nu, G))


def layered(mesh: Mesh, materials: list[Moduli]) -> Solved:
    """One material a part, in the mesh's order of parts."""
    return Solved(mesh, stacked(materials))


def stacked(materials: list[Moduli]) -> Moduli:
    """The constants of several one-part moduli together."""
    return Moduli(*(np.concatenate([getattr(m, name) for m in materials]) for name in ("E", "G", "nu")))
