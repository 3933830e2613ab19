"""Sections made so that the field is elementary at one Poisson's ratio: Grashof's shapes, the equilateral triangle.

The curved sides are drawn as arcs, each through three of their points.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from xsec_fem.results import Result

from ..case import Case, Tolerance
from ..closed_form.flexure import equilateral_triangle_flexure, hyperbola_shape, power_shape
from ..closed_form.series import FloatArray
from ..reading import constant, shear_coefficient, shear_coefficient_bounds, stress
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GOODIER, at
from ..tolerances import SOLVE, energy, point_stress

GROUP = "shapes made for one Poisson's ratio"
OTHER_SECTIONS = at(TIMOSHENKO_GOODIER, "bending of bars, other cross sections (after Grashof); constants derived here")
TRIANGLE = at(TIMOSHENKO_GOODIER, "bending of bars, equilateral triangle at nu = 1/2; this form derived here")
POWERS = (0.25, 0.3, 0.4)  # nu of |y| = (1 - z²)^nu; 1/2 is the circle
HYPERBOLAS = (0.25, 0.5)
_ARCS = 48  # a side
DRAWN = Tolerance(
    2e-6,
    f"{_ARCS} arcs a side through three points each: with half as many, area and second moment are off by up to 4e-6, and the "
    "error falls at least as the third power",
)
POINTS = ((0.0, 0.0), (0.5, 0.3), (0.2, -0.6))


def cases() -> list[Case]:
    """Return the cases of this family."""
    found = [case for nu in POWERS for case in _power(nu)]
    found += [case for nu in HYPERBOLAS for case in _hyperbola(nu)]
    return found + _triangle()


def _power(nu: float) -> list[Case]:
    area, I = power_shape(nu)  # noqa: E741 (the symbol of the books)
    angle = np.linspace(-np.pi / 2, np.pi / 2, 200_001)
    z = np.sin(angle)
    right = _even_points(np.maximum(1 - z**2, 0.0) ** nu, z)
    heights = np.concatenate([right[:, 1], right[-2::-1, 1]])
    widths = np.maximum(1 - heights**2, 0.0) ** nu * np.where(np.arange(len(heights)) < len(right), 1.0, -1.0)
    part = {"shape": "outline", "start": [0.0, -1.0], "steps": _arcs(widths, heights)}
    sections = (section_text("Grashof's shape", [part], nu=nu, solve=SOLVE),)

    def field(y: float, z: float) -> tuple[float, float]:
        return -nu * y * z / ((1 + nu) * I), (1 - z**2) / (2 * (1 + nu) * I)

    return _cases(f"power.nu{nu:g}", f"|y| = (1 - z²)^nu at nu {nu:g}", sections, (area, I), field, quick=nu == 0.3)


def _hyperbola(nu: float) -> list[Case]:
    area, I = hyperbola_shape(nu)  # noqa: E741
    g = nu / (1 + nu)
    y = np.linspace(1, -1, 2 * _ARCS + 1)
    top = np.sqrt(1 + g * y**2)
    down, up = {"to": [-1.0, -float(top[-1])]}, {"to": [1.0, float(top[0])]}
    steps = [*_arcs(y, top), down, *_arcs(-y, -top), up]
    part = {"shape": "outline", "start": [1.0, float(top[0])], "steps": steps}
    sections = (section_text("hyperbola-capped", [part], nu=nu, solve=SOLVE),)

    def field(y: float, z: float) -> tuple[float, float]:
        return 0.0, (1 + g * y**2 - z**2) / (2 * I)

    title = f"|y| <= 1, z² <= 1 + nu/(1 + nu) y² at nu {nu:g}"
    return _cases(f"hyperbola.nu{nu:g}", title, sections, (area, I), field, quick=nu == 0.25)


def _cases(
    name: str, title: str, sections: tuple[str, ...], exact: tuple[float, float],
    field: Callable[[float, float], tuple[float, float]], *, quick: bool,
) -> list[Case]:  # fmt: skip
    area = exact[0]
    found = [
        Case(
            f"{name}.{key}", GROUP, title, key, sections, constant(key), value, OTHER_SECTIONS, "computed", DRAWN, unit,
            quick=quick,
        )
        for key, value, unit in (("A", exact[0], "mm²"), ("Iyy", exact[1], "mm⁴"))
    ]  # fmt: skip
    for y, z in POINTS:
        for number, component in enumerate(("tau_xy", "tau_xz")):
            if (y, z) == (0.0, 0.0) and component == "tau_xy":
                continue
            found.append(
                Case(
                    f"{name}.{component}({y:g}, {z:g})", GROUP, title, f"{component} A/V at ({y:g}, {z:g})", sections,
                    stress(y, z, component, scale=area, Vz=1.0), area * field(y, z)[number], OTHER_SECTIONS, "computed",
                    point_stress(), quick=quick,
                )
            )  # fmt: skip
    return found


def _even_points(y: FloatArray, z: FloatArray) -> FloatArray:
    """(2 _ARCS + 1, 2) points of a finely sampled curve, as far apart as each other along it."""
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(y), np.diff(z)))])
    places = np.linspace(0, length[-1], 2 * _ARCS + 1)
    return np.column_stack([np.interp(places, length, y), np.interp(places, length, z)])


def _arcs(y: FloatArray, z: FloatArray) -> list[Table]:
    """Steps of an outline through points 1, 2, 3, ... of a curve: an arc from each even one to the next through the one between."""
    points = np.column_stack([y, z]).tolist()
    return [{"to": points[k + 2], "through": points[k + 1]} for k in range(0, len(points) - 2, 2)]


def _triangle() -> list[Case]:
    corner = float(np.sqrt(3))
    part: Table = {"shape": "polygon", "points": [[-corner, -1], [corner, -1], [0, 2]], "anchor": "origin"}
    sections = (section_text("triangle", [part], nu=0.5, solve=SOLVE),)
    title, area = "equilateral triangle, altitude 3, nu 0.5", 3 * corner

    def largest(result: Result) -> float:
        fractions = np.linspace(0.05, 0.95, 7)
        y, z = (grid.ravel() for grid in np.meshgrid(corner * (2 * fractions - 1), 3 * fractions - 1))
        inside = np.abs(y) < (2 - z) / corner
        exact = equilateral_triangle_flexure(y[inside], z[inside], 1)
        places = zip(y[inside], z[inside], strict=True)
        ours = [[stress(float(a), float(b), c, Vz=1.0)(result) for c in ("tau_xy", "tau_xz")] for a, b in places]
        return area * float(np.abs(np.array(ours) - exact).max())

    return [
        Case(
            "triangle.nu0.5.coefficient", GROUP, title, "Asz/A", sections, shear_coefficient("Asz"), 0.75, TRIANGLE,
            "computed", energy(), interval=shear_coefficient_bounds("Asz"), quick=True,
        ),
        Case(
            "triangle.nu0.5.field", GROUP, title, "largest |tau - exact| A/V inside", sections, largest, 0.0, TRIANGLE,
            "computed", point_stress(), quick=True,
        ),
    ]  # fmt: skip
