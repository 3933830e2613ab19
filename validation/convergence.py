"""How fast six typical constants converge for the degrees 1 to 5, on even meshes that get finer and finer."""

from __future__ import annotations

from collections.abc import Callable
from concurrent.futures import ProcessPoolExecutor
from dataclasses import dataclass, replace
from multiprocessing import get_context

import numpy as np

from xsec_fem.meshing.front import make_mesh
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.reader import parse_section
from xsec_fem.model.section import Section
from xsec_fem.pipeline.constants import section_properties
from xsec_fem.pipeline.solution import solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.results import Properties

from .closed_form.flexure import rectangle_shear_coefficient, ring_shear_coefficient
from .closed_form.independent_values import POLYGONS
from .closed_form.torsion import eccentric_tube_torsion_constant, ellipse_torsion, rectangle_torsion_constant
from .families.polygons import OUTLINES
from .section_text import Table, section_text

DEGREES = (1, 2, 3, 4, 5)
FLOOR = 1e-11  # relative: below it round-off is measured


@dataclass(frozen=True)
class Study:
    """A section, the quantity looked at, its exact value, and the sizes of the triangles [mm]."""

    title: str
    quantity: str
    part: Table
    nu: float
    read: Callable[[Properties], float]
    exact: float
    sizes: tuple[float, ...]
    exact_to: float = FLOOR


@dataclass(frozen=True)
class Curve:
    """Relative errors of one degree on meshes of falling size: h [mm] is the side of a triangle of the mean area."""

    degree: int
    h: tuple[float, ...]
    error: tuple[float, ...]
    floor: float

    @property
    def slope(self) -> float | None:
        """Observed order in h, fitted to what lies above the floor; None with fewer than two meshes there."""
        kept = [(h, e) for h, e in zip(self.h, self.error, strict=True) if e > 3 * self.floor]
        if len(kept) < 2:
            return None
        h, error = np.log(np.array(kept)).T
        return float(np.polyfit(h, error, 1)[0])


def _IT(properties: Properties) -> float:
    return properties.IT


def _coefficient(properties: Properties) -> float:
    return properties.Asz / properties.A


def studies() -> list[Study]:
    """Return the six cases: three smooth ones with curved sides, two with right angles, one with a re-entrant corner."""
    ellipse: Table = {"shape": "ellipse", "width": 3, "height": 2}
    ring: Table = {"shape": "ring", "diameter": 2, "thickness": 0.5}
    eccentric: Table = {"shape": "circle", "diameter": 2, "holes": [{"shape": "circle", "diameter": 1, "at": [0.2, 0]}]}
    square: Table = {"shape": "rectangle", "width": 1, "height": 1}
    flat: Table = {"shape": "rectangle", "width": 2, "height": 1}
    angle: Table = {"shape": "polygon", "points": OUTLINES["angle"], "anchor": "origin"}
    fine = (0.4, 0.28, 0.2, 0.14)
    return [
        Study("ellipse, half axes 1.5 and 1", "IT", ellipse, 0.0, _IT, ellipse_torsion(1.5, 1)[0], (0.8, 0.56, 0.4, 0.28)),
        Study("ring, radii 0.5 and 1, nu 0.3", "Asz/A", ring, 0.3, _coefficient, ring_shear_coefficient(0.5, 0.3), fine),
        Study("eccentric tube", "IT", eccentric, 0.0, _IT, eccentric_tube_torsion_constant(0.5, 0.2), fine),
        Study("square, side 1", "IT", square, 0.0, _IT, rectangle_torsion_constant(1, 1), (0.3, 0.21, 0.15, 0.105)),
        Study("rectangle 2 x 1, nu 0.3", "Asz/A", flat, 0.3, _coefficient, rectangle_shear_coefficient(2, 1, 0.3), fine),
        Study(
            "angle 100 x 100 x 10, sharp", "IT", angle, 0.0, _IT, POLYGONS["angle"].IT, (5.0, 3.5, 2.5, 1.75),
            POLYGONS["angle"].digits,
        ),
    ]  # fmt: skip


def curves(study: Study) -> list[Curve]:
    """Return the errors of one case, a curve a degree; raises what meshing and solving raise."""
    section = parse_section(section_text(study.title, [study.part], nu=study.nu))
    found = []
    for degree in DEGREES:
        measured = [_measure(section, study, degree, size) for size in study.sizes]
        h, error = zip(*measured, strict=True)
        found.append(Curve(degree, h, error, study.exact_to))
    return found


def _measure(section: Section, study: Study, degree: int, size: float) -> tuple[float, float]:
    of_degree = replace(section, solve=replace(section.solve, order=degree))
    everywhere = SizeField(np.zeros((1, 2)), np.array([size]))
    mesh = make_mesh(of_degree, sizes=everywhere)
    solution = solve_mesh(of_degree, mesh, Stopwatch(), certificate=False)
    properties = section_properties(of_degree, solution)
    h = float(np.sqrt(properties.A / len(mesh.triangles) * 4 / 3**0.5))
    return h, abs(study.read(properties) / study.exact - 1)


def all_curves(jobs: int) -> list[tuple[Study, list[Curve]]]:
    """Return the six cases with their curves, in order, worked out by `jobs` processes."""
    chosen = studies()
    if jobs <= 1:
        return [(study, curves(study)) for study in chosen]
    with ProcessPoolExecutor(jobs, mp_context=get_context("spawn")) as pool:
        return list(zip(chosen, pool.map(curves_by_number, range(len(chosen))), strict=True))


def curves_by_number(number: int) -> list[Curve]:
    """Return the curves of the case with that number: functions of a study do not travel between processes."""
    return curves(studies()[number])
