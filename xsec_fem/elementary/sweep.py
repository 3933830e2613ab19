"""Many parallel cuts through the whole section: the formula and the field, level by level.

Torsion is in the field's values when the forces have any; the formula knows nothing of it.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.formula import hand_flows, shear_gradient
from xsec_fem.fem.cut_off import half_plane_moments
from xsec_fem.fem.line_crossings import Crossings, line_crossings
from xsec_fem.recovery.cuts import CutReadings, as_unit, read_cuts, unit_flows
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

LEVELS = 200
_ALIGNED = 1e-9  # sine below which a direction counts as that of an axis
CSV_COLUMNS = (
    "family", "level", "walls", "t", "S_y", "S_z", "elementary", "field mean", "field largest across", "field largest",
    "y", "z",
)  # fmt: skip


@dataclass(frozen=True)
class Sweep:
    """Cuts n . x = level through the whole section; every array has one row a level, NaN where a cut meets nothing.

    Attributes
    ----------
    name : "perpendicular to V", "along y" or "along z": the direction of the cuts.
    crossings : the cuts; levels (L,), t (L,) and spans are its own.
    moments : (L, 3) ∫E, ∫E y, ∫E z below each level, about the centroid [N, N mm].
    elementary : (L,) q/t by the formula [MPa].
    mean : (L,) flow of the field over t [MPa].
    readings : the recovered field along the cuts.
    by_part : (L, P) flat index into the readings (I Q) of the largest |tau| in each part, -1 where the cut misses it.
    """

    name: str
    crossings: Crossings
    moments: FloatArray
    elementary: FloatArray
    mean: FloatArray
    readings: CutReadings
    by_part: IntArray

    @property
    def levels(self) -> FloatArray:
        """n . x of the cuts, shape (L,) [mm]."""
        return self.crossings.levels

    @property
    def t(self) -> FloatArray:
        """Length of each cut inside the section, shape (L,) [mm]."""
        return self.crossings.length

    @property
    def walls(self) -> IntArray:
        """Number of walls crossed by each cut, shape (L,)."""
        return np.bincount(self.crossings.span_line, minlength=len(self.levels))

    @property
    def largest_in_part(self) -> FloatArray:
        """Largest |tau| on each cut in each part, NaN where the cut misses the part, shape (L, P) [MPa]."""
        return _read(self.readings.size, self.by_part)

    @property
    def largest_at(self) -> IntArray:
        """Flat index into the readings of the largest |tau| on each cut, -1 for none, shape (L,)."""
        values = np.nan_to_num(self.largest_in_part, nan=-1.0)
        result: IntArray = self.by_part[np.arange(len(values)), values.argmax(axis=1)]
        return result

    @property
    def largest(self) -> FloatArray:
        """Largest |tau| on each cut, shape (L,) [MPa]."""
        return _read(self.readings.size, self.largest_at)

    @property
    def largest_across(self) -> FloatArray:
        """Largest |tau . n| on each cut, shape (L,) [MPa]."""
        across = np.where(self.readings.clear, np.abs(self.readings.across), -1.0).max(axis=1, initial=-1.0)
        result = np.full(len(self.levels), -1.0)
        np.maximum.at(result, self.crossings.line, across)
        return np.where(result < 0, np.nan, result)

    @property
    def places(self) -> FloatArray:
        """Places of the largest |tau| of each cut, shape (L, 2) [mm]."""
        index = self.largest_at
        result = self.readings.places.reshape(-1, 2)[index].astype(float)
        result[index < 0] = np.nan
        return result

    def rows(self, E_ref: float) -> list[tuple[str, float, int, *tuple[float, ...]]]:
        """Return one row a level, columns as in CSV_COLUMNS; S over the reference modulus E_ref [mm, MPa]."""
        numbers = np.column_stack(
            [self.t, self.moments[:, 2] / E_ref, self.moments[:, 1] / E_ref, self.elementary, self.mean,
             self.largest_across, self.largest, self.places]
        )  # fmt: skip
        return [
            (self.name, float(level), int(walls), *row)
            for level, walls, row in zip(self.levels, self.walls, numbers.tolist(), strict=True)
        ]


def _read(values: FloatArray, index: IntArray) -> FloatArray:
    result = values.ravel()[index].astype(float) if values.size else np.full(index.shape, np.nan)
    result[index < 0] = np.nan
    return result


def _largest_index(readings: CutReadings) -> IntArray:
    """(L, P) flat index of the largest |tau| away from corners on each line in each part, -1 for none."""
    crossings = readings.crossings
    parts = len(crossings.hits.curves.mesh.part_names)
    result = np.full(len(crossings.levels) * parts, -1)
    if readings.size.size:
        size = np.where(readings.clear, readings.size, -1.0)
        best = size.argmax(axis=1)
        row = np.arange(len(best))
        value = size[row, best]
        key = crossings.line * parts + crossings.hits.curves.mesh.part_of[crossings.triangle]
        order = np.lexsort((value, key))
        order = order[value[order] >= 0]
        result[key[order]] = order * size.shape[1] + best[order]  # the last of each key, its largest, stays
    return result.reshape(-1, parts)


def sweep(solved: SolvedFields, forces: SectionForces, name: str, normal: FloatArray, count: int = LEVELS) -> Sweep:
    """Lay `count` evenly spaced cuts through the section, at the middles of as many strips [N, mm, MPa].

    normal : (2,) unit vector across the cuts. Arrays are shaped as in Sweep.
    """
    heights = solved.mesh.nodes @ normal
    low, high = float(heights.min()), float(heights.max())
    levels = low + (high - low) * (np.arange(count) + 0.5) / count
    crossings = line_crossings(solved.curves, normal, levels)
    moments, _ = half_plane_moments(solved.curves, normal, levels, solved.E, solved.area.centroid)
    t = crossings.length
    t[t == 0] = np.nan
    flow = unit_flows(solved, crossings) @ as_unit(forces)
    readings = read_cuts(solved, crossings, forces)
    return Sweep(
        name, crossings, moments, hand_flows(moments, shear_gradient(solved, forces)) / t,
        np.bincount(crossings.span_line, flow, minlength=count) / t, readings, _largest_index(readings),
    )  # fmt: skip


def shear_direction(forces: SectionForces) -> FloatArray:
    """Return V/|V|, shape (2,) [-]; ValueError when there is no shear force."""
    size = float(np.hypot(forces.Vy, forces.Vz))
    if size == 0:
        raise ValueError(f"there is no shear force to compare with (Vy = {forces.Vy}, Vz = {forces.Vz})")
    return np.array([forces.Vy, forces.Vz]) / size


def sweeps(solved: SolvedFields, forces: SectionForces, count: int = LEVELS) -> tuple[Sweep, ...]:
    """Return the cuts perpendicular to V first, then those along y and along z that are not the same [N, mm, MPa].

    Arrays are shaped as in Sweep. A V along an axis makes two families, any other one three; without V only those along the axes.
    """
    if not (forces.Vy or forces.Vz):
        return axis_sweeps(solved, forces, count)
    first = sweep(solved, forces, "perpendicular to V", shear_direction(forces), count)
    return (first, *axis_sweeps(solved, forces, count))


def axis_sweeps(solved: SolvedFields, forces: SectionForces, count: int = LEVELS) -> tuple[Sweep, ...]:
    """Return the cuts along y and along z, but for those that are perpendicular to V anyway [N, mm, MPa]."""
    families = [("along y", np.array([0.0, 1.0])), ("along z", np.array([1.0, 0.0]))]
    if forces.Vy or forces.Vz:
        direction = shear_direction(forces)
        families = [(name, n) for name, n in families if abs(direction[0] * n[1] - direction[1] * n[0]) > _ALIGNED]
    return tuple(sweep(solved, forces, name, normal, count) for name, normal in families)
