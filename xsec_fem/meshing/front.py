"""From a section to its mesh, whether its parts are drawn or come from a file: the one door of this layer."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.errors import Fault, InputError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.file_mesh import read_regions
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.mesh_files import write_mesh_file
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.meshing.slit_joints import joint_vertices, open_joints
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section

DEFAULT_ORDER = 4


def refinable(section: Section) -> bool:
    """Return True when the section is drawn, so that a finer mesh of it can be made."""
    return all(part.face is not None for part in section.parts)


def make_mesh(section: Section, split_points: Sequence[Point] = (), sizes: SizeField | None = None) -> Mesh:
    """Return the mesh of the section, nodes (N, 2) [mm], and write it to `section.solve.mesh_file` when that is set.

    The order is the one in [solve], else that of the mesh file when above 1, else 4. `split_points` become nodes of a
    drawn section; `sizes` are wished element sizes [mm], those of a first mesh when None. Faying faces of joints that are
    slits have come apart. Raises InputError, MeshingError, MissingLibraryError.
    """
    mesh = open_joints(section, _mesh_of(section, [*split_points, *joint_vertices(section)], sizes))
    if section.solve.mesh_file is not None:
        write_mesh_file(section.solve.mesh_file, mesh)
    return mesh


def _mesh_of(section: Section, split_points: Sequence[Point], sizes: SizeField | None) -> Mesh:
    if not section.parts:
        raise InputError([Fault(str(section.path or ""), "parts", "must hold at least one part", "none")])
    from_file = [part for part in section.parts if part.mesh_region is not None]
    if from_file and len(from_file) < len(section.parts):
        drawn = next(part for part in section.parts if part.mesh_region is None)
        rule = (
            f'must be all drawn or all from one file: "{from_file[0].name}" comes from a file, "{drawn.name}" is drawn'
        )
        remedy = "Draw the other parts in the same file, or draw them all here"
        raise InputError([Fault(str(section.path or ""), "parts", rule, None, remedy)])
    if from_file and not any(part.mesh_region.path.suffix.lower() == ".geo" for part in from_file if part.mesh_region):
        return read_regions(section, section.solve.order, DEFAULT_ORDER)
    return mesh_section(section, section.solve.order or DEFAULT_ORDER, sizes, split_points)
