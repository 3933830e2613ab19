"""From a section to its mesh, whether its parts are drawn or come from a file: the one door of this layer."""

from __future__ import annotations

from xsec_fem.errors import MeshingError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.model.section import Section

DEFAULT_ORDER = 4


def make_mesh(section: Section) -> Mesh:
    """Return the first mesh of the section, of the order asked for in [solve] (4 when none is).

    Raises InputError, MeshingError, MissingLibraryError.
    """
    if any(part.face is None for part in section.parts):
        raise MeshingError("parts from mesh files cannot be read yet: draw them")
    return mesh_section(section, section.solve.order or DEFAULT_ORDER)
