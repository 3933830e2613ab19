"""A size field as gmsh's background field: a view of linear triangles, the only source of sizes."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

import numpy as np

from xsec_fem.meshing.sizing import SizeTriangles


@contextmanager
def background_sizes(gmsh: Any, field: SizeTriangles) -> Iterator[None]:
    """Make the field the background field of the current model while the block runs.

    Its points (n, 2) and sizes (n,) are in gmsh's axes.
    """
    view = gmsh.view.add("sizes")
    places, sizes = field.points[field.corners], field.sizes[field.corners]
    rows = np.hstack([places[:, :, 0], places[:, :, 1], np.zeros_like(sizes), sizes])
    gmsh.view.addListData(view, "ST", len(rows), rows.ravel())
    tag = gmsh.model.mesh.field.add("PostView")
    gmsh.model.mesh.field.setNumber(tag, "ViewTag", view)
    gmsh.model.mesh.field.setAsBackgroundMesh(tag)
    try:
        yield
    finally:
        gmsh.model.mesh.field.remove(tag)
        gmsh.view.remove(view)
