"""Torsion of solid and hollow bars with closed solutions: IT, the stress where it is largest, and the warping constant."""

from __future__ import annotations

from functools import partial

import numpy as np

from ..case import Case, Source
from ..closed_form import torsion as exact
from ..closed_form.torsion import eccentric_tube_torsion_constant, semicircle_torsion_constant
from ..reading import Read, bounds, constant, stress
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GOODIER, at
from ..tolerances import SOLVE, curved, energy, notch, point_stress, warping

GROUP, STRESS_GROUP, WARPING_GROUP = "torsion constant", "torsion, shear stress", "warping constant, solid sections"
RECTANGLES = (1.0, 1.2, 1.5, 2.0, 2.5, 4.0, 5.0, 10.0, 100.0)  # longer side over shorter
BARS = at(TIMOSHENKO_GOODIER, "torsion of rectangular bars, table of k, k1, k2 (series)")
SAINT_VENANT = at(TIMOSHENKO_GOODIER, "torsion of elliptic bars (after Saint-Venant)")
WEBER = at(TIMOSHENKO_GOODIER, "torsion, shaft with a circular groove (after C. Weber)")
MACDONALD = Source(
    "H. M. Macdonald", "On the torsional strength of a hollow shaft, Proc. Camb. Phil. Soc. 8", "1893", "derived again"
)


def cases() -> list[Case]:
    """Return the cases of this family."""
    return [*_rectangles(), *_ellipses(), *_triangle(), *_semicircle(), *_eccentric_tubes(), *_grooved_shafts()]


def twist_stress(y: float, z: float, component: str) -> Read:
    """Return a reader of tau/(G twist), which is the stress under T = IT [mm]."""
    return lambda result: stress(y, z, component, T=result.properties.IT)(result)


def _rectangles() -> list[Case]:
    found = []
    for ratio in RECTANGLES:
        sections = (section_text("bar", [{"shape": "rectangle", "width": 1, "height": ratio}], solve=SOLVE),)
        name, title, quick = (
            f"torsion.rectangle.{ratio:g}",
            f"rectangle, sides 1 and {ratio:g}",
            ratio in (1.0, 2.0, 10.0),
        )
        found += [
            Case(
                f"{name}.IT", GROUP, title, "IT", sections, constant("IT"),
                partial(exact.rectangle_torsion_constant, 1, ratio), BARS, "computed", energy(), "mm⁴", bounds("IT"),
                quick=quick,
            ),
            Case(
                f"{name}.long side", STRESS_GROUP, title, "tau/(G twist), middle of the longer side", sections,
                twist_stress(0.5, 0, "tau_xz"), partial(exact.rectangle_torsion_largest, 1, ratio), BARS, "computed",
                point_stress(), "mm", quick=quick,
            ),
            Case(
                f"{name}.short side", STRESS_GROUP, title, "tau/(G twist), middle of the shorter side", sections,
                twist_stress(0, -ratio / 2, "tau_xy"), partial(exact.rectangle_torsion_shorter, 1, ratio), BARS,
                "computed", point_stress(), "mm", quick=quick,
            ),
        ]  # fmt: skip
        if ratio < 100:  # the series of the warping needs more terms than it has there
            found.append(
                Case(
                    f"{name}.Iw", WARPING_GROUP, title, "Iw", sections, constant("Iw"),
                    partial(exact.rectangle_warping_constant, ratio, 1), at(TIMOSHENKO_GOODIER, "warping series, squared"),
                    "computed", warping(), "mm⁶", quick=quick,
                )
            )  # fmt: skip
    return found


def _ellipses() -> list[Case]:
    found = []
    for a in (1.0, 1.5, 2.0, 4.0):
        sections = (section_text("bar", [{"shape": "ellipse", "width": 2 * a, "height": 2}], solve=SOLVE),)
        name, title = f"torsion.ellipse.{a:g}", f"ellipse, half axes {a:g} and 1"
        IT, Iw = exact.ellipse_torsion(a, 1)
        found += [
            _constant(name, title, sections, IT, SAINT_VENANT, quick=a == 1.5),
            Case(
                f"{name}.stress", STRESS_GROUP, title, "tau/(G twist), end of the minor axis", sections,
                twist_stress(0, -1, "tau_xy"), 2 * IT / (np.pi * a), SAINT_VENANT, "computed", point_stress(a), "mm",
            ),
        ]  # fmt: skip
        if Iw:
            found.append(
                Case(
                    f"{name}.Iw",
                    WARPING_GROUP,
                    title,
                    "Iw",
                    sections,
                    constant("Iw"),
                    Iw,
                    SAINT_VENANT,
                    "computed",
                    curved(),
                    "mm⁶",
                )
            )
    for a, ratio in ((2.0, 0.5), (1.5, 0.8)):
        hole: Table = {"shape": "ellipse", "width": 2 * a * ratio, "height": 2 * ratio}
        part: Table = {"shape": "ellipse", "width": 2 * a, "height": 2, "holes": [hole]}
        title = f"hollow ellipse, half axes {a:g} and 1, hole {ratio:g} times as large"
        found.append(
            _constant(
                f"torsion.hollow ellipse.{ratio:g}", title, (section_text("tube", [part], solve=SOLVE),),
                exact.hollow_ellipse_torsion_constant(a, 1, ratio), at(TIMOSHENKO_GOODIER, "torsion of hollow shafts"),
            )
        )  # fmt: skip
    return found


