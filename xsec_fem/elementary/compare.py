"""Elasticity against the formula: the worst place of every part and wall, too low and too high apart.

Only the shear forces are compared: V S/(I t) says nothing of torsion, so torsion is left out of both sides. The two sides are the
largest |tau| on a cut (within a part; along a wall: of the stress along it) and |q/t| of that cut. The worst place is
where they are farthest apart in stress, not in ratio: where both go to zero any ratio would do. Cuts on which neither
reaches `small` times the section's largest stress do not count.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.formula import level_formula
from xsec_fem.elementary.sweep import LEVELS, Sweep, shear_direction, sweep
from xsec_fem.elementary.walls import WallTable, wall_tables
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section
from xsec_fem.recovery.solved_fields import SolvedFields, shear_only
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.units import UnitSystem

FloatArray = npt.NDArray[np.float64]

_TOWARD_CENTRE = 1e-5  # share of the way from a node to its triangles' centres: a flange's face belongs to the flange


@dataclass(frozen=True)
class Limits:
    """good within this share of 1, use with care within that one, poor beyond; `small`: share of the largest |tau| below
    which stresses do not count."""

    good: float = 0.05
    care: float = 0.20
    small: float = 0.05


@dataclass(frozen=True)
class Difference:
    """One place: elasticity (largest |tau| on the cut) and elementary (|q/t| of it) [MPa], at (y, z) [mm].

    `row` is the cut's row in its sweep or wall table, `sample` the flat index into the sweep's readings (-1 for walls).
    """

    elasticity: float
    elementary: float
    at: Point
    row: int
    sample: int = -1

    @property
    def ratio(self) -> float:
        """Elasticity over elementary [-]; infinite when the formula gives 0."""
        return self.elasticity / self.elementary if self.elementary else float("inf")


@dataclass(frozen=True)
class Compared:
    """The worst places of a part or wall: formula too low (unsafe) and too high; None where it never is."""

    name: str
    part: str
    too_low: Difference | None
    too_high: Difference | None
    table: WallTable | None = None

    @property
    def worst(self) -> Difference | None:
        """The unsafe one when there is one."""
        return self.too_low or self.too_high


@dataclass(frozen=True)
class Comparison:
    """The whole comparison of one pair of shear forces: the sweep perpendicular to V, parts and walls; units for sentences."""

    solved: SolvedFields
    forces: SectionForces
    limits: Limits
    sweep: Sweep
    parts: tuple[Compared, ...]
    walls: tuple[Compared, ...]
    units: UnitSystem

    @property
    def largest(self) -> float:
        """Largest |tau| on any cut of the sweep [MPa]."""
        return float(np.nanmax(self.sweep.largest))


def compare(
    solved: SolvedFields, section: Section, forces: SectionForces, limits: Limits | None = None, count: int = LEVELS
) -> Comparison:
    """Compare the field of the shear forces with V S/(I t), part by part and wall by wall [N, mm, MPa].

    Raises ValueError when there is no shear force.
    """
    limits = limits or Limits()
    shear = shear_only(forces)
    cuts = sweep(solved, shear, "perpendicular to V", shear_direction(shear), count)
    floor = limits.small * float(np.nanmax(cuts.largest))
    inside = cuts.largest_in_part
    parts = tuple(
        _compared_part(name, inside[:, number], cuts, cuts.by_part[:, number], floor)
        for number, name in enumerate(solved.mesh.part_names)
    )
    walls = tuple(_compared_wall(table, floor) for table in wall_tables(solved, section, shear))
    return Comparison(solved, shear, limits, cuts, parts, walls, section.units)


def _compared_part(name: str, field: FloatArray, cuts: Sweep, index: npt.NDArray[np.int64], floor: float) -> Compared:
    places = cuts.readings.places.reshape(-1, 2)[index]
    low, high = _extremes(field, np.abs(cuts.elementary), places, index, floor)
    return Compared(name, name, low, high)


def _compared_wall(table: WallTable, floor: float) -> Compared:
    hand = np.abs(table.whole_section if table.in_closed_cell else table.across_wall)
    low, high = _extremes(table.largest, hand, table.largest_at, np.full(len(hand), -1), floor)
    return Compared(table.name, table.part, low, high, table)


def _extremes(
    field: FloatArray, formula: FloatArray, places: FloatArray, samples: npt.NDArray[np.int64], floor: float
) -> tuple[Difference | None, Difference | None]:
    """The rows where field - formula is most above and most below zero; None where it never is."""
    excess = np.where(np.fmax(field, formula) >= floor, field - formula, np.nan)
    found: list[Difference | None] = []
    for sign in (1.0, -1.0):
        signed = np.nan_to_num(sign * excess, nan=-1.0)
        row = int(np.argmax(signed)) if len(signed) else -1
        if row < 0 or signed[row] <= 0:
            found.append(None)
            continue
        at = (float(places[row, 0]), float(places[row, 1]))
        found.append(Difference(float(field[row]), float(formula[row]), at, row, int(samples[row])))
    return found[0], found[1]


def ratio_field(solved: SolvedFields, forces: SectionForces, small: float = Limits.small) -> FloatArray:
    """Return elasticity/elementary at every node, shape (S,) [-], numbered as the nodal fields, for a map.

    |tau| over |q/t| of the whole cut perpendicular to V through the node; NaN where |tau| is below `small` times its largest.
    Where the thickness jumps, a node takes the cut of its own part's side. Raises ValueError without a shear force.
    """
    shear = shear_only(forces)
    direction = shear_direction(shear)
    numbering = solved.fields.part_nodes
    triangles = numbering.triangles
    centre = solved.mesh.nodes[solved.mesh.triangles[:, :3]].mean(axis=1)
    uses = np.bincount(triangles.ravel(), minlength=len(numbering.node))
    toward = np.stack(
        [np.bincount(triangles.ravel(), np.repeat(centre[:, d], triangles.shape[1])) / uses for d in (0, 1)], axis=1
    )
    places = numbering.positions + _TOWARD_CENTRE * (toward - numbering.positions)
    formula = np.abs(level_formula(solved, shear, direction, places @ direction))
    tau = solved.fields.combine(shear).tau
    with np.errstate(divide="ignore", invalid="ignore"):
        ratio: FloatArray = tau / formula
    ratio[~(tau >= small * tau.max())] = np.nan
    return ratio
