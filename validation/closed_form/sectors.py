"""Exact torsion and shear centres of sectors of a disc or ring, symmetric about +y, by their series in r^m and r^-m.

Form of S. P. Timoshenko, J. N. Goodier, Theory of Elasticity, 3rd ed. 1970, torsion of sectors (cited from memory); the ring
and the integrals were derived here. Outer radius 1, inner b, G = 1. With the opening a, c_n = 4 (-1)^((n-1)/2)/(n pi) and
m = n pi/a, the stress function of Laplace phi = -2 is the sum over odd n of f_n(r) cos(m t),

    f_n = 2 c_n (r² + A r^m + B (b/r)^m)/(m² - 4),   f_n(1) = f_n(b) = 0,

and the warping is minus the harmonic conjugate of phi + r²/2. An opening at which some m is 2 is a removable singularity: values
there are extrapolated from both sides.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from .series import FloatArray

_TERMS = 20_000  # the slowest integral, that of IT, falls as n^-4: what is left out is 1e-13
_STEP = 1e-3  # of the opening [rad]: what is left of the extrapolation from both sides is its fourth power
_NEAR = 1e-6  # of m to a pole: closer, a limit is taken


@dataclass(frozen=True)
class SectorValues:
    """IT, and the shear centre y = trefftz + nu/(1 + nu) slope (zero mean twist) from the circle's centre, of outer radius 1."""

    IT: float
    trefftz: float
    slope: float


def sector_values(opening_deg: float, inner: float = 0.0) -> SectorValues:
    """Return the constants of a sector with that opening, up to 360 degrees, and inner radius in [0, 1)."""
    a = np.radians(opening_deg)
    odd = 2 * round((a * 2 / np.pi - 1) / 2) + 1  # the n whose m is nearest to 2
    if abs(odd * np.pi / a - 2) > _NEAR:
        return SectorValues(*(float(value) for value in _values(a, inner)))
    near, far = ((_values(a - h, inner) + _values(a + h, inner)) / 2 for h in (_STEP, 2 * _STEP))
    return SectorValues(*(float(value) for value in (4 * near - far) / 3))


def _values(a: float, b: float) -> FloatArray:
    """IT, trefftz, slope."""
    sign = np.where(np.arange(_TERMS) % 2 == 0, 1.0, -1.0)
    n = 2.0 * np.arange(_TERMS) + 1
    m: FloatArray = np.asarray(n * np.pi / a)
    factor: FloatArray = 8 * sign / (n * np.pi * (m**2 - 4))
    A: FloatArray = -(1 - b ** (m + 2)) / (1 - b ** (2 * m))
    B: FloatArray = (b**m - b**2) / (1 - b ** (2 * m)) if b else np.zeros(_TERMS)

    area, second_moment = (1 - b**2) * a / 2, (1 - b**4) / 8 * (a - np.sin(a))
    centroid = 2 * (1 - b**3) / 3 * np.sin(a / 2) / area
    with_cos = _sine_over(m - 1, a) + _sine_over(m + 1, a)  # of cos t cos(m t) over the opening
    with_sin = _sine_over(m - 1, a) - _sine_over(m + 1, a)  # of sin t sin(m t)

    radial = (1 - b**4) / 4 + A * _outward(m, 1, b) + B * _inward(m, 1, b)
    IT = 2 * (factor * radial * 2 * sign / m).sum()
    radial = (1 - b**5) / 5 + A * _outward(m, 2, b) + B * _inward(m, 2, b)
    slope = ((factor * radial * with_cos).sum() - centroid * IT / 2) / second_moment
    conjugate = (factor * (A * _outward(m, 2, b) - B * _inward(m, 2, b)) * with_sin).sum()
    conjugate += (1 - b**5) / 10 / np.cos(a) * (np.sin(a / 2) - np.sin(3 * a / 2) / 3)
    return np.array([IT, conjugate / second_moment, slope])


def _sine_over(x: FloatArray, a: float) -> FloatArray:
    """sin(x a/2)/x."""
    return np.asarray(a / 2 * np.sinc(x * a / (2 * np.pi)))


def _outward(m: FloatArray, k: int, b: float) -> FloatArray:
    """Integral of r^m r^k from b to 1."""
    return np.asarray((1 - b ** (m + k + 1)) / (m + k + 1))


def _inward(m: FloatArray, k: int, b: float) -> FloatArray:
    """Integral of (b/r)^m r^k from b to 1; its limit where m = k + 1."""
    if b == 0:
        return np.zeros_like(m)
    gap = k + 1 - m
    pole = np.abs(gap) < _NEAR
    return np.asarray(np.where(pole, -(b ** (k + 1)) * np.log(b), (b**m - b ** (k + 1)) / np.where(pole, 1.0, gap)))
