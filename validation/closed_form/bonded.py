"""Bonded sections of two or more materials with one Poisson's ratio, G = E/(2 (1 + nu)): exact Saint-Venant solutions.

Lengths and forces are pure numbers, V acts along z, twist is per length. tau = tau0 + curl phi with curl phi = (phi_z, -phi_y),
phi = 0 on the outline, phi and (1/G) d phi/dn continuous where materials meet:

    torsion of unit twist       tau0 = 0                            -div(grad phi/G) = 2
    flexure by V = 1            tau0 = (0, E Q/(EI b))              -div(grad phi/G) = (2 nu/EI) (y - yc)

(N. I. Muskhelishvili, Some Basic Problems of the Mathematical Theory of Elasticity, 1953, ch. on compound bars, cited from
memory; the series and the flexure of compound bars were derived here.) In a rectangle whose layers lie side by side along s,
the sources are expanded in the direction r across: f'' - k² f = -G q(s) for every term, q linear in each layer, f = 0 at both
ends.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

_TERMS = 3000


@dataclass(frozen=True)
class Terms:
    """One f(s) for each k in each layer.

    k : (n,); G, thickness : (L,); ends : (n, L + 1) values of f at the layers' ends; q : (n, L, 2) sources at them.
    """

    k: FloatArray
    G: FloatArray
    thickness: FloatArray
    ends: FloatArray
    q: FloatArray

    @property
    def particular(self) -> FloatArray:
        """(n, L, 2) the particular solution G q/k² at the ends of each layer."""
        return np.asarray(self.G[:, None] * self.q / self.k[:, None, None] ** 2)

    @property
    def homogeneous(self) -> FloatArray:
        """(n, L, 2) what is left of f at the ends of each layer."""
        return np.stack([self.ends[:, :-1], self.ends[:, 1:]], axis=-1) - self.particular

    def integral(self) -> FloatArray:
        """(n, L) ∫ f ds over each layer."""
        k, h = self.k[:, None], self.thickness
        return np.asarray(self.particular.mean(axis=-1) * h + self.homogeneous.sum(axis=-1) * np.tanh(k * h / 2) / k)

    def moment(self) -> FloatArray:
        """(n, L) ∫ f (s - s_start) ds over each layer."""
        k, h = self.k[:, None], self.thickness
        p, u = self.particular, self.homogeneous
        far = h / np.tanh(k * h) / k - 1 / k**2  # ∫ s sinh(k s)/sinh(k h) ds
        near = h * np.tanh(k * h / 2) / k - far
        return np.asarray(
            p[..., 0] * h**2 / 2 + (p[..., 1] - p[..., 0]) * h**2 / 3 + u[..., 0] * near + u[..., 1] * far
        )

    def at(self, layer: int, distance: float) -> tuple[FloatArray, FloatArray]:
        """(n,) the homogeneous part of f and its slope, at a distance from the layer's start."""
        k, h, u = self.k, self.thickness[layer], self.homogeneous[:, layer]
        near, far = (_sinh_ratio(k * s, k * h) for s in (h - distance, np.asarray(distance)))
        down, up = (_cosh_over_sinh(k * s, k * h) for s in (h - distance, np.asarray(distance)))
        return u[:, 0] * near + u[:, 1] * far, k * (u[:, 1] * up - u[:, 0] * down)


def _sinh_ratio(x: FloatArray, top: FloatArray) -> FloatArray:
    """sinh(x)/sinh(top) without overflow, 0 <= x <= top."""
    return np.asarray(np.exp(x - top) * -np.expm1(-2 * x) / -np.expm1(-2 * top))


def _cosh_over_sinh(x: FloatArray, top: FloatArray) -> FloatArray:
    """cosh(x)/sinh(top) without overflow, 0 <= x <= top."""
    return np.asarray(np.exp(x - top) * (1 + np.exp(-2 * x)) / -np.expm1(-2 * top))


