"""Fields on a mesh as a .vtu that general viewers open: plain triangles, every part with nodes of its own."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.reference_triangle import lattice
from xsec_fem.meshing.vtu_file import TRIANGLE, Grid, write_vtu

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


def write_fields(path: Path, mesh: Mesh, point_fields: Mapping[str, FloatArray]) -> None:
    """Write fields given at the nodes of each triangle, shape (M, n) or (M, n, 2 or 3), mean over a part's triangles.

    Each triangle of order p becomes p² plain ones. Nodes are shared inside a part and doubled between parts, so that a
    jump at an interface stays one. Cell data: "region" (index of the part) and "part NAME" (0 or 1). Raises
    MeshingError when a field's shape does not fit, OSError when the file cannot be written.
    """
    pairs = mesh.part_of[:, None] * len(mesh.nodes) + mesh.triangles
    used, point_of = np.unique(pairs, return_inverse=True)
    point_of = point_of.reshape(pairs.shape)
    cells = point_of[:, sub_triangles(mesh.order)].reshape(-1, 3)
    fields = {name: _means(name, values, point_of, len(used)) for name, values in point_fields.items()}
    part_of = np.repeat(mesh.part_of, mesh.order**2)
    points = mesh.nodes[used % len(mesh.nodes)]
    write_vtu(path, Grid(points, cells, TRIANGLE, fields, part_arrays(part_of, mesh.part_names)))


def part_arrays(part_of: IntArray, names: tuple[str, ...]) -> dict[str, IntArray]:
    """Return the cell arrays that keep the parts: "region" and one 0/1 array "part NAME" per part, shape (M,) each."""
    arrays = {f"part {name}": (part_of == number).astype(np.int64) for number, name in enumerate(names)}
    return {"region": np.asarray(part_of, np.int64), **arrays}


def sub_triangles(order: int) -> IntArray:
    """Return the p² plain triangles between the nodes of one triangle of order p, counter-clockwise, shape (p², 3)."""
    place = {(y, z): k for k, (y, z) in enumerate(lattice(order).tolist())}
    upward = [(place[y, z], place[y + 1, z], place[y, z + 1]) for y in range(order) for z in range(order - y)]
    downward = [
        (place[y + 1, z], place[y + 1, z + 1], place[y, z + 1]) for y in range(order) for z in range(order - y - 1)
    ]
    return np.array(upward + downward, np.int64)


def _means(name: str, values: FloatArray, point_of: IntArray, count: int) -> FloatArray:
    values = np.asarray(values, float)
    if values.shape[:2] != point_of.shape or values.ndim > 3:
        raise MeshingError(
            f"field {name!r} has shape {values.shape}, but the mesh has {point_of.shape[0]} triangles of "
            f"{point_of.shape[1]} nodes"
        )
    flat, where = values.reshape(values.shape[0] * values.shape[1], -1), point_of.ravel()
    sums = np.column_stack([np.bincount(where, column, minlength=count) for column in flat.T])
    means: FloatArray = sums / np.bincount(where, minlength=count)[:, None]
    return means if values.ndim == 3 else means[:, 0]
