"""Values without a closed form, computed beforehand by methods independent of finite elements.

POLYGONS: rational least-squares ("lightning") solutions of the Laplace problems (method: A. Gopal, L. N. Trefethen, SIAM J.
Numer. Anal. 57, 2019, cited from memory), quantities by graded Gauss quadrature, as many digits as the residual allows.
RING_SECTORS: series in r^m and r^-m, derived from T&G's sector series. `trefftz` and `mean_twist` are (y, z) from the centroid,
`A_flexibility` is A ∫ tau_i . tau_j of forces through the Trefftz shear centre.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class PolygonValues:
    """Constants of a polygon at G = 1; nu-dependent ones at nu = 0.3. `digits` is the relative accuracy stated with them."""

    IT: float
    Iw: float
    trefftz: tuple[float, float]
    mean_twist: tuple[float, float]
    A_flexibility_nu0: tuple[float, float, float]  # yy, zz, yz
    A_flexibility: tuple[float, float, float]
    digits: float


POLYGONS = {
    # right isosceles triangle (0,0), (1,0), (0,1); boundary residual 4.1e-14, IT against its energy 1.9e-10
    "right triangle": PolygonValues(
        0.02608965171, 0.0001185840539, (-0.03333333333, -0.03333333333), (-0.03433916568, -0.03433916568),
        (1.371428571, 1.371428571, 0.1714285714), (1.385567411, 1.385567411, 0.1846777283), 1e-9,
    ),
    # regular hexagon of side 1; residual 3.5e-14, IT against its energy 5.2e-10
    "hexagon": PolygonValues(
        1.035458949, 0.000340178709, (0.0, 0.0), (0.0, 0.0),
        (1.173674729, 1.173674729, 0.0), (1.18209644, 1.18209644, 0.0), 2e-9,
    ),
    # equal angle 100x100x10, heel at the origin, sharp corner; residual 1.1e-8, IT against its energy 5.8e-8
    "angle": PolygonValues(
        61957.405, 46721167.0, (-23.388224, -23.388224), (-23.390609, -23.390609),
        (2.2954637, 2.2954637, 0.012046781), (2.2975189, 2.2975189, 0.014033692), 1e-7,
    ),
    # channel, depth 100, width 50, thickness 20; residual 1.0e-9, IT against its energy 2.4e-8
    "channel": PolygonValues(
        416042.68, 742388500.0, (-20.857749, 0.0), (-20.881265, 0.0),
        (2.0624139, 2.0006912, 0.0), (2.1091949, 2.0008429, 0.0), 1e-7,
    ),
    # square tube 100x100x10, sharp corners; residual 5.0e-9, IT against its energy 1.5e-8
    "box": PolygonValues(
        7709340.9, 23604881.0, (0.0, 0.0), (0.0, 0.0),
        (2.2531975, 2.2531975, 0.0), (2.2535286, 2.2535286, 0.0), 1e-7,
    ),
}  # fmt: skip


@dataclass(frozen=True)
class RingSectorValues:
    """Sector of a ring of outer radius 1, symmetric about +y: IT, and shear centre y = trefftz + nu/(1+nu) slope."""

    inner: float
    opening_deg: float
    IT: float
    trefftz: float
    slope: float


RING_SECTORS = {
    "slit tube, t/R = 0.05": RingSectorValues(0.95, 360.0, 0.00025395237511, 1.9487186261, 4.3932996784e-06),
    "half tube": RingSectorValues(0.5, 180.0, 0.085453381214, 0.86580289042, 0.0047822221366),
    "thin half tube": RingSectorValues(0.98, 180.0, 8.2602469501e-06, 1.2603785602, 3.4222495253e-07),
}
