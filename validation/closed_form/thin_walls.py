"""Limits of open thin walls, in mid-line dimensions: shear centres, warping and torsion constants as t -> 0.

S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd ed. 1961, appendix (table of e and warping constants), and V. Z.
Vlasov, Thin-walled elastic beams, 1961, from memory; the arc was derived again here.
"""

from __future__ import annotations

import numpy as np


def channel(depth: float, width: float, thickness: float) -> tuple[float, float, float]:
    """(e, IT, Iw) of a channel of one thickness: e = 3 b²/(6 b + h) outward from the web's mid-line, h and b mid-line dimensions.

    Iw = t b³ h² (3 b + 2 h)/(12 (6 b + h)), IT = (2 b + h) t³/3.
    """
    h, b, t = depth, width, thickness
    return 3 * b**2 / (6 * b + h), (2 * b + h) * t**3 / 3, t * b**3 * h**2 / 12 * (3 * b + 2 * h) / (6 * b + h)


def i_section(depth: float, width: float, thickness: float) -> tuple[float, float]:
    """(IT, Iw) of a doubly symmetric I of one thickness: (2 b + h) t³/3 and t b³ h²/24 (flanges only)."""
    h, b, t = depth, width, thickness
    return (2 * b + h) * t**3 / 3, t * b**3 * h**2 / 24


def arc(radius: float, half_angle: float, thickness: float) -> tuple[float, float, float]:
    """(e, IT, Iw) of a circular arc of mid-radius R and half opening alpha [rad]; e from the centre, on the arc's side.

    e = 2 R (sin a - a cos a)/(a - sin a cos a), 2 R for a slit tube; IT = 2 a R t³/3;
    Iw = 2 t R⁵/3 (a³ - 6 (sin a - a cos a)²/(a - sin a cos a)).
    """
    a, R, t = half_angle, radius, thickness
    s, c = np.sin(a), np.cos(a)
    e = 2 * R * (s - a * c) / (a - s * c)
    Iw = 2 * t * R**5 / 3 * (a**3 - 6 * (s - a * c) ** 2 / (a - s * c))
    return float(e), float(2 * a * R * t**3 / 3), float(Iw)


def end_loss() -> float:
    """What the ends of a narrow strip take from its length in IT, over t: 192/pi⁵ sum 1/n⁵, n odd (0.630); Saint-Venant."""
    n = np.arange(1, 200, 2)
    return float(192 / np.pi**5 * (1.0 / n**5).sum())
