"""Rectangles of Gxy != Gxz: stretched along the axes they are isotropic ones.

phi_yy/Gxz + phi_zz/Gxy = -2 (torsion) or -2 nu_xy y/(E I) (flexure by V = 1 along z) with phi = 0 on the sides; y sqrt(Gxz) and
z sqrt(Gxy) as coordinates make the left side Laplace's (S. G. Lekhnitskii, Theory of Elasticity of an Anisotropic Body, 1963,
torsion of orthotropic bars, from memory; the flexure was derived here in the same way).
"""

from __future__ import annotations

from math import sqrt

from .flexure import rectangle_shear_coefficient
from .torsion import rectangle_torsion_constant


def rectangle_torsion(width: float, depth: float, Gxy: float, Gxz: float) -> float:
    """G IT of the rectangle: that of the stretched one over sqrt(Gxy Gxz)."""
    return rectangle_torsion_constant(width * sqrt(Gxz), depth * sqrt(Gxy)) / sqrt(Gxy * Gxz)


def rectangle_flexibility(width: float, depth: float, E: float, Gxy: float, Gxz: float, nu_xy: float) -> float:
    """∫ tau . G⁻¹ tau of V = 1 along z: 6/5 over Gxz A, and the stretched rectangle's own energy with its source.

    Of the isotropic rectangle w x h that energy is Q S² for -laplace phi = S y; Q from its shear coefficient at g = 1.
    """
    w, h = width * sqrt(Gxz), depth * sqrt(Gxy)
    nu = 0.4  # any: g = nu/(1 + nu) is divided out
    g = nu / (1 + nu)
    over = (1 / rectangle_shear_coefficient(w, h, nu) - 6 / 5) / g**2  # of S = g/I, times the area
    Q = over / (w * h) * (w * h**3 / 12) ** 2
    second_moment = width * depth**3 / 12
    S = 2 * nu_xy / (E * second_moment) / sqrt(Gxz)
    return 6 / 5 / (Gxz * width * depth) + Q * S**2 / sqrt(Gxy * Gxz)
