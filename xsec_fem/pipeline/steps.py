"""From a section to its result, in numbered steps: the only place that knows the order.

read_section -> 1 mesh -> 2 constants of the parts -> 3 area properties -> 4 matrix and factor -> 5 warping problems
-> 6 constants of the section -> 7 nodal fields -> 8 corners and contacts -> 9 load cases -> 10 checks and cautions -> Result
"""

from __future__ import annotations

import platform
from importlib.metadata import PackageNotFoundError, version

from xsec_fem.fem.edges import mesh_edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.front import make_mesh
from xsec_fem.model.section import Section
from xsec_fem.pipeline.bodies import named_contacts, require_one_body
from xsec_fem.pipeline.cautions import Evidence, cautions
from xsec_fem.pipeline.checks import checks
from xsec_fem.pipeline.constants import moduli_of, section_properties
from xsec_fem.pipeline.load_cases import solve_case
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.recovery.corners import find_corners
from xsec_fem.recovery.joints import joint_flows
from xsec_fem.recovery.largest import corner_rings
from xsec_fem.recovery.stress_field import unit_fields
from xsec_fem.results import Result
from xsec_fem.theory.area_properties import area_properties
from xsec_fem.theory.field_integrals import field_integrals
from xsec_fem.theory.stiffness import shear_stiffness
from xsec_fem.theory.warping import WarpingProblem, factorise_warping, solve_warping

LIBRARIES = ("xsec-fem", "numpy", "scipy", "gmsh")


def solve(section: Section) -> Result:
    """Mesh and solve a section and recover the stresses of all its load cases.

    Returns a Result; its arrays have one row a node and part, shape (S, ...), in the section's units (N, mm, MPa).

    Raises
    ------
    InputError
        When the parts form several bodies or a probe lies outside.
    MeshingError, SolveError, MissingLibraryError
        When a step fails; the message says where.
    """
    watch = Stopwatch()
    with watch.stage("mesh"):  # 1
        mesh = make_mesh(section)
    return solve_on_mesh(section, mesh, watch)


def solve_on_mesh(section: Section, mesh: Mesh, watch: Stopwatch | None = None) -> Result:
    """Solve a section on a given mesh whose part names are the section's; raises as `solve` does (N, mm, MPa)."""
    watch = watch or Stopwatch()
    with watch.stage("assemble"):
        edges = mesh_edges(mesh)
        require_one_body(section, mesh, edges)
        moduli = moduli_of(section, mesh)  # 2
        area = area_properties(mesh, moduli)  # 3
        problem = WarpingProblem(mesh, moduli, area)
    with watch.stage("factorise"):  # 4
        factor = factorise_warping(problem)
    with watch.stage("solve"):  # 5
        warping = solve_warping(problem, factor)
    with watch.stage("recover"):
        integrals = field_integrals(warping)  # 6
        stiffness = shear_stiffness(area, integrals)
        properties = section_properties(section, mesh, moduli, area, stiffness)
        fields = unit_fields(warping, stiffness)  # 7
        corners = find_corners(mesh, edges, moduli.G)  # 8
        contacts = named_contacts(section, mesh, edges)
        flows = [joint_flows(warping, stiffness, fields, edges, joint) for joint in section.joints]
        rings = corner_rings(mesh, corners)
        cases = tuple(
            solve_case(section, actions, fields, properties, corners, rings, flows) for actions in section.actions
        )
    return Result(  # 10
        section, mesh, properties, cases, contacts, corners,
        checks=checks(warping, integrals, fields, edges, corners),
        warnings=cautions(Evidence(section, mesh, moduli, properties, corners, cases, fields, integrals)),
        fields=fields, versions=library_versions(), timings=dict(watch.seconds),
    )  # fmt: skip


def library_versions() -> dict[str, str]:
    """Return the versions of this package, of Python and of the numerical libraries."""
    found = {"python": platform.python_version()}
    for name in LIBRARIES:
        try:
            found[name] = version(name)
        except PackageNotFoundError:
            found[name] = "not installed"
    return found
