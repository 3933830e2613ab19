"""What cuts are evaluated with: the mesh's edges as curves, the fields of unit actions, and where stress has no limit."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edge_curves import EdgeCurves
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.recovery.corners import Corner
from xsec_fem.recovery.element_stress import element_stress
from xsec_fem.recovery.stress_field import SectionForces, UnitFields, unit_fields
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, Warping

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class SolvedFields:
    """The solved section as cuts see it.

    Attributes
    ----------
    warping, stiffness : the solved problems.
    fields : nodal fields of unit actions, for peaks and profiles.
    edges : edges of the mesh.
    corners : where stress has no limit; peaks are read outside their stated distance.
    flow_field : (M, n, 3, 2) field of unit actions whose flow is measured; None: that of the warping functions.
        Give `equilibrated_stress(...)` for flows that are exact to round-off on straight-sided sections.
    """

    warping: Warping
    stiffness: ShearStiffness
    fields: UnitFields
    edges: Edges
    corners: tuple[Corner, ...] = ()
    flow_field: FloatArray | None = field(default=None, repr=False)

    @property
    def mesh(self) -> Mesh:
        """The mesh."""
        return self.warping.problem.mesh

    @property
    def area(self) -> AreaProperties:
        """Centroid [mm] and EI, shape (2, 2) [N mm²]."""
        return self.warping.problem.area

    @property
    def E(self) -> FloatArray:
        """Modulus of each part, shape (P,) [MPa]."""
        return self.warping.problem.moduli.E

    @cached_property
    def curves(self) -> EdgeCurves:
        """The edges as curves, arrays shaped as in EdgeCurves [mm]."""
        return EdgeCurves(self.mesh, self.edges)

    @cached_property
    def element_tau(self) -> FloatArray:
        """The field whose flow is measured, shape (M, n, 3, 2) [MPa per N, MPa per N mm]."""
        return element_stress(self.warping, self.stiffness) if self.flow_field is None else self.flow_field

    @cached_property
    def plain(self) -> UnitFields:
        """Nodal fields without the Poisson effect (nu = 0), arrays shaped as in UnitFields [MPa per N, MPa per N mm].

        They come from the same solution: its Poisson parts are left out.
        """
        functions = self.warping.functions.copy()
        functions[:, POISSON] = 0.0
        problem = replace(self.warping.problem, moduli=self.warping.problem.moduli.without_nu())
        return unit_fields(replace(self.warping, problem=problem, functions=functions), self.stiffness)


def shear_only(forces: SectionForces) -> SectionForces:
    """Return Vy and Vz alone [N]: what V S/(I t) speaks of. Torsion and normal stress have no part in it."""
    return SectionForces(Vy=forces.Vy, Vz=forces.Vz)
