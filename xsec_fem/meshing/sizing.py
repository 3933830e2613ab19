"""Wished element sizes at scattered points, and their spread over the plane with a limited growth."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_MARGIN = 0.5  # the box of the triangulation is larger than the section by this share on each side


@dataclass(frozen=True)
class SizeField:
    """Element sizes (n,) wished at points (n, 2), both in the file's units [mm]; n >= 1, sizes > 0 and finite.

    Raises MeshingError when the arrays disagree or a size is not a positive number.
    """

    points: FloatArray
    sizes: FloatArray

    def __post_init__(self) -> None:
        if self.points.shape != (len(self.sizes), 2) or not len(self.sizes):
            raise MeshingError(
                f"points of shape {self.points.shape}, but sizes of shape {self.sizes.shape}: give one (y, z) row per "
                "size, and at least one"
            )
        if not (np.isfinite(self.points).all() and np.isfinite(self.sizes).all() and self.sizes.min() > 0):
            raise MeshingError(
                f"element sizes must be positive numbers at finite points (smallest size {float(self.sizes.min())})"
            )

    def with_points(self, points: FloatArray, sizes: FloatArray) -> SizeField:
        """Return the field with more points (k, 2) and sizes, shape (k,) [mm]; raises MeshingError like the constructor."""
        return SizeField(np.vstack([self.points, points]), np.concatenate([self.sizes, sizes]))


@dataclass(frozen=True)
class SizeTriangles:
    """A size field on triangles: points (n, 2), sizes (n,), corners (t, 3); linear in between, covering the section."""

    points: FloatArray
    sizes: FloatArray
    corners: IntArray


def spread_sizes(field: SizeField, low: FloatArray, high: FloatArray, growth: float) -> SizeTriangles:
    """Return the field on triangles that cover the box from `low` (2,) to `high` (2,), growing no faster than `growth`.

    Sizes are lowered where a neighbour along the edges of the triangulation asks for less: h_i <= h_j + growth |ij|.
    """
    from scipy.spatial import Delaunay

    margin = _MARGIN * float(np.hypot(*(high - low)))
    (y0, z0), (y1, z1) = low - margin, high + margin
    box = np.array([[y0, z0], [y1, z0], [y1, z1], [y0, z1]])
    points, sizes = _merged(np.vstack([field.points, box]), np.append(field.sizes, np.full(4, field.sizes.max())))
    corners = np.asarray(Delaunay(points).simplices, np.int64)
    first, second = corners.ravel(), np.roll(corners, -1, axis=1).ravel()
    step = growth * np.hypot(*(points[first] - points[second]).T)
    while True:
        lowered = sizes.copy()
        np.minimum.at(lowered, first, sizes[second] + step)
        np.minimum.at(lowered, second, sizes[first] + step)
        if np.array_equal(lowered, sizes):
            return SizeTriangles(points, sizes, corners)
        sizes = lowered


def _merged(points: FloatArray, sizes: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Points that coincide become one, with the smallest of their sizes."""
    distinct, group = np.unique(points, axis=0, return_inverse=True)
    smallest = np.full(len(distinct), np.inf)
    np.minimum.at(smallest, group.ravel(), sizes)
    return distinct, smallest
