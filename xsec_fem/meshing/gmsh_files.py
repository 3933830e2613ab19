"""gmsh's own files: .geo as geometry to mesh, .msh written with physical names (and read when meshio cannot)."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.gmsh_session import gmsh_session, merge_script
from xsec_fem.meshing.occ_faces import Frame, Geometry
from xsec_fem.meshing.regions import FileMesh, Region, assign_regions, common_file, file_error
from xsec_fem.model.section import Section

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_TRIANGLES = {2: 3, 9: 6, 21: 10, 23: 15, 25: 21}  # gmsh's element types of orders 1 to 5 and their nodes
_TYPE_OF_ORDER = dict(enumerate(_TRIANGLES, start=1))
_FLAT = 1e-9  # a model thicker than this share of its size does not lie in the plane
_AFTER_MERGE = {  # what a script may have switched on and we cannot use
    "General.Terminal": 0,
    "Mesh.ElementOrder": 1,
    "Mesh.RecombineAll": 0,
    "Mesh.SubdivisionAlgorithm": 0,
    "Mesh.MeshSizeExtendFromBoundary": 1,
    "Mesh.MeshSizeFromPoints": 1,
}


def merge_geo(gmsh: Any, section: Section) -> Geometry:
    """Load the .geo file that all parts of the section share into the current model; its physical surfaces are parts.

    Raises InputError (regions do not fit), MeshingError (gmsh cannot read it, or it is not flat).
    """
    shared = common_file(section)
    _require_last_line(shared.path)
    merge_script(gmsh, str(shared.path))
    for key, value in _AFTER_MERGE.items():
        gmsh.option.setNumber(key, value)
    surfaces = [tag for _, tag in gmsh.model.getEntities(2)]
    if not surfaces:
        raise file_error(shared.path, "has no surface", "Draw plane surfaces and name them as physical surfaces")
    if gmsh.model.getEntities(3):
        raise file_error(shared.path, "has volumes", "Give the plane cross-section only")
    place = {tag: k for k, tag in enumerate(surfaces)}
    regions = [
        Region(int(number), gmsh.model.getPhysicalName(2, number) or None, np.array([place[t] for t in tags], np.int64))
        for number, tags in _physical_surfaces(gmsh)
    ]
    owner = assign_regions(section, regions, len(surfaces), "surface")
    _require_flat(gmsh, shared.path)
    faces = tuple((tag, int(owner[k])) for k, tag in enumerate(surfaces))
    names = tuple(part.name for part in section.parts)
    return Geometry(faces, Frame((0.0, 0.0), 1 / shared.scale), names)


def read_msh(path: Path) -> FileMesh:
    """Read a .msh file with gmsh: any version, with or without physical groups; nodes have the shape (N, 3).

    Raises MeshingError when it has no element of dimension 2 or gmsh cannot read it, InputError when these are not triangles
    of one order from 1 to 5.
    """
    with gmsh_session() as gmsh:
        gmsh.merge(str(path))
        types, _, node_tags = gmsh.model.mesh.getElements(2)
        if not len(types):
            raise MeshingError("no element of dimension 2")
        if len(types) > 1 or int(types[0]) not in _TRIANGLES:
            names = ", ".join(str(gmsh.model.mesh.getElementProperties(t)[0]) for t in types)
            raise file_error(path, "must hold triangles of one order from 1 to 5", "Mesh it with triangles only", names)
        tags, places, _ = gmsh.model.mesh.getNodes()
        number_of = np.full(int(max(tags)) + 1, -1, np.int64)
        number_of[np.asarray(tags, np.int64)] = np.arange(len(tags))
        triangles = number_of[np.asarray(node_tags[0], np.int64)].reshape(-1, _TRIANGLES[int(types[0])])
        nodes = np.asarray(places, float).reshape(-1, 3)
        starts = _surface_ranges(gmsh, int(types[0]))
        regions = tuple(
            Region(
                int(number),
                gmsh.model.getPhysicalName(2, number) or None,
                np.concatenate([np.arange(*starts[tag]) for tag in surfaces]),
            )
            for number, surfaces in _physical_surfaces(gmsh)
        )
    return FileMesh(nodes, triangles, regions)


def write_msh(path: Path, mesh: Mesh) -> None:
    """Write the mesh as .msh 4.1 (text, 16 digits) with its order and a physical surface per part. Raises MeshingError."""
    with gmsh_session() as gmsh:
        for part, name in enumerate(mesh.part_names, start=1):
            gmsh.model.addDiscreteEntity(2, part)
            gmsh.model.addPhysicalGroup(2, [part], part, name)
        places = np.column_stack([mesh.nodes, np.zeros(len(mesh.nodes))])
        gmsh.model.mesh.addNodes(2, 1, np.arange(1, len(places) + 1), places.ravel())
        for part in range(len(mesh.part_names)):
            own = np.flatnonzero(mesh.part_of == part)
            element = _TYPE_OF_ORDER[mesh.order]
            gmsh.model.mesh.addElementsByType(part + 1, element, own + 1, (mesh.triangles[own] + 1).ravel())
        gmsh.write(str(path))


def _physical_surfaces(gmsh: Any) -> list[tuple[int, list[int]]]:
    """Number and surface tags of every physical surface."""
    groups = [int(number) for _, number in gmsh.model.getPhysicalGroups(2)]
    return [(number, [int(t) for t in gmsh.model.getEntitiesForPhysicalGroup(2, number)]) for number in groups]


def _surface_ranges(gmsh: Any, element: int) -> dict[int, tuple[int, int]]:
    """For each surface the range of its triangles in the list of all."""
    starts, total = {}, 0
    for _, tag in gmsh.model.getEntities(2):
        count = len(gmsh.model.mesh.getElementsByType(element, tag)[0])
        starts[int(tag)] = (total, total + count)
        total += count
    return starts


def _require_last_line(path: Path) -> None:
    """gmsh leaves out the last line of a script, without a word, when no line break ends it."""
    try:
        text = path.read_bytes()
    except OSError as error:
        raise file_error(path, f"cannot be read: {error.strerror}", "Check the path") from error
    if not text.endswith((b"\n", b"\r")):
        value = text.splitlines()[-1].decode("utf-8", "replace").strip()[-40:] if text else "an empty file"
        raise file_error(path, "must end with a line break", "Add one, else its last line would not be read", value)


def _require_flat(gmsh: Any, path: Path) -> None:
    low, high = np.reshape(gmsh.model.getBoundingBox(-1, -1), (2, 3))
    if high[2] - low[2] > max(_FLAT * float(np.hypot(*(high - low)[:2])), 1e-6):
        rule = "must lie in a plane of constant third coordinate"
        raise file_error(path, rule, "y is its first coordinate, z its second", f"{low[2]:g} to {high[2]:g}")
