"""Exact shear centres.

Lengths and forces are pure numbers, y to the right, z up. "T&G" is S. P. Timoshenko, J. N. Goodier, Theory of Elasticity,
3rd ed. 1970; citations are from memory, the formulas were derived again unless stated.
"""

from __future__ import annotations

import numpy as np

from .torsion import semicircle_torsion_constant


def semicircle_shear_centres(radius: float, nu: float) -> tuple[float, float]:
    """(zero mean twist, Trefftz) distances from the circle's centre: 8R/(5 pi), plus nu/(1+nu) [8R/(15 pi) - (4R/(3 pi)) IT/(2I)].

    T&G, semicircular section, and E. Trefftz, ZAMM 15, 1935; the zero-mean-twist form was derived here.
    """
    R, second_moment = radius, np.pi * radius**4 / 8
    trefftz = 8 * R / (5 * np.pi)
    shift = 8 * R / (15 * np.pi) - 4 * R / (3 * np.pi) * semicircle_torsion_constant(R) / (2 * second_moment)
    return trefftz + nu / (1 + nu) * shift, trefftz


def thin_channel_shear_centre(depth: float, width: float, thickness: float) -> float:
    """3 b²/(6 b + h), outward from the web's mid-line; mid-line dimensions from outer ones. Textbooks (thin walls)."""
    b, h = width - thickness / 2, depth - thickness
    return 3 * b**2 / (6 * b + h)
