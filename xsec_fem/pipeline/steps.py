"""From a section to its result, in numbered steps: the only place that knows the order.

    read_section -> 1 mesh -> 2 constants of the parts -> 3 area properties -> 4 matrix and factor -> 5 warping problems
    -> 6 constants of the section -> 7 bounds; back to 1 with finer sizes until they are narrow enough
    -> 8 nodal fields -> 9 contacts and joints -> 10 load cases -> 11 checks and cautions -> Result

Steps 2 to 7 are in `solution.py`, the way back in `adaptive.py`.
"""

from __future__ import annotations

import platform
from dataclasses import replace
from importlib.metadata import PackageNotFoundError, version

from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.front import make_mesh
from xsec_fem.model.connections import Connections
from xsec_fem.model.root_radius import with_root_radius
from xsec_fem.model.section import Section
from xsec_fem.pipeline.adaptive import Progress, mesh_step, solve_adaptively
from xsec_fem.pipeline.bodies import named_contacts
from xsec_fem.pipeline.cautions import Evidence, cautions
from xsec_fem.pipeline.checks import checks
from xsec_fem.pipeline.constants import certificate_over_reference, section_properties
from xsec_fem.pipeline.load_cases import Recovered, solve_case
from xsec_fem.pipeline.solution import Solution, solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.recovery.corner_intensity import corner_intensities
from xsec_fem.recovery.cuts import place_cuts
from xsec_fem.recovery.element_stress import equilibrated_stress
from xsec_fem.recovery.joints import joint_flows
from xsec_fem.recovery.largest import corner_rings
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import UnitFields, unit_fields
from xsec_fem.results import MeshStep, Result

LIBRARIES = ("xsec-fem", "numpy", "scipy", "gmsh")


def solve(section: Section, certificate: bool = True, progress: Progress | None = None) -> Result:
    """Mesh and solve a section, to the accuracy asked for in [solve], and recover the stresses of all its load cases.

    Without `certificate` the first mesh is solved as it is and no bounds are computed. `progress` is called with a
    MeshStep after every mesh. Returns a Result; its arrays have one row a node and part, shape (S, ...), in the section's
    units (N, mm, MPa).

    Raises
    ------
    InputError
        When the parts form several bodies or a probe lies outside.
    MeshingError, SolveError, MissingLibraryError
        When a step fails; the message says where.
    """
    result = _solve_once(section, certificate, progress)
    if section.solve.try_radius is None:
        return result
    sharp = [(corner.y, corner.z) for corner in result.corners if len(corner.parts) == 1]
    unkept = replace(
        section, solve=replace(section.solve, mesh_file=None)
    )  # the mesh kept is that of the section itself
    rounded = _solve_once(with_root_radius(unkept, section.solve.try_radius, sharp), certificate, progress)
    return replace(result, rounded=rounded)


def _solve_once(section: Section, certificate: bool, progress: Progress | None) -> Result:
    watch = Stopwatch()
    if certificate:
        solution, steps = solve_adaptively(section, watch, progress)
        return recover(section, solution, steps, watch)
    with watch.stage("mesh"):
        mesh = make_mesh(section)
    return recover(section, solve_mesh(section, mesh, watch, certificate=False), (), watch)


def solve_on_mesh(section: Section, mesh: Mesh, certificate: bool = True) -> Result:
    """Solve a section on a given mesh whose part names are the section's; raises as `solve` does (N, mm, MPa)."""
    watch = Stopwatch()
    solution = solve_mesh(section, mesh, watch, certificate)
    return recover(section, solution, (mesh_step(solution),) if solution.bounds else (), watch)


def recover(section: Section, solution: Solution, steps: tuple[MeshStep, ...], watch: Stopwatch) -> Result:
    """Steps 8 to 11: from a solved mesh to stresses, joints, cases and cautions (N, mm, MPa); InputError for a probe outside."""
    mesh, edges, warping, corners = solution.mesh, solution.edges, solution.warping, solution.corners
    with watch.stage("recover"):
        properties = section_properties(section, solution)
        fields = unit_fields(warping, solution.stiffness)  # 8
        contacts = named_contacts(section, mesh, edges)  # 9
        flows = joint_flows(Connections.of(section), warping, solution.stiffness, fields, edges, corners)
        rings, intensities = corner_rings(mesh, corners), corner_intensities(warping, solution.stiffness, corners)
        solved = solved_fields(solution, fields)
        cuts = place_cuts(solved, section.cuts, section.path.name if section.path else "")
        unit = Recovered(fields, properties, corners, rings, intensities, flows, solved, cuts)
        cases = tuple(solve_case(section, actions, unit) for actions in section.actions)  # 10
        evidence = Evidence(section, solution, properties, cases, fields)
    return Result(  # 11
        section, mesh, properties, cases, contacts, corners,
        checks=checks(solution, fields), warnings=cautions(evidence), fields=fields,
        certificate=certificate_over_reference(section, solution), mesh_steps=steps,
        versions=library_versions(), timings=dict(watch.seconds),
    )  # fmt: skip


def solved_fields(solution: Solution, fields: UnitFields) -> SolvedFields:
    """Return what cuts are read from: flows of the equilibrated field where there is one, exact to round-off on straight sides."""
    flow_field = None if solution.fluxes is None else equilibrated_stress(solution.fluxes, solution.stiffness)
    return SolvedFields(solution.warping, solution.stiffness, fields, solution.edges, solution.corners, flow_field)


def library_versions() -> dict[str, str]:
    """Return the versions of this package, of Python and of the numerical libraries."""
    found = {"python": platform.python_version()}
    for name in LIBRARIES:
        try:
            found[name] = version(name)
        except PackageNotFoundError:
            found[name] = "not installed"
    return found
