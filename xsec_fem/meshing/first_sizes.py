"""Element sizes of the first mesh, from the outlines: walls, arcs, short sides and sharp corners."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.meshing.curves import Curve, read_curves, sharp_corners, slit_curves
from xsec_fem.meshing.occ_faces import Geometry
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.meshing.wall_thickness import WallSamples, wall_samples
from xsec_fem.model.section import Part, Section

FloatArray = npt.NDArray[np.float64]

GROWTH = 0.8  # sizes grow by no more than this times the distance

_ACROSS = 10.0  # elements over the diameter of a solid section
_SAMPLES = 40.0  # boundary samples over the diameter
_DEPTHS = 2.0 ** np.arange(1, 12)  # depths of points inside, as multiples of the size on the outline
_LAYER = 100.0  # walls thinner than the diameter over this are layers, whose triangles may be long
_LONG = 10.0  # as long as this times their thickness
_PER_QUARTER = {1: 16, 2: 8, 3: 6, 4: 4, 5: 4}  # elements per quarter circle
_CORNER = 32.0  # element at a sharp corner: the adjoining wall over this
_RINGS = 2.0 ** np.arange(6)  # rings of size points about a corner, as multiples of the corner's size
_ROSE = np.linspace(0, 2 * np.pi, 8, endpoint=False)


def first_sizes(gmsh: Any, section: Section, geometry: Geometry, order: int) -> SizeField:
    """Return sizes for the first mesh of the drawn section in the current gmsh model, arrays of shape (n, 2) and (n,) [mm].

    Across every wall lies at least one element of order 3 and higher, at least two of a lower order.
    """
    bounds = np.array([part.face.bounds() for part in section.parts if part.face is not None])
    diameter = float(np.hypot(*(bounds[:, 2:].max(axis=0) - bounds[:, :2].min(axis=0))))
    walls = _joined([wall_samples(*_outlines(section, part), diameter / _SAMPLES) for part in section.parts])
    sizes = np.minimum(_wall_size(walls.thickness, diameter, order), walls.radius * (np.pi / 2) / _PER_QUARTER[order])
    field = SizeField(walls.points, sizes).with_points(*_depths(walls, sizes, diameter))
    curves = read_curves(gmsh, geometry)
    field = field.with_points(*_short_curves(curves, geometry, diameter))
    is_slit = slit_curves(curves, section.joints, geometry)
    corners = geometry.frame.from_gmsh(sharp_corners(curves, is_slit))
    return field.with_points(*_corner_rings(corners, walls, diameter)) if len(corners) else field


def _outlines(section: Section, part: Part) -> tuple[Any, list[Any]]:
    """Outer loop and holes of a part; a part embedded in it bounds it like a hole."""
    if part.face is None:
        raise ValueError(f"part {part.name!r} has no outline")
    inner = [p.face.outer for p in section.parts if p.embedded_in == part.name and p.face is not None]
    return part.face.outer, [*part.face.holes, *inner]


def _joined(walls: Sequence[WallSamples]) -> WallSamples:
    return WallSamples(
        np.vstack([wall.points for wall in walls]), np.vstack([wall.normals for wall in walls]),
        np.concatenate([wall.thickness for wall in walls]), np.concatenate([wall.radius for wall in walls]),
    )  # fmt: skip


def _depths(walls: WallSamples, sizes: FloatArray, diameter: float) -> tuple[FloatArray, FloatArray]:
    """Points inside with the largest size, at growing depths up to half the wall, so that sizes can grow away from it."""
    depths = sizes[:, None] * _DEPTHS
    sample, step = np.nonzero(depths <= np.minimum(walls.thickness, diameter)[:, None] / 2)
    points = walls.points[sample] + depths[sample, step, None] * walls.normals[sample]
    return points, np.full(len(points), diameter / _ACROSS)


def _wall_size(thickness: FloatArray, diameter: float, order: int) -> FloatArray:
    """Size allowed in a wall of that thickness: the wall itself, half of it for low orders, longer in thin layers."""
    across = 1.0 if order >= 3 else 0.5
    size = np.minimum(across * thickness, diameter / _ACROSS)
    if order < 3:
        return size
    return np.maximum(size, np.minimum(_LONG * thickness, diameter / _LAYER))


def _short_curves(curves: Sequence[Curve], geometry: Geometry, diameter: float) -> tuple[FloatArray, FloatArray]:
    """Points and sizes along the curves: no element next to a short side is much longer than it."""
    points = np.vstack([geometry.frame.from_gmsh(curve.points[[0, 3, -1]]) for curve in curves])
    length = np.repeat([curve.length / geometry.frame.factor for curve in curves], 3)
    return points, _wall_size(length, diameter, 3)


def _corner_rings(corners: FloatArray, walls: WallSamples, diameter: float) -> tuple[FloatArray, FloatArray]:
    """Points and sizes about sharp corners (k, 2): a share of the thinnest wall near by, growing with the distance."""
    distance = np.hypot(corners[:, 0, None] - walls.points[:, 0], corners[:, 1, None] - walls.points[:, 1])
    nearest = np.argpartition(distance, min(3, len(walls.points) - 1), axis=1)[:, :4]
    size = np.minimum(walls.thickness, diameter)[nearest].min(axis=1) / _CORNER
    radii = size[:, None] * _RINGS
    rose = np.column_stack([np.cos(_ROSE), np.sin(_ROSE)])
    rings = corners[:, None, None] + radii[:, :, None, None] * rose
    ring_sizes = np.broadcast_to((size[:, None] + GROWTH * radii)[:, :, None], rings.shape[:3])
    return np.vstack([corners, rings.reshape(-1, 2)]), np.concatenate([size, ring_sizes.ravel()])