def solve_terms(k: FloatArray, G: FloatArray, thickness: FloatArray, q: FloatArray) -> Terms:
    """Return f of all k (n,) for sources q (n, L, 2): three-term equations for the values between the layers."""
    layers, h = len(G), np.asarray(thickness, float)
    ends = np.zeros((len(k), layers + 1))
    terms = Terms(k, np.asarray(G, float), h, ends, q)
    p = terms.particular
    coth = 1 / np.tanh(k[:, None] * h)
    cosech = _cosh_over_sinh(np.zeros((len(k), layers)), k[:, None] * h)
    slope = (q[..., 1] - q[..., 0]) / (h * k[:, None] ** 2)  # of the particular part, over G
    matrix, right = np.zeros((len(k), layers - 1, layers - 1)), np.zeros((len(k), layers - 1))
    kG = k[:, None] / terms.G
    for j in range(layers - 1):  # (1/G) f' from the layer before equals that of the layer after
        a, b = j, j + 1
        matrix[:, j, j] = kG[:, a] * coth[:, a] + kG[:, b] * coth[:, b]
        if j > 0:
            matrix[:, j, j - 1] = -kG[:, a] * cosech[:, a]
        if j < layers - 2:
            matrix[:, j, j + 1] = -kG[:, b] * cosech[:, b]
        before = kG[:, a] * (p[:, a, 1] * coth[:, a] - p[:, a, 0] * cosech[:, a]) - slope[:, a]
        after = kG[:, b] * (p[:, b, 0] * coth[:, b] - p[:, b, 1] * cosech[:, b]) + slope[:, b]
        right[:, j] = before + after
    if layers > 1:
        ends[:, 1:-1] = np.linalg.solve(matrix, right[..., None])[..., 0]
    return terms


class _Layers:
    """What layers of moduli E between the lines have in common, one above the other or side by side."""

    lines: FloatArray
    E: FloatArray
    nu: float

    @property
    def G(self) -> FloatArray:
        """(L,) shear moduli."""
        return np.asarray(self.E / (2 * (1 + self.nu)))

    @property
    def centroid(self) -> float:
        """E-weighted, across the layers; side by side the shear centre at nu = 0, and Trefftz' at any nu: tau0 is exact there."""
        low, high = self.lines[:-1], self.lines[1:]
        return float((self.E * (high**2 - low**2) / 2).sum() / (self.E * (high - low)).sum())


@dataclass(frozen=True)
class LayeredFlexure(_Layers):
    """Horizontal layers of moduli E between the lines (from below), width b, V = 1 along z: stresses and flexibility."""

    lines: FloatArray
    E: FloatArray
    width: float
    nu: float

    @property
    def EI(self) -> float:
        """Bending stiffness about the centroid."""
        low, high = self.lines[:-1] - self.centroid, self.lines[1:] - self.centroid
        return float(self.width * (self.E * (high**3 - low**3) / 3).sum())

    def elementary(self, z: float) -> float:
        """tau0 = E Q/(EI b), the transformed section (any text)."""
        c = self.centroid
        low, high = self.lines[:-1], self.lines[1:]
        return float((self.E * ((high - c) ** 2 - (np.clip(z, low, high) - c) ** 2) / 2).sum() / self.EI)

    def _terms(self) -> tuple[Terms, FloatArray]:
        w, n = self.width / 2, np.arange(1, _TERMS)
        k: FloatArray = np.asarray(n * np.pi / w, dtype=np.float64)
        c = 2 * (-1.0) ** (n + 1) / k  # y = sum c sin(k y)
        q = 2 * self.nu / self.EI * np.broadcast_to(c[:, None, None], (len(k), len(self.E), 2))
        return solve_terms(k, self.G, np.diff(self.lines), q), c

    def stress(self, y: float, z: float) -> tuple[float, float]:
        """(tau_xy, tau_xz) at a point strictly inside one layer's height."""
        layer = int(np.searchsorted(self.lines, z)) - 1
        terms, _ = self._terms()
        value, slope = terms.at(layer, z - float(self.lines[layer]))
        w, k = self.width / 2, terms.k
        strip = 2 * self.nu / self.EI * self.G[layer] * (w**2 - 3 * y**2) / 6  # phi_y of the particular parts, summed
        phi_y = strip + (k * np.cos(k * y) * value).sum()
        return float((np.sin(k * y) * slope).sum()), float(self.elementary(z) - phi_y)

    def flexibility(self) -> float:
        """∫ tau . tau/G: tau0 by Gauss (a polynomial of degree 4), phi by ∫ phi times its source; they are orthogonal."""
        x, weight = np.polynomial.legendre.leggauss(4)
        total = 0.0
        for low, high, G in zip(self.lines[:-1], self.lines[1:], self.G, strict=True):
            z = (low + high) / 2 + x * (high - low) / 2
            total += self.width * (high - low) / 2 * float(weight @ [self.elementary(s) ** 2 / G for s in z])
        terms, c = self._terms()
        return total + float(2 * self.nu / self.EI * self.width / 2 * (c @ terms.integral().sum(axis=1)))


