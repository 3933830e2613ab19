"""The stress across a joint's width as curves to plot: glue lines edge by edge joined in order, beads from root to surface."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.recovery.joint_results import JointProfile

FloatArray = npt.NDArray[np.float64]

_SAME = 1e-6  # of the line's length: ends this near are one point


def chained(profile: JointProfile) -> list[tuple[FloatArray, FloatArray]]:
    """Return the profile's lines joined where they meet: (places (K, 2), across (K,)) a connected piece [mm, MPa]."""
    places, across = profile.places, profile.across
    if not len(places):
        return []
    reach = _SAME * float(np.hypot(*np.diff(places, axis=1).reshape(-1, 2).T).sum())
    following = {k: _next(places, k, reach) for k in range(len(places))}
    reached = {after for after in following.values() if after is not None}
    left, pieces = set(following), []
    for first in [*(k for k in following if k not in reached), *following]:
        order = []
        step: int | None = first
        while step is not None and step in left:
            left.remove(step)
            order.append(step)
            step = following[step]
        if order:
            pieces.append((places[order].reshape(-1, 2), across[order].ravel()))
    return pieces


def _next(places: FloatArray, k: int, reach: float) -> int | None:
    """The line that starts where line k ends."""
    away = np.hypot(*(places[:, 0] - places[k, -1]).T)
    away[k] = np.inf
    best = int(np.argmin(away))
    return best if away[best] <= reach else None


def along(places: FloatArray) -> FloatArray:
    """Return the distance of each place (K, 2) from the first, along the line, (K,) [mm]."""
    return np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(places, axis=0).T))])
