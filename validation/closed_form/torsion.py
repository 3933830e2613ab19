"""Exact torsion constants, stresses and warping; twist is per length, stresses are tau/(G twist).

Lengths and forces are pure numbers, y to the right, z up. "T&G" is S. P. Timoshenko, J. N. Goodier, Theory of Elasticity,
3rd ed. 1970; citations are from memory, the formulas were derived again unless stated.
"""

from __future__ import annotations

import numpy as np

from .series import TERMS, FloatArray, over_cosh


def rectangle_torsion_constant(width: float, depth: float) -> float:
    """IT of a rectangle: T&G, torsion of rectangular bars, (1/3) [1 - (192 b/(pi^5 a)) sum tanh(n pi a/(2b))/n^5] a b³."""
    b, a = sorted((width, depth))
    n = np.arange(1, 400, 2)
    return float(a * b**3 / 3 * (1 - 192 * b / (np.pi**5 * a) * (np.tanh(n * np.pi * a / (2 * b)) / n**5).sum()))


def rectangle_torsion_largest(width: float, depth: float) -> float:
    """tau/(G twist) at the middle of the longer side, b (1 - (8/pi²) sum 1/(n² cosh(n pi a/(2b)))): T&G, ibid."""
    b, a = sorted((width, depth))
    n = np.arange(1, 60, 2)
    shares = over_cosh("cosh", np.zeros(len(n)), n * np.pi * a / (2 * b))
    return float(b * (1 - 8 / np.pi**2 * (shares / n**2).sum()))


def rectangle_warping(y: FloatArray, z: FloatArray, width: float, depth: float) -> FloatArray:
    """omega about the centre: y z + sum B_n sin(k_n y) sinh(k_n z), odd multiples k of pi/(2w); derived here (form as in T&G)."""
    w, c = width / 2, depth / 2
    n = np.arange(TERMS)
    k = (2 * n + 1) * np.pi / (2 * w)
    B = -4 * (-1.0) ** n / (w * k**3)
    terms = B * np.sin(k * y[..., None]) * over_cosh("sinh", k * z[..., None], k * c)
    return np.asarray(y * z + terms.sum(axis=-1))


def rectangle_warping_constant(width: float, depth: float) -> float:
    """∫ omega² over the rectangle by Gauss quadrature of the series (48 x 48 points on a quarter)."""
    x, weight = np.polynomial.legendre.leggauss(48)
    y, z = (x + 1) * width / 4, (x + 1) * depth / 4
    values = rectangle_warping(*np.meshgrid(y, z, indexing="ij"), width, depth) ** 2
    return float(weight @ values @ weight * width * depth / 4)


def ellipse_torsion(a: float, b: float) -> tuple[float, float]:
    """(IT, Iw) of an ellipse, half axes a, b: B. de Saint-Venant; omega = -(a² - b²)/(a² + b²) y z, T&G."""
    square = a**2 + b**2
    return np.pi * (a * b) ** 3 / square, ((a**2 - b**2) / square) ** 2 * np.pi * (a * b) ** 3 / 24


def equilateral_triangle_torsion(side: float) -> tuple[float, float]:
    """(IT, tau/(G twist) at the middle of a side): sqrt(3) s⁴/80 and sqrt(3) s/4, T&G."""
    return np.sqrt(3) * side**4 / 80, np.sqrt(3) * side / 4


def semicircle_torsion_constant(radius: float) -> float:
    """(pi/2 - 4/pi) R⁴: closed form of the sector series of T&G (0.298 R⁴), derived here."""
    return (np.pi / 2 - 4 / np.pi) * radius**4


def grooved_circle_torsion(radius: float, groove: float) -> tuple[float, float]:
    """(IT, tau/(G twist) at the bottom of the groove): C. Weber's solution, T&G, shaft with a circular groove.

    phi = -(r² - b²)(1 - 2 R cos th/r)/2 about the groove's centre; IT = 2 ∫phi, in r by hand, in th by Gauss.
    """
    R, b = radius, groove
    x, weight = np.polynomial.legendre.leggauss(60)
    half = np.arccos(b / (2 * R))
    th = half * x
    reach = 2 * R * np.cos(th)

    def primitive(r: FloatArray) -> FloatArray:  # of -(r² - b²)(r - reach)
        return np.asarray(-(r**4) / 4 + reach * r**3 / 3 + b**2 * r**2 / 2 - b**2 * reach * r)

    return float(half * weight @ (primitive(reach) - primitive(np.full_like(reach, b)))), 2 * R - b


def eccentric_tube_torsion_constant(inner: float, offset: float) -> float:
    """IT between the unit circle and a circle of radius `inner` about (offset, 0): H. M. Macdonald 1893.

    Moebius map to a concentric ring of ratio rho; series derived here, checked there to 12 digits by an independent quadrature.
    """
    b, e = inner, offset
    # unit disc to itself, the inner circle to |w| = rho: s solves e s² - (1 + e² - b²) s + e = 0
    p = (1 + e**2 - b**2) / (2 * e)
    s = p - np.sqrt(p**2 - 1)
    rho = (e + b - s) / (1 - s * (e + b))
    n = np.arange(1, 400)
    series = (n * s ** (2 * n - 2) * rho ** (2 * n) * (1 + rho ** (2 * n)) / (1 - rho ** (2 * n))).sum()
    return float(np.pi / 2 * (1 - b**4) - np.pi * (b * e) ** 2 - np.pi * e**2 * (1 - s**2) ** 2 * series)


def bredt_constant(side: float, thickness: float) -> float:
    """4 Am²/∮ds/t of a square tube, mid-line side (R. Bredt 1896)."""
    return side**3 * thickness


def rectangle_torsion_shorter(width: float, depth: float) -> float:
    """tau/(G twist) at the middle of the shorter side, b (8/pi²) sum (-1)^k tanh(n pi a/(2b))/n², n = 2k + 1: T&G, ibid."""
    b, a = sorted((width, depth))
    k = np.arange(200_000)
    n = 2 * k + 1
    terms = np.where(k % 2 == 0, 1.0, -1.0) / n**2 * (np.tanh(np.minimum(n * np.pi * a / (2 * b), 40.0)) - 1)
    catalan = 0.915965594177219015  # of which the tanh -> 1 part is: sum of (-1)^k/(2k + 1)²
    return float(b * 8 / np.pi**2 * (catalan + terms.sum()))


def hollow_ellipse_torsion_constant(a: float, b: float, ratio: float) -> float:
    """IT between an ellipse of half axes a, b and one `ratio` times as large, concentric: T&G (a stress line is cut out)."""
    return float(np.pi * (a * b) ** 3 / (a**2 + b**2) * (1 - ratio**4))
