"""What section tables are computed from: plates and fillets for A and I, Bredt and strips for J, flanges as lines for Cw.

A. A. El Darwish, B. G. Johnston, Torsion of structural shapes, J. Struct. Div. ASCE 91 (ST1), 1965, for the size of a junction's
inscribed circle; the rest any text, from memory. Used here to tell how far a table's value may be from the exact one, and why.
"""

from __future__ import annotations

from collections.abc import Mapping
from math import pi

Dimensions = Mapping[str, float]


def i_moments(d: Dimensions) -> dict[str, float]:
    """A, Iy, Iz, It, Iw of an I of h, b, tw, tf, r; fillets in A and Iy, none in the others."""
    h, b, tw, tf, r = (d[key] for key in ("h", "b", "tw", "tf", "r"))
    web, fillets = h - 2 * tf, (4 - pi) * r**2
    A = 2 * b * tf + web * tw + fillets
    Iy = b * h**3 / 12 - (b - tw) * web**3 / 12 + fillets * (web / 2 - 0.22 * r) ** 2
    Iz = (2 * tf * b**3 + web * tw**3) / 12
    return {"A": A, "Iy": Iy, "Iz": Iz, "It": (2 * b * tf**3 + web * tw**3) / 3, "Iw": Iz * (h - tf) ** 2 / 4}


def tee_moments(d: Dimensions) -> dict[str, float]:
    """A, y (centroid from the flange's face), Ix, Iy, J of a tee of d, bf, tw, tf, without fillets."""
    depth, b, tw, tf = (d[key] for key in ("d", "bf", "tw", "tf"))
    stem = depth - tf
    A = b * tf + stem * tw
    y = (b * tf**2 / 2 + stem * tw * (tf + stem / 2)) / A
    Ix = b * tf**3 / 12 + b * tf * (y - tf / 2) ** 2 + tw * stem**3 / 12 + stem * tw * (tf + stem / 2 - y) ** 2
    return {"A": A, "y": y, "Ix": Ix, "Iy": (tf * b**3 + stem * tw**3) / 12, "J": (b * tf**3 + stem * tw**3) / 3}


def tube_moments(d: Dimensions) -> dict[str, float]:
    """A, Iy, Iz and Bredt's It of a rectangular tube of h, b, t, by its mid-lines and sharp corners."""
    h, b, t = d["h"] - d["t"], d["b"] - d["t"], d["t"]
    return {
        "A": 2 * (h + b) * t,
        "Iy": t * h**3 / 6 + b * t * h**2 / 2,
        "Iz": t * b**3 / 6 + h * t * b**2 / 2,
        "It": 2 * t * (h * b) ** 2 / (h + b),
    }


def open_share(d: Dimensions) -> float:
    """What Bredt's formula leaves out of a tube: t³/3 of its walls, over its own value."""
    h, b, t = d["h"] - d["t"], d["b"] - d["t"], d["t"]
    return 2 * (h + b) * t**3 / 3 / tube_moments(d)["It"]


def junction_share(d: Dimensions) -> float:
    """How much of Iw = Iz (h - tf)²/4 the thick junction of flange and web may take away.

    The junction, tw + 2 r wide with an inscribed circle of diameter D, turns about its own centre, (D - tf)/2 below the flange's
    mid-line: omega of the outstand is less by (tw/2 + r)(D - tf)/2 than b/2 (h - tf)/2 at its tip; three times that in ∫omega².
    """
    h, b, tw, tf, r = (d[key] for key in ("h", "b", "tw", "tf", "r"))
    D = ((tf + r) ** 2 + tw * (r + tw / 4)) / (2 * r + tf)
    return 3 * (tw / 2 + r) * (D - tf) / 2 / (b / 2 * (h - tf) / 2)


def channel_table(d: Dimensions) -> tuple[float, float]:
    """(eo from the outer face of the web, Cw) of a channel of d, bf, tw, tf with flanges of one thickness, as lines."""
    h, b = d["d"] - d["tf"], d["bf"] - d["tw"] / 2
    tf, tw = d["tf"], d["tw"]
    e = 3 * b**2 * tf / (h * tw + 6 * b * tf)
    return e - tw / 2, tf * b**3 * h**2 / 12 * (3 * b * tf + 2 * h * tw) / (6 * b * tf + h * tw)
