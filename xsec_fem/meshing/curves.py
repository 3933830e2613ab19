"""The curves of a conforming geometry: where they run, what lies beside them, and the sharp corners between them."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.strip_edges import on_strip
from xsec_fem.meshing.occ_faces import Geometry
from xsec_fem.model.section import Joint

FloatArray = npt.NDArray[np.float64]

_SAMPLES = np.array([0.0, 0.02, 0.25, 0.5, 0.75, 0.98, 1.0])
_LARGEST = 128.0  # diameter of the section in gmsh's axes, at most
_SHARP = math.radians(185.0)  # arcs that meet within 5 degrees of a straight line are no corner


@dataclass(frozen=True)
class Curve:
    """One curve of the geometry in gmsh's axes.

    `vertices` are the tags of its two ends, `points` (7, 2) lie on it (ends, 2 % beside the ends, quarters), `tangents`
    (2, 2) point along it at the two ends; `left` and `right` are the parts beside it, None where there is nothing.
    """

    vertices: tuple[int, int]
    points: FloatArray
    tangents: FloatArray
    left: int | None
    right: int | None

    @property
    def length(self) -> float:
        """Length of the chords through the points, in gmsh's axes [mm times the frame's factor].

        Short of the curve by less than 1 % for a quarter of a circle.
        """
        return float(np.hypot(*np.diff(self.points, axis=0).T).sum())


def read_curves(gmsh: Any, geometry: Geometry) -> list[Curve]:
    """Return every curve of the current model that bounds a face, arrays shaped as in Curve, in gmsh's axes."""
    tags = sorted({abs(curve) for face, _ in geometry.faces for _, curve in _boundary(gmsh, face)})
    samples = {tag: _samples(gmsh, tag) for tag in tags}
    beside: dict[int, list[int | None]] = {tag: [None, None] for tag in tags}
    for face, part in geometry.faces:
        signed = [curve for _, curve in _boundary(gmsh, face)]
        twice_area = sum(math.copysign(1, curve) * _swept(samples[abs(curve)][0]) for curve in signed)
        for curve in signed:
            beside[abs(curve)][0 if curve * twice_area > 0 else 1] = part
    return [
        Curve(_ends(gmsh, tag, samples[tag][0]), *samples[tag], left=beside[tag][0], right=beside[tag][1])
        for tag in tags
    ]


def sharp_corners(curves: Sequence[Curve], is_slit: Sequence[bool] | npt.NDArray[np.bool_]) -> FloatArray:
    """Return the points, shape (k, 2), in gmsh's axes, where solid turns through more than 185 deg.

    A curve marked in `is_slit` parts the solid on its two sides, so that the end of a slit is a corner of 360 degrees.
    """
    rays: dict[int, list[_Ray]] = {}
    places: dict[int, FloatArray] = {}
    for curve, slit in zip(curves, is_slit, strict=True):
        for end in (0, 1):
            rays.setdefault(curve.vertices[end], []).append(_ray(curve, end, slit))
            places[curve.vertices[end]] = curve.points[-end]
    corners = [places[vertex] for vertex in sorted(rays) if _widest(rays[vertex]) > _SHARP]
    return np.array(corners).reshape(-1, 2)


def slit_curves(curves: Sequence[Curve], joints: Sequence[Joint], geometry: Geometry) -> npt.NDArray[np.bool_]:
    """Return True, shape (C,), for each curve that a joint makes a slit between its two parts; bonded strips of it are none."""
    result = np.zeros(len(curves), bool)
    names = [_parts_beside(curve, geometry.part_names) for curve in curves]
    middles = geometry.frame.from_gmsh(np.array([curve.points[len(_SAMPLES) // 2] for curve in curves]))
    for joint in joints:
        if joint.is_slit:
            faying = {frozenset((a, b)) for a in joint.first for b in joint.second}
            parted = np.array([pair in faying for pair in names])
            for bond in joint.bonds:
                if bond.strip is not None:
                    parted &= ~on_strip(middles, bond.strip, _LARGEST / geometry.frame.factor)
            result |= parted
    return result


def _parts_beside(curve: Curve, part_names: Sequence[str]) -> frozenset[str]:
    return frozenset(part_names[part] for part in (curve.left, curve.right) if part is not None)


@dataclass(frozen=True)
class _Ray:
    """A curve leaving a vertex: angle of its tangent, angle towards a point near by, solid on its left, slit."""

    tangent: float
    nearby: float
    solid_left: bool
    slit: bool


def _ray(curve: Curve, end: int, slit: bool) -> _Ray:
    sign = 1 - 2 * end
    ty, tz = (sign * curve.tangents[end]).tolist()
    ny, nz = (curve.points[-2 if end else 1] - curve.points[-end]).tolist()
    solid = (curve.right if end else curve.left) is not None
    return _Ray(math.atan2(tz, ty), math.atan2(nz, ny), solid, slit)


def _widest(rays: list[_Ray]) -> float:
    """Largest angle of solid between two free or slit faces at a vertex [rad]; 0 inside the solid."""
    rays = sorted(rays, key=lambda ray: ray.nearby)
    breaks = [k for k, ray in enumerate(rays) if ray.slit or not (ray.solid_left and rays[k - 1].solid_left)]
    if not breaks:
        return 0.0
    widest = total = 0.0
    count = len(rays)
    for k in range(breaks[0], breaks[0] + count):
        ray, following = rays[k % count], rays[(k + 1) % count]
        if k % count in breaks:
            total = 0.0
        if ray.solid_left:
            total += _sector(ray, following, count == 1)
            widest = max(widest, total)
    return widest


def _sector(ray: _Ray, following: _Ray, alone: bool) -> float:
    """Angle from one ray on to the next, counter-clockwise, by the tangents; the points near by settle 0 or 360."""
    if alone:
        return 2 * math.pi
    rough = (following.nearby - ray.nearby) % (2 * math.pi)
    return rough + math.remainder(following.tangent - ray.tangent - rough, 2 * math.pi)


def _boundary(gmsh: Any, face: int) -> list[tuple[int, int]]:
    return list(gmsh.model.getBoundary([(2, face)], combined=False, oriented=True))


def _samples(gmsh: Any, tag: int) -> tuple[FloatArray, FloatArray]:
    (low,), (high,) = gmsh.model.getParametrizationBounds(1, tag)
    points = np.asarray(gmsh.model.getValue(1, tag, low + (high - low) * _SAMPLES)).reshape(-1, 3)[:, :2]
    tangents = np.asarray(gmsh.model.getDerivative(1, tag, [low, high])).reshape(-1, 3)[:, :2]
    return points, tangents


def _ends(gmsh: Any, tag: int, points: FloatArray) -> tuple[int, int]:
    """Tags of the vertices at the start and the end of a curve."""
    vertices = [int(v) for v in gmsh.model.getAdjacencies(1, tag)[1]]
    first = np.asarray(gmsh.model.getValue(0, vertices[0], []))[:2]
    at_start = np.hypot(*(first - points[0])) <= np.hypot(*(first - points[-1]))
    return (vertices[0], vertices[-1]) if at_start else (vertices[-1], vertices[0])


def _swept(points: FloatArray) -> float:
    """Twice the signed area swept about the origin along the points (n, 2)."""
    (y, z), (y1, z1) = points[:-1].T, points[1:].T
    return float((y * z1 - z * y1).sum())
