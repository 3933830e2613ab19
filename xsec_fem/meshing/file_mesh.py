"""The mesh of a section whose parts are regions of a mesh file."""

from __future__ import annotations

import numpy as np

from xsec_fem.fem.mesh import Mesh, order_of
from xsec_fem.meshing.high_order import change_order
from xsec_fem.meshing.mesh_files import read_mesh_file
from xsec_fem.meshing.regions import assign_regions, common_file
from xsec_fem.model.section import Section


def read_regions(section: Section, order: int | None = None, default_order: int = 4) -> Mesh:
    """Return the mesh of a section whose parts all are regions of one .msh or .vtu file, nodes (N, 2) [mm].

    The order is the one given, else that of the file when above 1, else `default_order`; nodes of another order are
    points of the file's own map, so its curved sides stay as they are. Unused nodes are dropped, clockwise triangles
    turned. Raises InputError (file, regions), MeshingError (flat or folded triangle), MissingLibraryError.
    """
    shared = common_file(section)
    found = read_mesh_file(shared.path)
    owner = assign_regions(section, found.regions, len(found.triangles), "triangle")
    own_order = order_of(found.triangles.shape[1])
    wanted = order or (own_order if own_order > 1 else default_order)
    nodes, triangles = change_order(found.nodes * shared.scale, np.asarray(found.triangles), wanted)
    source = f"{shared.path.name}, order {own_order}" + (f" taken to {wanted}" if wanted != own_order else "")
    return Mesh.build(nodes, triangles, owner, tuple(part.name for part in section.parts), source)
