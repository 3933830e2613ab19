"""Shear across straight cuts: flow, mean, peak and profile in every wall segment, under unit actions and any forces.

The flow ∫ tau . n ds is that of the warping functions' own field (or of the equilibrated one), linear in the actions, so that
unit flows are integrated once. Peaks and profiles are those of the recovered nodal field, which has no jumps inside a part.
n points to the left of the cut's direction.

A cut belongs to free edges: a wall of which less than 1 % is covered does not count, one of which more than 99 %
is covered counts whole, and an end anywhere else inside the material is a fault, since the flow through a part of a wall has no
counterpart in V S/(I t).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import Fault, InputError
from xsec_fem.fem.cut_samples import positions, sample_places, sample_values, span_integrals
from xsec_fem.fem.line_crossings import Crossings, line_crossings
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Cut
from xsec_fem.recovery.corners import corner_mask
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_COVERED = 0.01  # share of a wall that a cut may miss or touch without meaning it: drawn and typed ends are this good
_SAMPLES = 5  # points an interval at which profiles are read, ends included: a degree-4 field is held by five


@dataclass(frozen=True)
class CutReadings:
    """The recovered field along all intervals of a family of lines.

    Attributes
    ----------
    crossings : the lines.
    position : (I, Q) along the line [mm].
    places : (I, Q, 2) [mm].
    tau : (I, Q, 2) [MPa].
    clear : (I, Q) False within the stated distance of a corner where the stress has no limit.
    """

    crossings: Crossings
    position: FloatArray
    places: FloatArray
    tau: FloatArray
    clear: npt.NDArray[np.bool_]

    @property
    def across(self) -> FloatArray:
        """Stress across the line, tau . n, shape (I, Q) [MPa]."""
        return np.asarray(self.tau @ self.crossings.normal)

    @property
    def along(self) -> FloatArray:
        """Stress along the line, tau . t, shape (I, Q) [MPa]."""
        return np.asarray(self.tau @ self.crossings.tangent)

    @property
    def size(self) -> FloatArray:
        """Magnitude |tau|, shape (I, Q) [MPa]."""
        return np.asarray(np.hypot(self.tau[..., 0], self.tau[..., 1]))


def read_cuts(solved: SolvedFields, crossings: Crossings, forces: SectionForces) -> CutReadings:
    """Read the recovered nodal field along lines, arrays of shape (I, Q, ...) as in CutReadings [MPa, mm]."""
    shares = np.linspace(0.0, 1.0, _SAMPLES)
    numbering = solved.fields.part_nodes.triangles
    tau = sample_values(crossings, shares, solved.fields.combine(forces).tau_components, numbering)
    places = sample_places(crossings, shares)
    along = positions(crossings, np.arange(len(crossings.span)), shares)
    return CutReadings(crossings, along, places, tau, corner_mask(places, solved.corners))


def unit_flows(solved: SolvedFields, crossings: Crossings) -> FloatArray:
    """Return the flow through each span under unit Vy, Vz and T, shape (S, 3) [N/mm per N, per N mm]."""
    return span_integrals(crossings, solved.element_tau @ crossings.normal)


def as_unit(forces: SectionForces) -> FloatArray:
    """Return (Vy, Vz, T), the factors of the unit fields, shape (3,) [N, N mm]."""
    return np.array([forces.Vy, forces.Vz, forces.T])


@dataclass(frozen=True)
class SpanResult:
    """One wall segment that a cut crosses.

    start, end : its ends on free edges [mm]; t its length [mm]; parts crossed in order. flow = ∫ tau . n ds [N/mm]; peak is
    the largest tau . n by magnitude, with its sign, tau_max the largest |tau| [MPa], with their places.
    position, across, along : profile (K,): distance from the start [mm], tau . n and tau along the cut [MPa].
    """

    start: Point
    end: Point
    t: float
    parts: tuple[str, ...]
    flow: float
    peak: float
    peak_at: Point
    tau_max: float
    tau_max_at: Point
    position: FloatArray
    across: FloatArray
    along: FloatArray

    @property
    def mean(self) -> float:
        """Flow over length [MPa]."""
        return self.flow / self.t


@dataclass(frozen=True)
class CutResult:
    """A named cut under one load case: its wall segments, and the same over all of them [N/mm, MPa, mm]."""

    name: str
    start: Point
    end: Point
    spans: tuple[SpanResult, ...]

    @property
    def flow(self) -> float:
        """Sum of the flows through all segments [N/mm]."""
        return sum(span.flow for span in self.spans)

    @property
    def t(self) -> float:
        """Sum of their lengths [mm]."""
        return sum(span.t for span in self.spans)

    @property
    def mean(self) -> float:
        """Flow over length [MPa]."""
        return self.flow / self.t

    @property
    def worst(self) -> SpanResult:
        """The segment with the largest |tau . n|."""
        return max(self.spans, key=lambda span: abs(span.peak))

    @property
    def peak(self) -> float:
        """Largest tau . n by magnitude, with its sign [MPa]."""
        return self.worst.peak

    @property
    def peak_at(self) -> Point:
        """Where it is, shape (2,) [mm]."""
        return self.worst.peak_at


@dataclass(frozen=True)
class PlacedCut:
    """A cut of the section file laid through the mesh: spans (n,) of `crossings`, which has this one line."""

    cut: Cut
    crossings: Crossings
    spans: IntArray


def place_cuts(solved: SolvedFields, cuts: Sequence[Cut], file: str = "") -> tuple[PlacedCut, ...]:
    """Lay the section file's cuts through the mesh.

    Raises InputError with every cut that crosses nothing or ends inside the material, and the place [mm] where it would be free.
    """
    placed, faults = [], []
    for number, cut in enumerate(cuts):
        crossings, low, high = _line_of(solved, cut)
        start, end = crossings.span_start, crossings.span_end
        covered = (np.minimum(end, high) - np.maximum(start, low)) / (end - start)
        place = f'cuts[{number}] "{cut.name}"'
        chosen = np.flatnonzero(covered > 1 - _COVERED)
        partly = np.flatnonzero((covered >= _COVERED) & (covered <= 1 - _COVERED))
        faults += [_ends_inside(crossings, int(span), (low, high), file, place) for span in partly]
        if not len(chosen) and not len(partly):
            value = f"from {list(cut.start)} to {list(cut.end)}"
            remedy = "Move it, so that it runs through the section from free edge to free edge."
            faults.append(Fault(file, place, "crosses no material", value, remedy))
        placed.append(PlacedCut(cut, crossings, chosen))
    if faults:
        raise InputError(faults)
    return tuple(placed)


def _line_of(solved: SolvedFields, cut: Cut) -> tuple[Crossings, float, float]:
    """The whole line through a cut, and the positions of the cut's ends on it."""
    start, end = np.asarray(cut.start, float), np.asarray(cut.end, float)
    tangent = (end - start) / np.linalg.norm(end - start)
    normal = np.array([-tangent[1], tangent[0]])
    crossings = line_crossings(solved.curves, normal, np.array([normal @ start]))
    return crossings, float(tangent @ start), float(tangent @ end)


