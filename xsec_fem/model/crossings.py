"""Where closed polylines cross, touch or fold back on themselves or each other."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import numpy.typing as npt

from xsec_fem.model.outline import FloatArray, Loop, Point

_ROUND_OFF = 1e-12  # an orientation below this share of the size squared is zero: the points lie on one line


def first_crossing(loops: Sequence[Loop], max_deg: float = 3.0) -> Point | None:
    """Return one point, shape (2,) [mm], where the loops cross or touch themselves or each other; None when they are simple.

    Exact for straight sides; arcs are cut into chords of `max_deg` degrees (off by r*3e-4 at 3 deg).
    """
    polylines = [loop.polyline(max_deg) for loop in loops]
    for points in polylines:
        fold = _fold(points)
        if fold is not None:
            return fold
    return _crossing(polylines)


def _fold(points: FloatArray) -> Point | None:
    """A corner whose two sides lie on each other; points (n, 2)."""
    before, after = points - np.roll(points, 1, axis=0), np.roll(points, -1, axis=0) - points
    cross = before[:, 0] * after[:, 1] - before[:, 1] * after[:, 0]
    dot = (before * after).sum(axis=1)
    folded = (dot < 0) & (np.abs(cross) <= -1e-9 * dot)
    return _as_point(points[int(np.argmax(folded))]) if folded.any() else None


def _crossing(polylines: Sequence[FloatArray]) -> Point | None:
    """A common point of two sides that are not neighbours; polylines of (n, 2) points each."""
    starts = np.vstack(polylines)
    ends = np.vstack([np.roll(points, -1, axis=0) for points in polylines])
    following = np.concatenate(
        [np.roll(np.arange(len(p)), -1) + sum(len(q) for q in polylines[:k]) for k, p in enumerate(polylines)]
    )
    i, j = _near_pairs(np.minimum(starts, ends), np.maximum(starts, ends))
    apart = (following[i] != j) & (following[j] != i)
    i, j = i[apart], j[apart]
    a, b, c, d = starts[i], ends[i], starts[j], ends[j]
    zero = _ROUND_OFF * float(np.ptp(starts, axis=0).max()) ** 2
    meet = (_side(a, b, c, zero) * _side(a, b, d, zero) <= 0) & (_side(c, d, a, zero) * _side(c, d, b, zero) <= 0)
    if not meet.any():
        return None
    k = int(np.argmax(meet))
    return _common_point(a[k], b[k], c[k], d[k])


def _near_pairs(low: FloatArray, high: FloatArray) -> tuple[npt.NDArray[np.int64], npt.NDArray[np.int64]]:
    """Pairs i < j of boxes (n, 2) that overlap or touch, row blocks at a time so that memory stays small."""
    first, second = [], []
    for begin in range(0, len(low), 512):
        rows = slice(begin, begin + 512)
        overlap = ((low[rows, None] <= high[None]) & (low[None] <= high[rows, None])).all(axis=2)
        i, j = np.nonzero(overlap)
        first.append(i[i + begin < j] + begin)
        second.append(j[i + begin < j])
    return np.concatenate(first), np.concatenate(second)


def _side(a: FloatArray, b: FloatArray, p: FloatArray, zero: float) -> FloatArray:
    """Sign of p's side of the line from a to b, (n,): 1 left, -1 right, 0 on it."""
    cross = (b[:, 0] - a[:, 0]) * (p[:, 1] - a[:, 1]) - (b[:, 1] - a[:, 1]) * (p[:, 0] - a[:, 0])
    result: FloatArray = np.where(np.abs(cross) <= zero, 0.0, np.sign(cross))
    return result


def _common_point(a: FloatArray, b: FloatArray, c: FloatArray, d: FloatArray) -> Point:
    """The crossing of lines ab and cd, or the middle of their common stretch when parallel."""
    u, v, w = b - a, d - c, c - a
    det = u[0] * v[1] - u[1] * v[0]
    if abs(det) <= 1e-12 * np.hypot(*u) * np.hypot(*v):
        low = np.maximum(np.minimum(a, b), np.minimum(c, d))
        return _as_point((low + np.minimum(np.maximum(a, b), np.maximum(c, d))) / 2)
    return _as_point(a + u * (w[0] * v[1] - w[1] * v[0]) / det)


def _as_point(p: FloatArray) -> Point:
    return (float(p[0]), float(p[1]))
