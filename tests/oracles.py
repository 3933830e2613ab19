"""Exact solutions of Saint-Venant's problem, as functions, each with its source.

Lengths and forces are pure numbers. V acts along z, twist is per length, tau is (tau_xy, tau_xz). "T&G" is S. P. Timoshenko, J. N.
Goodier, Theory of Elasticity, 3rd ed. 1970; citations are from memory, the formulas were derived again unless stated.
Values without a formula are in `tests.reference_values`.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

# Inside, the terms fall like exp(-n pi distance/width); on a side at the distance s from the corner the flexure series falls like
# 1/n² with changing signs: what is left out is about 1/(600² s)
_TERMS = 600


def _over_cosh(cosh_or_sinh: str, x: FloatArray, top: FloatArray) -> FloatArray:
    """cosh(x)/cosh(top) or sinh(x)/cosh(top) for |x| <= top, without overflow."""
    sign = 1.0 if cosh_or_sinh == "cosh" else -1.0
    return (np.exp(x - top) + sign * np.exp(-x - top)) / (1 + np.exp(-2 * top))


# --- flexure --------------------------------------------------------------------------------------------------------


def rectangle_flexure(y: FloatArray, z: FloatArray, width: float, depth: float, g: float) -> FloatArray:
    """Stress at points under V = 1, shape (..., 2); g = 2 nu G/E, which is nu/(1 + nu) when G = E/(2(1 + nu)).

    tau = (0, (c² - z²)/(2I)) + curl phi with laplace phi = -g y/I, phi = 0 on the sides: T&G, bending of bars, rectangular
    section; the sine series in y was derived here.
    """
    w, c = width / 2, depth / 2
    y, z = np.broadcast_arrays(np.asarray(y, float), np.asarray(z, float))
    second_moment = width * depth**3 / 12
    n = np.arange(1, _TERMS + 1)
    k, b = n * np.pi / w, 2 * w**3 * (-1.0) ** (n + 1) / (n * np.pi) ** 3
    ky, kz = y[..., None] * k, z[..., None] * k
    by_y = (w**2 - 3 * y**2) / 6 - (b * k * np.cos(ky) * _over_cosh("cosh", kz, k * c)).sum(axis=-1)
    by_z = -(b * k * np.sin(ky) * _over_cosh("sinh", kz, k * c)).sum(axis=-1)
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
    return np.stack([-y * (a + z), (2 * a - z) * (a + z)], axis=-1) / (3 * second_moment)


def layered_flexure(z: FloatArray, lines: FloatArray, E: FloatArray, width: float) -> FloatArray:
    """tau_xz = V (E Q)/(EI b) of layers of moduli E between the lines, exact at nu = 0: transformed section (textbooks)."""
    low, high = lines[:-1], lines[1:]
    centroid = (E * (high**2 - low**2) / 2).sum() / (E * (high - low)).sum()
    EI = width * (E * ((high - centroid) ** 3 - (low - centroid) ** 3) / 3).sum()
    lower = np.clip(z[..., None], low, high)
    Q = width * (E * ((high - centroid) ** 2 - (lower - centroid) ** 2) / 2).sum(axis=-1)
    return Q / (EI * width)


# --- torsion --------------------------------------------------------------------------------------------------------


def rectangle_torsion_constant(width: float, depth: float) -> float:
    """IT of a rectangle: T&G, torsion of rectangular bars, (1/3) [1 - (192 b/(pi^5 a)) sum tanh(n pi a/(2b))/n^5] a b³."""
    b, a = sorted((width, depth))
    n = np.arange(1, 400, 2)
    return float(a * b**3 / 3 * (1 - 192 * b / (np.pi**5 * a) * (np.tanh(n * np.pi * a / (2 * b)) / n**5).sum()))


def rectangle_torsion_largest(width: float, depth: float) -> float:
    """tau/(G twist) at the middle of the longer side, b (1 - (8/pi²) sum 1/(n² cosh(n pi a/(2b)))): T&G, ibid."""
    b, a = sorted((width, depth))
    n = np.arange(1, 60, 2)
    over_cosh = _over_cosh("cosh", np.zeros(len(n)), n * np.pi * a / (2 * b))
    return float(b * (1 - 8 / np.pi**2 * (over_cosh / n**2).sum()))


def rectangle_warping(y: FloatArray, z: FloatArray, width: float, depth: float) -> FloatArray:
    """omega about the centre: y z + sum B_n sin(k_n y) sinh(k_n z), odd multiples k of pi/(2w); derived here (form as in T&G)."""
    w, c = width / 2, depth / 2
    n = np.arange(_TERMS)
    k = (2 * n + 1) * np.pi / (2 * w)
    B = -4 * (-1.0) ** n / (w * k**3)
    terms = B * np.sin(k * y[..., None]) * _over_cosh("sinh", k * z[..., None], k * c)
    return y * z + terms.sum(axis=-1)


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
        return -(r**4) / 4 + reach * r**3 / 3 + b**2 * r**2 / 2 - b**2 * reach * r

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


def bredt_constant(side: float, thickness: float) -> float:
    """4 Am²/∮ds/t of a square tube, mid-line side (R. Bredt 1896)."""
    return side**3 * thickness


# --- shear centres --------------------------------------------------------------------------------------------------


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