def _ends_inside(crossings: Crossings, span: int, ends: tuple[float, float], file: str, place: str) -> Fault:
    """The fault of a cut that covers only a part of a wall, with both ways out."""
    line = crossings.span_line[span]
    low, high = float(crossings.span_start[span]), float(crossings.span_end[span])
    inner = ends[0] if low < ends[0] < high else ends[1]
    at, one, other = (crossings.point(line, np.asarray(s)) for s in (inner, low, high))
    rule = "must run from free edge to free edge, but ends inside the material"
    remedy = (
        f"The free edges there are at {_pair(one)} and {_pair(other)}: take the cut on to both, or leave this wall out."
    )
    return Fault(file, place, rule, _pair(at), remedy)


def _pair(place: FloatArray) -> str:
    return f"({place[0]:.6g}, {place[1]:.6g})"


def cut_result(solved: SolvedFields, placed: PlacedCut, forces: SectionForces) -> CutResult:
    """Evaluate a placed cut under the given forces, profiles of shape (K,) as in SpanResult [N, N mm -> N/mm, MPa]."""
    flows = unit_flows(solved, placed.crossings) @ as_unit(forces)
    readings = read_cuts(solved, placed.crossings, forces)
    spans = tuple(_span_result(readings, int(span), float(flows[span])) for span in placed.spans)
    return CutResult(placed.cut.name, placed.cut.start, placed.cut.end, spans)


def _span_result(readings: CutReadings, span: int, flow: float) -> SpanResult:
    crossings = readings.crossings
    mine = crossings.span == span
    places, clear = readings.places[mine].reshape(-1, 2), readings.clear[mine].ravel()
    across, along = readings.across[mine].ravel(), readings.along[mine].ravel()
    clear = clear if clear.any() else ~clear
    size = readings.size[mine].ravel()
    peak, top = (int(np.argmax(np.where(clear, values, -1.0))) for values in (np.abs(across), size))
    start, end = (_point(places[k]) for k in (0, -1))
    position = readings.position[mine].ravel() - crossings.span_start[span]
    return SpanResult(
        start, end, float(crossings.span_length[span]), crossings.parts_of_span(span), flow, float(across[peak]),
        _point(places[peak]), float(size[top]), _point(places[top]), position, across, along,
    )  # fmt: skip


def _point(place: FloatArray) -> Point:
    return (float(place[0]), float(place[1]))
