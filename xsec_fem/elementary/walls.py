"""Cuts across walls: both hand values, through the wall alone and through the whole section, beside the field."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.formula import hand_flows, level_formula, shear_gradient
from xsec_fem.elementary.sweep import shear_direction
from xsec_fem.elementary.wall_stations import STATIONS, CutWall, WallCuts, cut_walls
from xsec_fem.fem.separation import cut_off_moments
from xsec_fem.model.section import Section
from xsec_fem.recovery.cuts import as_unit, read_cuts, unit_flows
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class WallTable:
    """One wall, one row a station (n,), in order along it.

    Attributes
    ----------
    name : "part/wall"; part : the part.
    middle : (n, 2) stations [mm]. direction : (n, 2) unit, along the wall. t : (n,) length of the cut, the thickness there [mm].
    mean : (n,) flow of the field along the wall over t, signed along the mid-line [MPa].
    largest : (n,) largest |tau along the wall| on the cut [MPa]; largest_at : (n, 2) where [mm].
    across_wall : (n,) hand value of the cut across this wall alone, signed like mean; NaN in closed cells [MPa].
    whole_section : (n,) hand value of the cut perpendicular to V through the whole section at the station [MPa].
    """

    name: str
    part: str
    middle: FloatArray
    direction: FloatArray
    t: FloatArray
    mean: FloatArray
    largest: FloatArray
    largest_at: FloatArray
    across_wall: FloatArray
    whole_section: FloatArray

    @property
    def in_closed_cell(self) -> bool:
        """True when no cut across this wall separates the section."""
        return bool(np.isnan(self.across_wall).all())


def wall_tables(
    solved: SolvedFields, section: Section, forces: SectionForces, count: int = STATIONS
) -> tuple[WallTable, ...]:
    """Return one table for every wall of the section that can be cut, arrays shaped as in WallTable [N, mm, MPa].

    Raises ValueError without a shear force.
    """
    direction = shear_direction(forces)
    return tuple(_table(solved, wall, forces, direction) for wall in cut_walls(solved, section, count))


def _table(solved: SolvedFields, wall: CutWall, forces: SectionForces, direction: FloatArray) -> WallTable:
    columns = [_columns(solved, cuts, forces) for cuts in wall.cuts]
    middle = np.vstack([cuts.middle for cuts in wall.cuts])
    t, mean, largest, y, z, across = np.vstack(columns).T
    order = np.argsort(np.concatenate([cuts.order for cuts in wall.cuts]), kind="stable")
    along = np.vstack([np.tile(cuts.crossings.normal, (len(cuts.spans), 1)) for cuts in wall.cuts])
    through = level_formula(solved, forces, direction, middle @ direction)
    return WallTable(
        wall.name, wall.part, middle[order], along[order], t[order], mean[order], largest[order], np.column_stack([y, z])[order],
        across[order], through[order],
    )  # fmt: skip


def _columns(solved: SolvedFields, cuts: WallCuts, forces: SectionForces) -> FloatArray:
    """(n, 6): t, mean, largest, its y and z, hand value across the wall."""
    crossings, spans = cuts.crossings, cuts.spans
    t = crossings.span_length[spans]
    mean = (unit_flows(solved, crossings) @ as_unit(forces))[spans] / t
    moments, _ = cut_off_moments(crossings, spans, np.arange(len(spans)), solved.E, solved.area.centroid)
    hand = hand_flows(moments, shear_gradient(solved, forces)) / t
    readings = read_cuts(solved, crossings, forces)
    size = np.where(readings.clear, np.abs(readings.across), -1.0)
    best = size.argmax(axis=1)
    row = np.arange(len(best))
    order = np.lexsort((size[row, best], crossings.span))
    last = np.searchsorted(crossings.span[order], spans, side="right") - 1
    top = order[last]  # the interval with the largest value of each span
    value = size[top, best[top]]
    place = readings.places[top, best[top]]
    return np.column_stack([t, mean, np.where(value < 0, np.nan, value), place, hand])
