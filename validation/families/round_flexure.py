"""Circle, annulus and ellipse under shear: stress on the neutral axis and the energy shear coefficient, in nu and shape."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import partial

import numpy as np

from ..case import Case, Source
from ..closed_form.flexure import (
    circle_shear_coefficient,
    ellipse_flexure,
    ellipse_shear_coefficient,
    ring_flexure,
    ring_shear_coefficient,
)
from ..closed_form.series import FloatArray
from ..reading import shear_coefficient, shear_coefficient_bounds, stress
from ..section_text import Table, section_text
from ..sources import LOVE, RENTON, TIMOSHENKO_GOODIER, at
from ..tolerances import SOLVE, curved, notch, point_stress

CIRCLES = (0.0, 0.25, 0.3, 0.5)  # nu
RINGS = ((0.1, 0.0), (0.1, 0.3), (0.5, 0.0), (0.5, 0.5), (0.8, 0.3), (0.9, 0.5), (0.99, 0.3))  # inner/outer radius, nu
ELLIPSES = (
    (0.25, 0.0),
    (0.25, 0.3),
    (0.5, 0.3),
    (2.0, 0.25),
    (2.0, 0.5),
    (4.0, 0.3),
)  # half axis along/across the load, nu
QUICK = ("circle.nu0.3", "ring.0.5.nu0.5", "ellipse.2.nu0.25")

Field = Callable[[FloatArray, FloatArray], FloatArray]


def cases() -> list[Case]:
    """Return the cases of this family."""
    return [
        case
        for shapes in (
            [_circle(nu) for nu in CIRCLES],
            [_ring(ratio, nu) for ratio, nu in RINGS],
            [_ellipse(half, nu) for half, nu in ELLIPSES],
        )
        for shape in shapes
        for case in shape.cases()
    ]


@dataclass(frozen=True)
class _Round:
    """A section, its exact field under V = 1, where it is read, and its shear coefficient."""

    name: str
    title: str
    part: Table
    area: float
    nu: float
    field: Field
    places: Mapping[str, tuple[float, float]]
    source: Source
    coefficient: Callable[[], float]
    coefficient_source: Source

    def cases(self) -> list[Case]:
        shape = self.name.split(".")[0]
        sections = (section_text(shape, [self.part], nu=self.nu, solve=SOLVE),)
        quick = self.name in QUICK
        found = [
            Case(
                f"{self.name}.{place}", f"{shape}, shear stress", self.title, f"tau_xz A/V, {place}", sections,
                stress(y, z, "tau_xz", Vz=1.0, scale=self.area), partial(self._stress, y, z), self.source, "computed",
                notch(y) if place == "inner wall" else point_stress(), quick=quick,
            )
            for place, (y, z) in self.places.items()
        ]  # fmt: skip
        return [
            *found,
            Case(
                f"{self.name}.coefficient", f"{shape}, energy shear coefficient", self.title, "Asz/A", sections,
                shear_coefficient("Asz"), self.coefficient, self.coefficient_source, "computed", curved(),
                interval=shear_coefficient_bounds("Asz"), quick=quick,
            ),
        ]  # fmt: skip

    def _stress(self, y: float, z: float) -> float:
        return self.area * float(self.field(np.array(y), np.array(z))[1])


def _circle(nu: float) -> _Round:
    return _Round(
        f"circle.nu{nu:g}", f"nu {nu:g}", {"shape": "circle", "diameter": 2}, np.pi, nu,
        partial(ellipse_flexure, across=1, along=1, nu=nu), {"centre": (0, 0), "edge": (1, 0), "inside": (0.5, 0.5)},
        at(TIMOSHENKO_GOODIER, "bending of bars, circular section"), partial(circle_shear_coefficient, nu), RENTON,
    )  # fmt: skip


def _ring(ratio: float, nu: float) -> _Round:
    return _Round(
        f"ring.{ratio:g}.nu{nu:g}", f"inner/outer radius {ratio:g}, nu {nu:g}",
        {"shape": "ring", "diameter": 2, "thickness": round(1 - ratio, 12)}, np.pi * (1 - ratio**2), nu,
        partial(ring_flexure, inner=ratio, outer=1, nu=nu), {"inner wall": (ratio, 0), "outer wall": (1, 0)},
        at(LOVE, "flexure of a hollow circular section"),
        partial(ring_shear_coefficient, ratio, nu), at(LOVE, "energy of that field, derived here"),
    )  # fmt: skip


def _ellipse(half: float, nu: float) -> _Round:
    source = at(TIMOSHENKO_GOODIER, "bending of bars, elliptic section")
    return _Round(
        f"ellipse.{half:g}.nu{nu:g}", f"half axis along the load {half:g}, across 1, nu {nu:g}",
        {"shape": "ellipse", "width": 2, "height": 2 * half}, np.pi * half, nu,
        partial(ellipse_flexure, across=1, along=half, nu=nu), {"centre": (0, 0), "edge": (1, 0)}, source,
        partial(ellipse_shear_coefficient, 1, half, nu), at(source, "energy of that field, derived here"),
    )  # fmt: skip
