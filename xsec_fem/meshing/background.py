"""A size field as gmsh's background field: a view on a triangulation of the points."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

import numpy as np

from xsec_fem.meshing.occ_faces import Frame
from xsec_fem.meshing.sizing import SizeField


@contextmanager
def apply_sizes(gmsh: Any, field: SizeField, frame: Frame) -> Iterator[None]:
    """Make the field the only source of sizes of the current model while the block runs."""
    points = frame.to_gmsh(field.points)
    view = gmsh.view.add("sizes")
    rows = np.column_stack([points, np.zeros(len(points)), field.sizes * frame.factor])
    gmsh.view.addListData(view, "SP", len(rows), rows.ravel())
    tag = gmsh.model.mesh.field.add("PostView")
    gmsh.model.mesh.field.setNumber(tag, "ViewTag", view)
    gmsh.model.mesh.field.setAsBackgroundMesh(tag)
    try:
        yield
    finally:
        gmsh.model.mesh.field.remove(tag)
        gmsh.view.remove(view)
