"""Torsion of an angle with a rounded re-entrant corner: the largest stress in the fillet, and how it grows as the radius falls.

Equal legs of thickness t = 1 and length 5, root radius r. The peaks are known from a method of its own; there is no formula.
"""

from __future__ import annotations

from math import log2

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..section_text import section_text, twist

GROUP = "torsion of fillets"
PEAKS = {  # r/t: tau_max/(G twist t)
    0.05: 2.6855762, 0.125: 2.0402123, 0.2: 1.8035602, 0.3: 1.6497886, 0.4: 1.5700665, 0.75: 1.4893241, 1.0: 1.5011138,
    1.5: 1.5806541,
}  # fmt: skip
_SOURCE = Source(
    "computed by rational least squares (method of A. Gopal, L. N. Trefethen), boundary residual 1.5e-8 or less", "", "2019",
    "no published value that agrees; J. H. Huth, Torsional stress concentration in angle and square tube fillets, 1950, treats it",
)  # fmt: skip
_ACCURACY = 1e-3
_PEAK = Tolerance(
    3e-4,
    "a boundary stress, on meshes asked for 1e-3 in energy; a fillet is an arc of interpolated triangles, good to about 1e-4",
)


def angle(r: float) -> str:
    """Return the section file of the angle with root radius r."""
    part = {"shape": "angle", "depth": 5.0, "width": 5.0, "thickness": 1.0, "root_radius": r}
    return section_text(f"angle 5 x 5 x 1, r = {r:g}", [part], actions=[twist()], solve={"accuracy": _ACCURACY})


def peak(result: Result) -> float:
    """Return tau_max/(G twist t): the largest stress of T = 1, times IT."""
    return result.cases[0].tau_max.value * result.properties.IT


def cases() -> list[Case]:
    """Return the peaks for eight radii, and the exponent for small ones."""
    found = [
        Case(
            f"fillet.angle.r{r:g}.peak", GROUP, f"angle 5t x 5t, r/t = {r:g}", "largest tau/(G θ t)", (angle(r),), peak, value,
            _SOURCE, "computed", _PEAK, quick=r in (0.125, 1.0),
        )
        for r, value in PEAKS.items()
    ]  # fmt: skip
    return [*found, _exponent()]


def _exponent() -> Case:
    """As r -> 0 the peak is that of a sharp corner at a distance of order r: tau ~ r^(pi/w - 1), w = 270 deg."""
    small, smaller = 0.01, 0.005
    return Case(
        "fillet.angle.exponent", GROUP, f"angle, r/t = {small:g} and {smaller:g}", "exponent of the peak in r",
        (angle(small), angle(smaller)), lambda a, b: log2(peak(a) / peak(b)), -1 / 3,
        Source("M. L. Williams", "Stress singularities in angular corners, J. Appl. Mech. 19", "1952", "antiplane form pi/w - 1"),
        "computed",
        Tolerance(0.03, "the next term of the corner's field is smaller by (r/t)^(2/3), 0.046 here, of which one step sees 0.6",
                  relative=False),
    )  # fmt: skip
