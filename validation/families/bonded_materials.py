"""Two materials of one Poisson's ratio: concentric, side by side and layered. Unequal ratios are left out: no exact solution
is known

for them within the theory, whose in-plane mismatch is neglected.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np

from xsec_fem.results import Result

from ..case import Case, Interval, Source, Tolerance
from ..closed_form.bonded import ConcentricFlexure, LayeredFlexure, SideBySide, core_share
from ..closed_form.composite import concentric_torsion, side_by_side_torsion
from ..reading import bounds, constant, stress
from ..section_text import section_text

GROUP = "two materials"
_COMPOUND = Source(
    "N. I. Muskhelishvili", "Some Basic Problems of the Mathematical Theory of Elasticity", "1953",
    "compound bars; the series was derived here",
)  # fmt: skip
_DERIVED = Source("derived here", "flexure of a bonded core and sleeve: r, 1/r and r³ times sin θ", "2026", "")
_TEXT = Source("any text on the strength of materials", "transformed section; torsion of concentric layers", "", "")
_ACCURACY = 1e-3
_CONSTANT = Tolerance(3e-6, "energies: at most the square of the 1e-3 asked for, and the outline of curved triangles")
_CENTRE = Tolerance(3e-6, "from energies, as above, times lengths of order 1", relative=False)
_STRESS = Tolerance(1e-3, "a stress at a point, on meshes asked for 1e-3 in energy")
_MOMENT = Tolerance(1e-12, "polynomials on straight triangles, exact but for round-off")


def shear_flexibility(result: Result) -> float:
    """Return F_zz of forces through the Trefftz shear centre."""
    return result.properties.shear_flexibility[1][1]


def shear_flexibility_bounds(result: Result) -> Interval:
    """Return the guaranteed interval of F_zz: that of Asz turned round."""
    low, high = bounds("Asz")(result)
    scale = shear_flexibility(result) * result.properties.Asz
    return scale / high, scale / low


def torsion_bounds(result: Result) -> Interval:
    """Return the guaranteed interval of G IT."""
    low, high = bounds("IT")(result)
    G = result.properties.GIT / result.properties.IT
    return G * low, G * high


def cases() -> list[Case]:
    """Return concentric, side by side and layered sections."""
    found = []
    for ratio in (0.1, 3.0, 10.0):
        found += _concentric(ratio)
    for ratio, nu in ((1.0, 0.0), (4.0, 0.0), (4.0, 0.3), (10.0, 0.3)):
        found += _side_by_side(ratio, nu)
    for nu in (0.0, 0.3, 0.5):
        found += _layers(nu)
    return found


@dataclass(frozen=True)
class _Family:
    """What the cases of one section share."""

    name: str
    title: str
    text: str
    quick: bool = False

    def case(
        self, quantity: str, read: Callable[[Result], float], reference: Callable[[], float] | float, tolerance: Tolerance,
        source: Source = _COMPOUND, **more: Any,
    ) -> Case:  # fmt: skip
        name = "".join(letter if letter.isalnum() or letter == "." else "-" for letter in quantity)
        return Case(
            f"two-materials.{self.name}.{name}", GROUP, self.title, quantity, (self.text,), read, reference, source, "computed",
            tolerance, quick=self.quick, **more,
        )  # fmt: skip


def _concentric(ratio: float) -> list[Case]:
    """Core of radius 1, sleeve to 2 of `ratio` times the modulus, nu = 0.3."""
    nu, core, outer = 0.3, 1.0, 2.0
    E = (2 * (1 + nu), 2 * (1 + nu) * ratio)  # G = 1 and ratio
    parts = [
        {"name": "core", "material": "core", "shape": "circle", "diameter": 2 * core},
        {"name": "sleeve", "material": "sleeve", "shape": "ring", "diameter": 2 * outer, "thickness": outer - core},
    ]
    materials = {name: {"E": modulus, "nu": nu} for name, modulus in zip(("core", "sleeve"), E, strict=True)}
    text = section_text(f"core and sleeve, ratio {ratio:g}", parts, materials=materials, solve={"accuracy": _ACCURACY})
    family = _Family(f"concentric{ratio:g}", f"core of radius 1, sleeve to 2 with {ratio:g} times its moduli, nu = 0.3", text,
                     quick=ratio == 3.0)  # fmt: skip
    exact = ConcentricFlexure(core, outer, E, nu)
    radii, G = np.array([0.0, core, outer]), np.array([1.0, ratio])
    share = core_share(core, outer, (1.0, ratio))

    def at_interface(sleeve: bool) -> float:
        return float(exact.polar(np.array([core]), sleeve)[1][0])  # at theta = 0: tau_xz = tau_theta

    found = [
        family.case("GIT", constant("GIT"), lambda: concentric_torsion(radii, G), _CONSTANT, _TEXT, unit="N mm²"),
        family.case("torque in the core", stress(0.5, 0.0, "tau", part="core", T=math.pi * core**4), share, _STRESS, _TEXT),
        family.case("shear flexibility", shear_flexibility, exact.flexibility, _CONSTANT, _DERIVED, unit="1/N"),
    ]  # fmt: skip
    for name, sleeve in (("core", False), ("sleeve", True)):
        read = stress(core, 0.0, "tau_xz", part=name, Vz=1.0)
        found.append(
            family.case(f"tau_xz at the joint, {name}", read, at_interface(sleeve), _STRESS, _DERIVED, unit="MPa")
        )
    return found


def _side_by_side(ratio: float, nu: float) -> list[Case]:
    """Two bonded rectangles 1 wide and 2 high, E = 1 on the left and `ratio` on the right."""
    parts = [
        {"name": "left", "material": "left", "shape": "rectangle", "width": 1.0, "height": 2.0, "at": [-0.5, 0.0]},
        {"name": "right", "material": "right", "shape": "rectangle", "width": 1.0, "height": 2.0, "at": [0.5, 0.0]},
    ]
    materials = {"left": {"E": 1.0, "nu": nu}, "right": {"E": ratio, "nu": nu}}
    title = f"two rectangles 1 x 2 side by side, E ratio {ratio:g}, nu = {nu:g}"
    text = section_text(title, parts, materials=materials, solve={"accuracy": _ACCURACY})
    family = _Family(f"beside{ratio:g}.nu{nu:g}", title, text, quick=(ratio, nu) == (4.0, 0.3))
    exact = SideBySide(np.array([-1.0, 0.0, 1.0]), np.array([1.0, ratio]), 2.0, nu)
    G = exact.G
    return [
        family.case("yc", constant("yc"), exact.centroid, Tolerance(1e-12, "round-off", relative=False), _TEXT, unit="mm"),
        family.case("EIyy", constant("EIyy"), exact.EI, _MOMENT, _TEXT, unit="N mm²"),
        family.case("GIT", constant("GIT"), lambda: side_by_side_torsion(1.0, 2.0, G[0], G[1]), _CONSTANT, unit="N mm²",
                    interval=torsion_bounds),
        family.case("shear centre, Trefftz", constant("ysc_trefftz"), exact.centroid, _CENTRE, unit="mm",
                    interval=bounds("ysc_trefftz")),
        family.case("shear centre, mean twist", constant("ysc"), exact.shear_centre, _CENTRE, unit="mm", interval=bounds("ysc")),
        family.case("shear flexibility", shear_flexibility, exact.flexibility, _CONSTANT, unit="1/N",
                    interval=shear_flexibility_bounds),
    ]  # fmt: skip


def _layers(nu: float) -> list[Case]:
    """Width 2; lower layer 1 high with E = 1, upper layer 0.5 high with E = 10."""
    parts = [
        {"name": "lower", "material": "lower", "shape": "rectangle", "width": 2.0, "height": 1.0, "at": [0.0, 0.5]},
        {"name": "upper", "material": "upper", "shape": "rectangle", "width": 2.0, "height": 0.5, "at": [0.0, 1.25]},
    ]
    materials = {"lower": {"E": 1.0, "nu": nu}, "upper": {"E": 10.0, "nu": nu}}
    title = f"layers 2 x 1 (E = 1) and 2 x 0.5 (E = 10), nu = {nu:g}"
    text = section_text(title, parts, materials=materials, solve={"accuracy": _ACCURACY})
    family = _Family(f"layers.nu{nu:g}", title, text, quick=nu == 0.3)
    exact = LayeredFlexure(np.array([0.0, 1.0, 1.5]), np.array([1.0, 10.0]), 2.0, nu)
    z = exact.centroid
    found = [
        # over the modulus of the part with the larger EA, the upper one
        family.case("A", constant("A"), (2.0 * 1.0 + 1.0 * 10.0) / 10.0, _MOMENT, _TEXT, unit="mm²"),
        family.case("zc", constant("zc"), z, _MOMENT, _TEXT, unit="mm"),
        family.case("EIyy", constant("EIyy"), exact.EI, _MOMENT, _TEXT, unit="N mm²"),
        family.case("shear flexibility", shear_flexibility, exact.flexibility, _CONSTANT, unit="1/N",
                    interval=shear_flexibility_bounds),
        family.case("sigma_x below the joint", stress(0.0, 1.0, "sigma_x", part="lower", My=1.0), (1.0 - z) / exact.EI,
                    _MOMENT, _TEXT, unit="MPa"),
        family.case("sigma_x above the joint", stress(0.0, 1.0, "sigma_x", part="upper", My=1.0), 10 * (1.0 - z) / exact.EI,
                    _MOMENT, _TEXT, unit="MPa"),
    ]  # fmt: skip
    for name, y, height, part in (
        ("centre at zc", 0.0, z, "upper"), ("edge at zc", 1.0, z, "upper"), ("centre of the lower layer", 0.0, 0.5, "lower"),
        ("edge of the lower layer", 1.0, 0.5, "lower"),
    ):  # fmt: skip
        read = stress(y, height, "tau_xz", part=part, Vz=1.0)
        reference = exact.stress(y, height)[1]
        found.append(family.case(f"tau_xz, {name}", read, reference, _STRESS, unit="MPa"))
    return found
