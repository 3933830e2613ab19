"""A drawn section to a mesh: faces, sizes, linear triangles by gmsh, then order p on the exact curves.

Geometry and sizes are apart: `mesh_section` takes any `SizeField`, so that a later loop can ask for a mesh with sizes
of its own.
"""

from __future__ import annotations

from collections.abc import Sequence
from contextlib import nullcontext
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.background import background_sizes
from xsec_fem.meshing.curve_nodes import curved_edges
from xsec_fem.meshing.first_sizes import GROWTH, first_sizes
from xsec_fem.meshing.gmsh_files import merge_geo
from xsec_fem.meshing.gmsh_session import gmsh_session
from xsec_fem.meshing.high_order import CurvedEdges, elevate, folded
from xsec_fem.meshing.occ_faces import Geometry, build_geometry
from xsec_fem.meshing.sizing import SizeField, SizeTriangles, spread_sizes
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_RETRIES = 2


def mesh_section(
    section: Section, order: int = 4, sizes: SizeField | None = None, split_points: Sequence[Point] = ()
) -> Mesh:
    """Return the mesh, of order 1 to 5, nodes (N, 2) [mm], of a section whose parts are all drawn or all surfaces of one .geo file.

    `sizes` are wished element sizes in the section's units [mm]; when None, the first sizes from the outlines, or those that
    the .geo file sets. `split_points` become nodes of a drawn section. Raises MeshingError (overlap, gmsh failure,
    folded triangle), InputError (embedded part outside its host, regions that do not fit).
    """
    with gmsh_session() as gmsh:
        if section.parts[0].face is None:
            geometry, field = merge_geo(gmsh, section), sizes
        else:
            geometry = build_geometry(gmsh, section, split_points)
            field = sizes or first_sizes(gmsh, section, geometry, order)
        for attempt in range(_RETRIES + 1):
            nodes, triangles, part_of = _generate(gmsh, geometry, field, order)
            bad = np.flatnonzero(folded(nodes, triangles))
            if not len(bad) or attempt == _RETRIES:
                break
            field = _finer(nodes, triangles, bad, field)
    origin = "drawn parts" if all(part.face is not None for part in section.parts) else "a geometry script"
    return Mesh.build(nodes, triangles, part_of, geometry.part_names, source=f"{origin}, order {order}, gmsh")


def _generate(
    gmsh: Any, geometry: Geometry, field: SizeField | None, order: int
) -> tuple[FloatArray, IntArray, IntArray]:
    """Nodes (N, 2) in the file's axes, counter-clockwise triangles (M, n) of order p and their parts (M,)."""
    gmsh.model.mesh.clear()
    with background_sizes(gmsh, _spread(gmsh, geometry, field)) if field else nullcontext():
        gmsh.model.mesh.generate(2)
    tags, places, _ = gmsh.model.mesh.getNodes()
    number_of = np.full(int(max(tags)) + 1, -1, np.int64)
    corners, part_of = face_triangles(gmsh, geometry)
    _require_whole(gmsh, corners)
    points = np.zeros((len(number_of), 2))
    points[np.asarray(tags, np.int64)] = np.asarray(places).reshape(-1, 3)[:, :2]
    used = np.unique(corners)
    number_of[used] = np.arange(len(used))
    edges = curved_edges(gmsh, number_of, order)
    edges = CurvedEdges(edges.ends, geometry.frame.from_gmsh(edges.nodes))
    nodes = geometry.frame.from_gmsh(points[used])
    raised, triangles = elevate(nodes, _counter_clockwise(nodes, number_of[corners]), order, edges)
    return raised, triangles, part_of


def _spread(gmsh: Any, geometry: Geometry, field: SizeField) -> SizeTriangles:
    """The field in gmsh's axes over the whole model."""
    low_y, low_z, _, high_y, high_z, _ = gmsh.model.getBoundingBox(-1, -1)
    scaled = SizeField(geometry.frame.to_gmsh(field.points), field.sizes * geometry.frame.factor)
    return spread_sizes(scaled, np.array([low_y, low_z]), np.array([high_y, high_z]), GROWTH)


def face_triangles(gmsh: Any, geometry: Geometry) -> tuple[IntArray, IntArray]:
    """Return gmsh's node tags of all triangles, shape (M, 3), and the part each belongs to, shape (M,).

    Raises MeshingError when a face has no triangle.
    """
    corners, part_of = [], []
    for face, part in geometry.faces:
        tags = gmsh.model.mesh.getElementsByType(2, face)[1]
        corners.append(np.asarray(tags, np.int64).reshape(-1, 3))
        part_of.append(np.full(len(corners[-1]), part))
        if not len(corners[-1]):
            raise MeshingError(
                f"gmsh made no triangle in part {geometry.part_names[part]!r}: its outline may cross itself"
            )
    return np.vstack(corners), np.concatenate(part_of)


def _require_whole(gmsh: Any, corners: IntArray) -> None:
    """Every side of a triangle that has no neighbour must lie on a curve: gmsh has been seen to leave holes silently."""
    sides = np.sort(corners[:, [[0, 1], [1, 2], [2, 0]]].reshape(-1, 2), axis=1)
    lines = np.sort(np.asarray(gmsh.model.mesh.getElementsByType(1)[1], np.int64).reshape(-1, 2), axis=1)
    size = int(corners.max()) + 1
    codes, used = np.unique(sides @ [size, 1], return_counts=True)
    loose = np.setdiff1d(codes[used == 1], lines @ [size, 1])
    if len(loose) or used.max() > 2:
        raise MeshingError(
            f"gmsh left {len(loose)} sides of triangles without a neighbour inside a part, and {(used > 2).sum()} with "
            "more than one: an outline may cross itself or another one"
        )


def _counter_clockwise(nodes: FloatArray, corners: IntArray) -> IntArray:
    """Turn clockwise triangles round."""
    a, b, c = (nodes[corners[:, k]] for k in range(3))
    clockwise = (b[:, 0] - a[:, 0]) * (c[:, 1] - a[:, 1]) < (b[:, 1] - a[:, 1]) * (c[:, 0] - a[:, 0])
    return np.where(clockwise[:, None], corners[:, [0, 2, 1]], corners)


def _finer(nodes: FloatArray, triangles: IntArray, bad: IntArray, field: SizeField | None) -> SizeField:
    """Half the size where triangles folded; where no field was given, the sizes of the triangles there are."""
    corners = nodes[triangles[:, :3]]
    size = np.linalg.norm(corners - np.roll(corners, 1, axis=1), axis=2).max(axis=1)
    if field is None:
        field = SizeField(corners.mean(axis=1), size)
    return field.with_points(corners[bad].reshape(-1, 2), np.repeat(size[bad] / 2, 3))
