"""Exact shear stresses and shear coefficients of flexure under V along z; tau is (tau_xy, tau_xz).

Lengths and forces are pure numbers, y to the right, z up. "T&G" is S. P. Timoshenko, J. N. Goodier, Theory of Elasticity,
3rd ed. 1970; citations are from memory, the formulas were derived again unless stated.
"""

from __future__ import annotations

import numpy as np
from scipy.special import beta

from .series import TERMS, FloatArray, over_cosh


def rectangle_flexure(y: FloatArray, z: FloatArray, width: float, depth: float, g: float) -> FloatArray:
    """Stress at points under V = 1, shape (..., 2); g = 2 nu G/E, which is nu/(1 + nu) when G = E/(2(1 + nu)).

    tau = (0, (c² - z²)/(2I)) + curl phi with laplace phi = -g y/I, phi = 0 on the sides: T&G, bending of bars, rectangular
    section; the sine series in y was derived here.
    """
    w, c = width / 2, depth / 2
    y, z = np.broadcast_arrays(np.asarray(y, float), np.asarray(z, float))
    second_moment = width * depth**3 / 12
    n = np.arange(1, TERMS + 1)
    k, b = n * np.pi / w, 2 * w**3 * (-1.0) ** (n + 1) / (n * np.pi) ** 3
    ky, kz = y[..., None] * k, z[..., None] * k
    by_y = (w**2 - 3 * y**2) / 6 - (b * k * np.cos(ky) * over_cosh("cosh", kz, k * c)).sum(axis=-1)
    by_z = -(b * k * np.sin(ky) * over_cosh("sinh", kz, k * c)).sum(axis=-1)
    curl = g / second_moment * np.stack([by_z, -by_y], axis=-1)
    return curl + np.stack([np.zeros_like(z), (c**2 - z**2) / (2 * second_moment)], axis=-1)


def rectangle_shear_coefficient(width: float, depth: float, nu: float) -> float:
    """kappa = V²/(A ∫tau²): F. Gruttmann, W. Wagner, Comput. Mech. 27, 2001, and J. D. Renton 1991; series derived again."""
    g, ratio, n = nu / (1 + nu), width / depth, np.arange(1, 400)
    total = (np.tanh(n * np.pi / ratio) / n**5).sum()
    return float(1 / (6 / 5 + g**2 * ratio**4 * (1 / 5 - 18 * ratio / np.pi**5 * total)))


def ellipse_flexure(y: FloatArray, z: FloatArray, across: float, along: float, nu: float) -> FloatArray:
    """Stress under V = 1 in an ellipse with half axes `across` (y) and `along` (z): T&G, elliptic section; circle when equal."""
    a, b, area = along, across, np.pi * along * across
    D = (3 * a**2 + b**2) * (1 + nu)
    tau_xz = (2 * (2 * a**2 * (1 + nu) + b**2) * (1 - z**2 / a**2) - 2 * (1 - 2 * nu) * y**2) / D
    tau_xy = -4 * (a**2 * (1 + nu) + b**2 * nu) * y * z / (a**2 * D)
    return np.stack([tau_xy, tau_xz], axis=-1) / area


def circle_shear_coefficient(nu: float) -> float:
    """6 (1 + nu)²/(7 + 14 nu + 8 nu²): J. D. Renton 1991 (energy definition)."""
    return 6 * (1 + nu) ** 2 / (7 + 14 * nu + 8 * nu**2)


def ring_flexure(y: FloatArray, z: FloatArray, inner: float, outer: float, nu: float) -> FloatArray:
    """Stress under V = 1 in a ring: A. E. H. Love, Mathematical Theory of Elasticity, 4th ed. 1927, flexure of a hollow circle.

    G psi = q ((a² + b²) z + a² b² z/r²) - s r² z/8 and G d = s nu (y z, (z² - y²)/2)/2, so that div tau = -z/I; q from tau . n = 0.
    """
    second_moment = np.pi / 4 * (outer**4 - inner**4)
    s = 1 / ((1 + nu) * second_moment)
    q, r2, product = (3 + 2 * nu) / 8 * s, y**2 + z**2, (inner * outer) ** 2
    by_y = -2 * q * product * y * z / r2**2 - y * z * s / 4
    by_z = q * (inner**2 + outer**2 + product * (y**2 - z**2) / r2**2) - (r2 + 2 * z**2) * s / 8
    return np.stack([by_y - nu * s / 2 * y * z, by_z - nu * s / 4 * (z**2 - y**2)], axis=-1)


def ring_shear_coefficient(ratio: float, nu: float) -> float:
    """Energy definition, ratio = inner/outer radius; derived from Love's field (half that of the circle's form as ratio -> 1)."""
    m2 = ratio**2
    below = (7 + 14 * nu + 8 * nu**2) * (1 + m2**2) + (34 + 68 * nu + 32 * nu**2) * m2
    return 6 * (1 + m2) ** 2 * (1 + nu) ** 2 / below


def equilateral_triangle_flexure(y: FloatArray, z: FloatArray, a: float) -> FloatArray:
    """Stress under V = 1 at nu = 1/2, corners (±sqrt(3) a, -a) and (0, 2a); T&G treat the case, this form was derived here."""
    second_moment = 1.5 * np.sqrt(3) * a**4
    return np.asarray(np.stack([-y * (a + z), (2 * a - z) * (a + z)], axis=-1) / (3 * second_moment))


def ellipse_shear_coefficient(across: float, along: float, nu: float) -> float:
    """1/(A ∫tau²) of the field above, half axes `across` the load and `along` it; exact quadrature of a polynomial of degree 4."""
    x, weight = np.polynomial.legendre.leggauss(4)
    radius, t = (x + 1) / 2, np.arange(16) * np.pi / 8
    r, t = np.meshgrid(radius, t, indexing="ij")
    tau = ellipse_flexure(across * r * np.cos(t), along * r * np.sin(t), across, along, nu)
    energy = (weight / 2) @ (r * (tau**2).sum(axis=-1)).sum(axis=1) * np.pi / 8 * across * along
    return float(1 / (np.pi * across * along * energy))


def power_shape(nu: float) -> tuple[float, float]:
    """(A, I) of |y| = (1 - z²)^nu, |z| <= 1: T&G, bending of bars, other cross sections (after Grashof); Beta functions.

    There tau_xz = V (1 - z²)/(2 (1 + nu) I) and tau_xy = -nu V y z/((1 + nu) I) at that nu.
    """
    area = 2 * beta(0.5, 1 + nu)
    return float(area), float(area / (3 + 2 * nu))


def hyperbola_shape(nu: float) -> tuple[float, float]:
    """(A, I) of |y| <= 1, z² <= 1 + nu/(1 + nu) y²: T&G, ibid.; there tau_xz = V (1 + nu/(1 + nu) y² - z²)/(2 I), tau_xy = 0."""
    x, weight = np.polynomial.legendre.leggauss(40)
    top = np.sqrt(1 + nu / (1 + nu) * x**2)
    return float(weight @ (2 * top)), float(weight @ (2 * top**3 / 3))
