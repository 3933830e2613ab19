"""The bands of a filled contour: round limits, zero in the middle of a white band for signed values."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

_BANDS = 12
_STEPS = [1, 2, 2.5, 5, 10]
_ROUND_OFF = 1e-6  # a field below this share of the largest |tau| is round-off of the solution, not a stress


@dataclass(frozen=True)
class ColourScale:
    """Bands and colours of one field.

    Attributes
    ----------
    levels : (L,) limits of the bands [MPa].
    ticks : values written at the colour bar [MPa].
    colours : name of the map: diverging (white at zero) for signed fields, sequential for magnitudes.
    limits : values of the first and last colour [MPa].
    extend : "neither", "min", "max" or "both": where values lie beyond the bands.
    flat : True when the field is zero but for round-off.
    """

    levels: FloatArray
    ticks: FloatArray
    colours: str
    limits: tuple[float, float]
    extend: str
    flat: bool


def colour_scale(values: FloatArray, shown: tuple[float, float], signed: bool, reference: float) -> ColourScale:
    """Return bands for values (S,) so that `shown` (lowest, highest away from singular corners) fills them.

    `reference` is the largest |tau| [MPa], to tell a field from round-off.
    """
    from matplotlib.ticker import MaxNLocator

    low, high = shown
    flat = max(abs(low), abs(high)) <= _ROUND_OFF * reference or high == low == 0
    if flat:
        size = reference or 1.0
        low, high = (-size, size) if signed else (0.0, size)
    locator = MaxNLocator(_BANDS, steps=_STEPS)
    if not signed:
        levels = np.asarray(locator.tick_values(0.0, high))
        limits = (0.0, float(levels[-1]))
        ticks = levels
    else:
        even = np.asarray(locator.tick_values(min(low, 0.0), max(high, 0.0)))
        step = float(even[1] - even[0])
        first, last = np.floor(min(low, 0.0) / step + 0.5), np.ceil(max(high, 0.0) / step - 0.5)
        ticks = np.arange(first, last + 1) * step
        levels = (np.arange(first, last + 2) - 0.5) * step
        most = float(np.abs(levels).max())
        limits = (-most, most)
    slack = 1e-9 * float(levels[-1] - levels[0])  # a limit of the bands is met but for round-off
    below, above = bool((values < levels[0] - slack).any()), bool((values > levels[-1] + slack).any())
    extend = {(False, False): "neither", (True, False): "min", (False, True): "max", (True, True): "both"}[below, above]
    return ColourScale(levels, ticks, "RdBu_r" if signed else "cividis", limits, extend, flat)
