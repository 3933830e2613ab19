"""Evidence: the section solved on a series of meshes, each with the bounds that hold on it.

A drawn section is meshed with the sizes of the solved mesh times 4, 2.8, 2, 1.4 and 1; a mesh from a file keeps its triangles
and takes the degrees 1 to 5. The error falls like N^(-p/2) where the field is smooth (N nodes, degree p), so that the
observed order -2 d log(error)/d log(N) tends to p: B. Szabo, I. Babuska, Finite Element Analysis, 1991, ch. 4.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from xsec_fem.errors import SolveError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.front import make_mesh, refinable
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.section import Section
from xsec_fem.pipeline.adaptive import longest_sides
from xsec_fem.pipeline.constants import certificate_over_reference, section_properties
from xsec_fem.pipeline.solution import solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.results import ConvergenceRow, Result

_FACTORS = (4.0, 2.0**1.5, 2.0, 2.0**0.5, 1.0)
_DEGREES = (1, 2, 3, 4, 5)


def convergence(result: Result) -> tuple[ConvergenceRow, ...]:
    """Return one row a mesh, coarse to fine, each with its bounds (mm⁴, mm²); errors as in `solve`."""
    section = replace(result.section, solve=replace(result.section.solve, mesh_file=None))
    rows: list[ConvergenceRow] = []
    for mesh in _series(section, result.mesh):
        solution = solve_mesh(section, mesh, Stopwatch())
        certificate = certificate_over_reference(section, solution)
        if certificate is None:
            raise SolveError(
                f"no convergence table: no bounds on a mesh of {len(mesh.nodes)} nodes: {solution.no_bounds}"
            )
        properties = section_properties(section, solution)
        error = max(certificate.energy_error.values())
        order = None
        if rows and len(mesh.nodes) > rows[-1].nodes:
            order = float(-2 * np.log(error / rows[-1].energy_error) / np.log(len(mesh.nodes) / rows[-1].nodes))
        rows.append(
            ConvergenceRow(
                mesh.order,
                len(mesh.nodes),
                len(mesh.triangles),
                error,
                order,
                properties.IT,
                certificate.IT,
                properties.Asz,
                certificate.Asz,
            )
        )
    return tuple(rows)


def _series(section: Section, mesh: Mesh) -> Iterator[Mesh]:
    if not refinable(section):
        for degree in _DEGREES:
            yield make_mesh(replace(section, solve=replace(section.solve, order=degree)))
        return
    centres = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)
    for factor in _FACTORS:
        yield make_mesh(section, sizes=SizeField(centres, factor * longest_sides(mesh)))
