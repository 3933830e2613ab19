"""One mesh solved: from arrays to warping functions, constants and bounds; no load case yet."""

from __future__ import annotations

from dataclasses import dataclass

from xsec_fem.errors import SolveError
from xsec_fem.fem.edges import Edges, mesh_edges
from xsec_fem.fem.equilibrated import EquilibratedFlux
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Section
from xsec_fem.pipeline.bodies import require_one_body
from xsec_fem.pipeline.materials import moduli_of
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.recovery.corners import Corner, find_corners
from xsec_fem.theory.area_properties import area_properties
from xsec_fem.theory.bounds import Bounds, bounds, equilibrated_stresses
from xsec_fem.theory.field_integrals import FieldIntegrals, field_integrals
from xsec_fem.theory.stiffness import ShearStiffness, shear_stiffness
from xsec_fem.theory.warping import Warping, WarpingProblem, factorise_warping, solve_warping


@dataclass(frozen=True)
class Solution:
    """The solved problems of one mesh.

    Attributes
    ----------
    mesh, edges : the mesh and its edges.
    warping : the five warping functions and what they solve.
    integrals, stiffness : constants from the fields.
    corners : singular corners.
    bounds, fluxes : guaranteed bounds and the equilibrated fields behind them; None when they were not asked for, or failed.
    no_bounds : why they failed, "" otherwise.
    """

    mesh: Mesh
    edges: Edges
    warping: Warping
    integrals: FieldIntegrals
    stiffness: ShearStiffness
    corners: tuple[Corner, ...]
    bounds: Bounds | None = None
    fluxes: EquilibratedFlux | None = None
    no_bounds: str = ""

    @property
    def energy_error(self) -> float:
        """The largest bound of the relative energy errors of unit Vy, Vz and T [-]; ValueError without bounds."""
        if self.bounds is None:
            raise ValueError(f"this solution has no bounds (got {self.bounds})")
        return max(self.bounds.certificate.energy_error.values())


def solve_mesh(section: Section, mesh: Mesh, watch: Stopwatch, certificate: bool = True) -> Solution:
    """Solve the warping problems on a mesh whose part names are the section's (N, mm, MPa).

    Raises InputError (several bodies), SolveError.
    """
    with watch.stage("assemble"):
        edges = mesh_edges(mesh)
        require_one_body(section, mesh, edges)
        moduli = moduli_of(section, mesh)
        area = area_properties(mesh, moduli)
        problem = WarpingProblem(mesh, moduli, area)
    with watch.stage("factorise"):
        factor = factorise_warping(problem)
    with watch.stage("solve"):
        warping = solve_warping(problem, factor)
    with watch.stage("recover"):
        integrals = field_integrals(warping)
        stiffness = shear_stiffness(area, integrals)
        corners = find_corners(mesh, edges, moduli.G, section.solve.corner_distance)
    if not certificate:
        return Solution(mesh, edges, warping, integrals, stiffness, corners)
    with watch.stage("certificate"):
        try:
            fluxes = equilibrated_stresses(problem, edges)
        except (
            SolveError
        ) as error:  # triangles of sizes too far apart for the second system, while the first was solved
            return Solution(mesh, edges, warping, integrals, stiffness, corners, no_bounds=str(error))
        proof = bounds(warping, integrals, fluxes)
    return Solution(mesh, edges, warping, integrals, stiffness, corners, proof, fluxes)