@dataclass(frozen=True)
class SideBySide(_Layers):
    """Upright layers of moduli E between the lines (from the left), depth 2c about z = 0: torsion, V = 1 along z, shear centres."""

    lines: FloatArray
    E: FloatArray
    depth: float
    nu: float

    @property
    def EI(self) -> float:
        """Bending stiffness about z = 0."""
        return float((self.E * np.diff(self.lines)).sum() * self.depth**3 / 12)

    def _terms(self, at_lines: FloatArray) -> tuple[Terms, FloatArray]:
        c, n = self.depth / 2, np.arange(_TERMS)
        k: FloatArray = np.asarray((2 * n + 1) * np.pi / (2 * c), dtype=np.float64)
        one = 2 * (-1.0) ** n / (c * k)  # 1 = sum one cos(k z)
        q = one[:, None, None] * np.stack([at_lines[:-1], at_lines[1:]], axis=-1)
        return solve_terms(k, self.G, np.diff(self.lines), q), 2 * (-1.0) ** n / k  # and ∫ cos(k z) dz

    def _moments(self, source: FloatArray) -> tuple[float, float]:
        """∫ phi and ∫ phi (y - yc) of a source that is linear in y, given at the lines."""
        terms, across = self._terms(source)
        area = terms.integral()
        first = terms.moment() + area * (self.lines[:-1] - self.centroid)
        return float(across @ area.sum(axis=1)), float(across @ first.sum(axis=1))

    def torsion(self) -> float:
        """G IT = 2 ∫ phi."""
        return 2 * self._moments(np.full(len(self.lines), 2.0))[0]

    def shear_centre(self) -> float:
        """Zero mean twist: torque of tau0, which is yc, and 2 ∫ phi of the flexure."""
        return self.centroid + 2 * self._moments(2 * self.nu / self.EI * (self.lines - self.centroid))[0]

    def flexibility(self) -> float:
        """∫ tau . tau/G of V through the Trefftz centre: tau0, phi, less the twist's share (shear_centre - centroid)²/(G IT)."""
        source = 2 * self.nu / self.EI * (self.lines - self.centroid)
        tau0 = (self.E**2 / self.G * np.diff(self.lines)).sum() * self.depth**5 / 120 / self.EI**2
        own = 2 * self.nu / self.EI * self._moments(source)[1]
        return float(tau0) + own - (self.shear_centre() - self.centroid) ** 2 / self.torsion()


@dataclass(frozen=True)
class ConcentricFlexure:
    """A core of radius `core` and a sleeve to `outer` with moduli E = (core, sleeve), V = 1 along z; derived here.

    psi = (A r + B/r - b r³/4) sin(theta), b = 1/EI: laplace psi = -2 b z in both; the Poisson term gives
    tau_r = G sin (A - B/r² - (3 + 2 nu) b r²/4), tau_theta = G cos (A + B/r² - (1 - 2 nu) b r²/4).
    """

    core: float
    outer: float
    E: tuple[float, float]
    nu: float

    @property
    def G(self) -> tuple[float, float]:
        """Shear moduli of core and sleeve."""
        return self.E[0] / (2 * (1 + self.nu)), self.E[1] / (2 * (1 + self.nu))

    @property
    def EI(self) -> float:
        """Bending stiffness."""
        return np.pi / 4 * (self.E[0] * self.core**4 + self.E[1] * (self.outer**4 - self.core**4))

    def _coefficients(self) -> FloatArray:
        """A of the core, A and B of the sleeve."""
        c, R, (G1, G2) = self.core, self.outer, self.G
        free = (3 + 2 * self.nu) / (4 * self.EI)
        rows = [[c, -c, -1 / c], [G1, -G2, G2 / c**2], [0.0, 1.0, -1 / R**2]]
        return np.asarray(np.linalg.solve(rows, [0.0, (G1 - G2) * free * c**2, free * R**2]))

    def polar(self, r: FloatArray, sleeve: bool) -> tuple[FloatArray, FloatArray]:
        """tau_r/sin(theta) and tau_theta/cos(theta) at radii r of the core or the sleeve."""
        A1, A2, B2 = self._coefficients()
        A, B, G = (A2, B2, self.G[1]) if sleeve else (A1, 0.0, self.G[0])
        over = r**2 / (4 * self.EI)
        return G * (A - B / r**2 - (3 + 2 * self.nu) * over), G * (A + B / r**2 - (1 - 2 * self.nu) * over)

    def flexibility(self) -> float:
        """∫ tau . tau/G by Gauss in r (24 points a layer)."""
        x, weight = np.polynomial.legendre.leggauss(24)
        total = 0.0
        for low, high, sleeve in ((0.0, self.core, False), (self.core, self.outer, True)):
            r = (low + high) / 2 + x * (high - low) / 2
            radial, hoop = self.polar(r, sleeve)
            total += np.pi / self.G[sleeve] * (high - low) / 2 * float(weight @ (r * (radial**2 + hoop**2)))
        return float(total)


def core_share(core: float, outer: float, G: tuple[float, float]) -> float:
    """Share of the torque in the core: G1 c⁴/(G1 c⁴ + G2 (R⁴ - c⁴)); any text."""
    return G[0] * core**4 / (G[0] * core**4 + G[1] * (outer**4 - core**4))
