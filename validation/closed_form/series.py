"""What the series of the exact solutions share."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

# Inside, the terms fall like exp(-n pi distance/width); on a side at the distance s from the corner the flexure series falls like
# 1/n² with changing signs: what is left out is about 1/(600² s)
TERMS = 600


def over_cosh(cosh_or_sinh: str, x: npt.NDArray[np.floating], top: npt.NDArray[np.floating]) -> FloatArray:
    """cosh(x)/cosh(top) or sinh(x)/cosh(top) for |x| <= top, without overflow."""
    sign = 1.0 if cosh_or_sinh == "cosh" else -1.0
    return np.asarray((np.exp(x - top) + sign * np.exp(-x - top)) / (1 + np.exp(-2 * top)))
