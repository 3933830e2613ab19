"""Exact solutions of sections of two or more materials.

Lengths and forces are pure numbers, y to the right, z up. "T&G" is S. P. Timoshenko, J. N. Goodier, Theory of Elasticity,
3rd ed. 1970; citations are from memory, the formulas were derived again unless stated.
"""

from __future__ import annotations

import numpy as np

from .series import FloatArray


def layered_flexure(z: FloatArray, lines: FloatArray, E: FloatArray, width: float) -> FloatArray:
    """tau_xz = V (E Q)/(EI b) of layers of moduli E between the lines, exact at nu = 0: transformed section (textbooks)."""
    low, high = lines[:-1], lines[1:]
    centroid = (E * (high**2 - low**2) / 2).sum() / (E * (high - low)).sum()
    EI = width * (E * ((high - centroid) ** 3 - (low - centroid) ** 3) / 3).sum()
    lower = np.clip(z[..., None], low, high)
    Q = width * (E * ((high - centroid) ** 2 - (lower - centroid) ** 2) / 2).sum(axis=-1)
    return np.asarray(Q / (EI * width))


def concentric_torsion(radii: FloatArray, G: FloatArray) -> float:
    """G IT of rings of moduli G between the radii (the first 0): textbook."""
    return float(np.pi / 2 * (G * np.diff(radii**4)).sum())


def side_by_side_torsion(width: float, depth: float, G1: float, G2: float) -> float:
    """G IT of two bonded rectangles, each width x depth, the joint along the depth.

    N. I. Muskhelishvili, Some Basic Problems of the Mathematical Theory of Elasticity (torsion of compound bars); the cosine
    series in the depth was derived here.
    """
    w, c = width, depth / 2
    n = np.arange(4000)
    k, sign = (2 * n + 1) * np.pi / (2 * c), (-1.0) ** n
    P, t, C = 4 * sign / (c * k**3), np.tanh(k * w / 2), 1 / np.tanh(k * w)
    joint = 2 * P * t / (C * (1 / G1 + 1 / G2))
    return float(2 * (2 * sign / k * ((G1 + G2) * P * (w - 2 * t / k) + 2 * joint * t / k)).sum())
