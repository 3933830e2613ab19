"""Wished element sizes at scattered points, and the rule that limits how fast they may grow."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError

FloatArray = npt.NDArray[np.float64]

_CHUNK = 2_000_000  # distances at a time: 16 MB


@dataclass(frozen=True)
class SizeField:
    """Element sizes (n,) wished at points (n, 2), both in the file's units [mm]; n >= 1, sizes > 0 and finite.

    Raises MeshingError when the arrays disagree or a size is not a positive number.
    """

    points: FloatArray
    sizes: FloatArray

    def __post_init__(self) -> None:
        if self.points.shape != (len(self.sizes), 2) or not len(self.sizes):
            raise MeshingError(f"{self.points.shape} points, but {self.sizes.shape} sizes: one (y, z) row per size")
        if not (np.isfinite(self.points).all() and np.isfinite(self.sizes).all() and self.sizes.min() > 0):
            raise MeshingError(f"element sizes must be positive numbers (smallest {self.sizes.min()!r})")

    def with_points(self, points: FloatArray, sizes: FloatArray) -> SizeField:
        """Return the field with more points (k, 2) and sizes (k,)."""
        return SizeField(np.vstack([self.points, points]), np.concatenate([self.sizes, sizes]))

    def graded(self, slope: float) -> SizeField:
        """Return the field with sizes lowered so that none grows faster than `slope` times the distance."""
        rows = max(1, _CHUNK // len(self.sizes))
        lowered = np.empty_like(self.sizes)
        for start in range(0, len(self.sizes), rows):
            part = slice(start, start + rows)
            dy = self.points[part, 0, None] - self.points[:, 0]
            dz = self.points[part, 1, None] - self.points[:, 1]
            lowered[part] = (self.sizes + slope * np.hypot(dy, dz)).min(axis=1)
        return SizeField(self.points, lowered)