def _constant(
    name: str, title: str, sections: tuple[str, ...], IT: float, source: Source, *, quick: bool = False
) -> Case:
    return Case(
        f"{name}.IT",
        GROUP,
        title,
        "IT",
        sections,
        constant("IT"),
        IT,
        source,
        "computed",
        curved(),
        "mm⁴",
        bounds("IT"),
        quick=quick,
    )


def _triangle() -> list[Case]:
    side = 2.0
    height = side * np.sqrt(3) / 2
    part: Table = {"shape": "polygon", "points": [[-side / 2, 0], [side / 2, 0], [0, height]], "anchor": "origin"}
    sections = (section_text("bar", [part], solve=SOLVE),)
    IT, largest = exact.equilateral_triangle_torsion(side)
    source = at(TIMOSHENKO_GOODIER, "torsion of a bar of triangular section (after Saint-Venant)")
    title = f"equilateral triangle, side {side:g}"
    return [
        Case(
            "torsion.triangle.IT", GROUP, title, "IT", sections, constant("IT"), IT, source, "computed", energy(), "mm⁴",
            bounds("IT"), quick=True,
        ),
        Case(
            "torsion.triangle.stress", STRESS_GROUP, title, "tau/(G twist), middle of a side", sections,
            twist_stress(0, 0, "tau_xy"), largest, source, "computed", point_stress(side), "mm", quick=True,
        ),
    ]  # fmt: skip


def _semicircle() -> list[Case]:
    part: Table = {"shape": "sector", "radius": 1, "from_deg": -90, "to_deg": 90}
    sections = (section_text("bar", [part], solve=SOLVE),)
    source = at(TIMOSHENKO_GOODIER, "torsion of sectors: 0.298 and 0.849; closed form derived here")
    return [
        _constant("torsion.semicircle", "semicircle, radius 1", sections, semicircle_torsion_constant(1), source, quick=True),
        Case(
            "torsion.semicircle.stress", STRESS_GROUP, "semicircle, radius 1", "tau/(G twist), middle of the diameter",
            sections, twist_stress(0, 0, "tau"), 8 / (3 * np.pi), source, "computed", point_stress(), "mm", quick=True,
        ),
    ]  # fmt: skip


def _eccentric_tubes() -> list[Case]:
    found = []
    for inner, offset in ((0.5, 0.1), (0.5, 0.3), (0.6, 0.35), (0.2, 0.7)):
        hole: Table = {"shape": "circle", "diameter": 2 * inner, "at": [offset, 0]}
        part: Table = {"shape": "circle", "diameter": 2, "holes": [hole]}
        found.append(
            _constant(
                f"torsion.eccentric tube.{inner:g}.{offset:g}", f"circle of radius 1, hole of radius {inner:g} off by {offset:g}",
                (section_text("tube", [part], solve=SOLVE),), eccentric_tube_torsion_constant(inner, offset), MACDONALD,
                quick=offset == 0.3,
            )
        )  # fmt: skip
    return found


def _grooved_shafts() -> list[Case]:
    found = []
    for groove in (0.1, 0.3, 1.0):
        half = np.arccos(groove / 2)  # seen from the groove's centre (0, -1), from the shaft's axis
        tip = (groove * np.sin(half), -1 + groove * np.cos(half))
        steps = [
            {"to": [-tip[0], tip[1]], "through": [0.0, 1.0]},
            {"to": [tip[0], tip[1]], "through": [0.0, -1 + groove]},
        ]
        part: Table = {"shape": "outline", "start": [tip[0], tip[1]], "steps": steps}
        sections = (section_text("shaft", [part], solve=SOLVE),)
        IT, largest = exact.grooved_circle_torsion(1, groove)
        name, title = (
            f"torsion.groove.{groove:g}",
            f"shaft of radius 1, groove of radius {groove:g} about a point of its edge",
        )
        found += [
            _constant(name, title, sections, IT, WEBER, quick=groove == 0.3),
            Case(
                f"{name}.bottom", STRESS_GROUP, title, "tau/(G twist), bottom of the groove", sections,
                twist_stress(0, -1 + groove, "tau"), largest, WEBER, "computed",
                notch(groove, largest),
                "mm",
            ),
            Case(
                f"{name}.opposite", STRESS_GROUP, title, "tau/(G twist), opposite point", sections,
                twist_stress(0, 1, "tau"), 1 - groove**2 / 4, WEBER, "computed", point_stress(), "mm",
            ),
        ]  # fmt: skip
    return found
