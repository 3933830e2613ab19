"""Exponents of antiplane corners with free sides: u ~ r^lambda, stress ~ r^(lambda - 1).

After M. L. Williams, Stress singularities resulting from various boundary conditions in angular corners of plates in
extension, J. Appl. Mech. 19, 1952; antiplane: harmonic r^lambda cos(lambda theta), derived here.
"""

from __future__ import annotations

from math import atan, cos, pi, radians, sin, sqrt

from scipy.optimize import brentq


def wedge(angle_deg: float) -> float:
    """pi/w - 1 of one material."""
    return 180.0 / angle_deg - 1.0


def half_and_quarter(ratio: float) -> float:
    """A half plane of G1 and a quarter plane of G2 = ratio G1: lambda = (2/pi) atan sqrt(1 + 2 G1/G2)."""
    return 2 / pi * atan(sqrt(1 + 2 / ratio)) - 1.0


def two_sectors(first_deg: float, second_deg: float, ratio: float) -> float:
    """Sectors a, b with G2 = ratio G1: the smallest root of G1 tan(lambda a) + G2 tan(lambda b) = 0, less 1."""
    a, b = radians(first_deg), radians(second_deg)

    def equation(lam: float) -> float:  # times both cosines: without poles
        return sin(lam * a) * cos(lam * b) + ratio * sin(lam * b) * cos(lam * a)

    low = 1e-6
    step = 1e-3
    while equation(low) * equation(low + step) > 0:
        low += step
    return float(brentq(equation, low, low + step, xtol=1e-15)) - 1.0
