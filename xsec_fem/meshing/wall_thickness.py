"""Local wall thickness of a part along its outline, by rays along the inward normal."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.model.outline import Arc, EllipseArc, Loop, Segment

FloatArray = npt.NDArray[np.float64]

_ARC_STEP = 7.5  # degrees per chord
_PER_SIDE = 3  # least number of samples on a straight side
_BLOCK = 1_000_000  # ray and chord pairs at a time: a few arrays of 8 MB


@dataclass(frozen=True)
class WallSamples:
    """Points (n, 2) on an outline and their inward normals (n, 2); thickness of the wall (n,), inf where no face lies
    opposite; radius of the outline (n,), inf where straight."""

    points: FloatArray
    normals: FloatArray
    thickness: FloatArray
    radius: FloatArray


@dataclass(frozen=True)
class _Chords:
    """Straight pieces of an outline: start and end (n, 2), solid on the left; radius (n,) of the arc they stand for."""

    start: FloatArray
    end: FloatArray
    radius: FloatArray


def wall_samples(outer: Loop, holes: Sequence[Loop], spacing: float) -> WallSamples:
    """Return samples along all loops of one part, no farther apart than `spacing` [mm], at least three per straight side.

    Arrays have the shape (n, 2) or (n,), as in WallSamples [mm].

    The thickness is the distance along the inward normal to the chord met first, over the squared cosine between the
    normals of the two: a pointed corner is not a thin wall.
    """
    chords = _chords([(outer, 1.0), *((hole, -1.0) for hole in holes)])
    along = chords.end - chords.start
    length = np.hypot(*along.T)
    straight = np.isinf(chords.radius)
    count = np.where(straight, np.maximum(_PER_SIDE, np.ceil(length / spacing)), 1).astype(np.int64)
    chord = np.repeat(np.arange(len(count)), count)
    rank = np.arange(len(chord)) - np.repeat(np.cumsum(count) - count, count)
    points = chords.start[chord] + along[chord] * ((rank + 0.5) / count[chord])[:, None]
    normal = np.column_stack([-along[:, 1], along[:, 0]]) / length[:, None]
    thickness = _ray_lengths(points, normal[chord], chord, chords, normal)
    return WallSamples(points, normal[chord], thickness, chords.radius[chord])


def _ray_lengths(
    points: FloatArray, directions: FloatArray, own: npt.NDArray[np.int64], chords: _Chords, normal: FloatArray
) -> FloatArray:
    """Distance (n,) from each point along its direction to the nearest facing chord but its own, as said above."""
    result = np.full(len(points), np.inf)
    along = chords.end - chords.start
    rows = max(1, _BLOCK // len(along))
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        for begin in range(0, len(points), rows):
            part = slice(begin, begin + rows)
            d = directions[part, None]
            to_start = chords.start[None] - points[part, None]
            facing = _cross(d, along)
            distance = _cross(to_start, along) / facing
            position = _cross(to_start, d) / facing
            hit = (facing < 0) | (facing > 0)
            hit &= (distance > 0) & (position >= -1e-9) & (position <= 1 + 1e-9)
            hit[np.arange(len(hit)), own[part]] = False
            distance = np.where(hit, distance, np.inf)
            nearest = distance.argmin(axis=1)
            cosine = -(directions[part] * normal[nearest]).sum(axis=1)
            result[part] = distance[np.arange(len(hit)), nearest] / np.maximum(cosine, 1e-6) ** 2
    return result


def _cross(a: FloatArray, b: FloatArray) -> FloatArray:
    result: FloatArray = a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0]
    return result


def _chords(loops: Sequence[tuple[Loop, float]]) -> _Chords:
    """Cut loops into chords with the solid on the left; the sign is 1 for an outer loop, -1 for a hole."""
    starts, ends, radii = [], [], []
    for loop, sign in loops:
        pieces = [segment.polyline(_ARC_STEP) for segment in loop.segments]
        points = np.array([point for piece in pieces for point in piece])
        radius = np.concatenate([_radii(s, len(piece)) for s, piece in zip(loop.segments, pieces, strict=True)])
        following = np.roll(points, -1, axis=0)
        keep = (points != following).any(axis=1)
        area = float(_cross(points - points[0], following - points[0]).sum())
        forward = area * sign > 0
        starts.append((points if forward else following)[keep])
        ends.append((following if forward else points)[keep])
        radii.append(radius[keep])
    return _Chords(np.vstack(starts), np.vstack(ends), np.concatenate(radii))


def _radii(segment: Segment, count: int) -> FloatArray:
    """Radius of curvature at the chords of one segment; of an ellipse the smallest."""
    if isinstance(segment, Arc):
        return np.full(count, segment.radius)
    if isinstance(segment, EllipseArc):
        half = float(np.hypot(*segment.major))
        return np.full(count, half * min(segment.ratio**2, 1 / segment.ratio))
    return np.full(count, np.inf)
