"""Bands of the ratio elasticity/elementary: round steps on a logarithmic scale about 1, the verdict's limits among them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.compare import Limits

FloatArray = npt.NDArray[np.float64]

_BEYOND = (1.5, 2.0, 3.0, 5.0, 10.0)  # steps above 1 + care; their inverses below 1 - care
FARTHEST = 100.0  # ratios beyond this, and its inverse, are drawn as this
_PALEST = 0.16  # of the map's half: colour next to the white band


@dataclass(frozen=True)
class RatioScale:
    """Limits of the bands (L,), and colours: one below, L - 1 between, one above."""

    levels: FloatArray
    colours: list[tuple[float, float, float, float]]


def ratio_scale(low: float, high: float, limits: Limits) -> RatioScale:
    """Return bands that cover the ratios from low to high [-]: white within `good` of 1, blue below, red above."""
    inner = [1 - limits.care, 1 - limits.good, 1 + limits.good, 1 + limits.care]
    above = [step for step in _BEYOND if step > inner[-1] * 1.1]
    below = [1 / step for step in _BEYOND if 1 / step < inner[0] / 1.1]
    levels = [
        *(_up_to(below, low)[::-1] if low < inner[0] else []),
        *inner,
        *(_up_to(above, high) if high > inner[-1] else []),
    ]
    return RatioScale(np.array(levels), _colours(np.array(levels), limits))


def _up_to(steps: list[float], reach: float) -> list[float]:
    """The steps away from 1, up to the first one that reaches beyond."""
    kept = []
    for step in steps:
        kept.append(step)
        if (step >= reach) if step > 1 else (step <= reach):
            break
    return kept


def _colours(levels: FloatArray, limits: Limits) -> list[tuple[float, float, float, float]]:
    """Colours by rank away from the white band, on either side as dark as the longer side's rank says."""
    from matplotlib import colormaps

    white = int(
        np.searchsorted(levels, 1 - limits.good + 1e-12)
    )  # number of the white band, counting the one below all levels
    ranks = np.arange(len(levels) + 1) - white
    most = max(1, int(np.abs(ranks).max()))
    share = np.where(ranks == 0, 0.0, _PALEST + (1 - _PALEST) * (np.abs(ranks) - 1) / max(1, most - 1))
    picked = colormaps["RdBu_r"](0.5 + 0.5 * 0.92 * np.sign(ranks) * share)
    return [(1.0, 1.0, 1.0, 1.0) if rank == 0 else tuple(colour) for rank, colour in zip(ranks, picked, strict=True)]
