"""Element sizes of the first mesh, from the outlines."""

from __future__ import annotations

from typing import Any

import numpy as np

from xsec_fem.meshing.occ_faces import Geometry
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.section import Section


def first_sizes(gmsh: Any, section: Section, geometry: Geometry, order: int) -> SizeField:
    """Return one size everywhere, a fortieth of the section's diameter."""
    faces = [part.face for part in section.parts if part.face is not None]
    points = np.vstack([loop.polyline(10.0) for face in faces for loop in face.loops])
    diameter = float(np.hypot(*(points.max(axis=0) - points.min(axis=0))))
    return SizeField(points, np.full(len(points), diameter / 40))
