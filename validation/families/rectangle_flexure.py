"""Rectangles under shear: the stress at centre, edge and along both axes, and the energy shear coefficient, in nu and aspect.

Our shear areas are those of the energy, V²/(2 G As) = ∫tau²/(2G); the coefficient of the mean displacement (G. R. Cowper 1966)
is another one.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from xsec_fem.results import Result

from ..case import Case
from ..closed_form.flexure import rectangle_flexure, rectangle_shear_coefficient
from ..reading import shear_coefficient, shear_coefficient_bounds, stress
from ..section_text import section_text
from ..sources import GRUTTMANN_WAGNER, TIMOSHENKO_GOODIER, at
from ..tolerances import SOLVE, energy, point_stress

STRESS_GROUP, COEFFICIENT_GROUP = "rectangle, shear stress", "rectangle, energy shear coefficient"
SERIES = at(TIMOSHENKO_GOODIER, "bending of bars, rectangular section, series")
# depth along the load over width, nu
SECTIONS = (
    (4.0, 0.3), (2.0, 0.25), (2.0, 0.5), (1.0, 0.0), (1.0, 0.25), (1.0, 0.3), (1.0, 0.5),
    (0.5, 0.25), (0.5, 0.5), (0.25, 0.25), (0.25, 0.3), (0.1, 0.3), (0.1, 0.5),
)  # fmt: skip
ALONG_AXES = ((2.0, 0.25), (1.0, 0.3), (0.25, 0.3))
_POINTS = np.linspace(-0.95, 0.95, 20)  # of the half side: none at the centre, which is a case of its own


def cases() -> list[Case]:
    """Return the cases of this family."""
    found = [case for depth, nu in SECTIONS for case in _centre_edge_coefficient(depth, nu)]
    return found + [case for depth, nu in ALONG_AXES for case in _along_axes(depth, nu)]


def text(depth: float, nu: float) -> str:
    """Return the section file of a rectangle of width 1."""
    return section_text("rectangle", [{"shape": "rectangle", "width": 1, "height": depth}], nu=nu, solve=SOLVE)


def _centre_edge_coefficient(depth: float, nu: float) -> list[Case]:
    name, title = f"rectangle.{depth:g}.nu{nu:g}", f"depth/width {depth:g}, nu {nu:g}"
    quick = (depth, nu) in ALONG_AXES

    def series(y: float) -> Callable[[], float]:
        return lambda: depth * float(rectangle_flexure(np.array(y), np.array(0.0), 1, depth, nu / (1 + nu))[1])

    points = (("centre", 0.0), ("middle of the side", 0.5))
    found = [
        Case(
            f"{name}.{place.split()[0]}", STRESS_GROUP, title, f"tau_xz A/V, {place}", (text(depth, nu),),
            stress(y, 0, "tau_xz", Vz=1.0, scale=depth), series(y), SERIES, "computed", point_stress(), quick=quick,
        )
        for place, y in points
    ]  # fmt: skip
    coefficient = Case(
        f"{name}.coefficient", COEFFICIENT_GROUP, title, "Asz/A", (text(depth, nu),), shear_coefficient("Asz"),
        lambda: rectangle_shear_coefficient(1, depth, nu), at(GRUTTMANN_WAGNER, "table 1; series derived again"),
        "computed", energy(), interval=shear_coefficient_bounds("Asz"), quick=quick,
    )  # fmt: skip
    return [*found, coefficient]


def _along_axes(depth: float, nu: float) -> list[Case]:
    def largest(y: np.ndarray, z: np.ndarray) -> Callable[[Result], float]:
        def read(result: Result) -> float:
            exact = rectangle_flexure(y, z, 1, depth, nu / (1 + nu))
            ours = [
                [stress(float(a), float(b), component, Vz=1.0)(result) for component in ("tau_xy", "tau_xz")]
                for a, b in zip(y, z, strict=True)
            ]
            return depth * float(np.abs(np.array(ours) - exact).max())

        return read

    zero = np.zeros(len(_POINTS))
    lines = {"y": (_POINTS / 2, zero), "z": (zero, _POINTS * depth / 2), "diagonal": (_POINTS / 2, _POINTS * depth / 2)}
    return [
        Case(
            f"rectangle.{depth:g}.nu{nu:g}.along {axis}", STRESS_GROUP, f"depth/width {depth:g}, nu {nu:g}",
            f"largest |tau - series| A/V on 20 points, {axis}", (text(depth, nu),), largest(*line), 0.0, SERIES,
            "computed", point_stress(), quick=True,
        )
        for axis, line in lines.items()
    ]  # fmt: skip
