"""Why the formula is off at a place: the first of these that the evidence shows, each in one sentence with its numbers.

flange      the cut lies along a wall: it is far longer than the wall is thick, and the stress runs along it or enters there
corner      the place lies within twice the stated distance of a corner where the stress has no limit
layers      the wall segment there crosses parts of different G
walls       the cut crosses several walls, and their means differ from that of the whole cut
Poisson     a wide body, and more than half of the excess goes when the Poisson parts of the solution are left out (nu = 0)
radius      the thickness changes by more than a tenth close by: a root radius, a taper or a junction
skew        V is more than 1 deg off the direction in which the section bends
uneven      none of these: the stress is simply not even over the cut

A cut across one wall is not asked for flange, walls and skew: these belong to cuts through the whole section.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.compare import Comparison, Difference
from xsec_fem.fem.line_crossings import Crossings, line_crossings
from xsec_fem.model.outline import Point
from xsec_fem.recovery.cuts import as_unit, read_cuts, unit_flows

FloatArray = npt.NDArray[np.float64]

_OTHER_G = 0.01  # share by which shear moduli must differ to count as layers
_LONG = 3.0  # a cut this many times longer than the wall is thick lies along the wall
_CHANGED = 0.1  # share by which the thickness changes close by
_CLOSE = 0.5  # "close by": this share of the thickness
_JUNCTION = (
    2.0  # a wall this many times thicker than usual has another one running into it; a jump by as much is no radius
)
_WIDE = 0.5  # b/h below which a body is not called wide
_PLACES = 9  # places along a cut at which the thickness across it is taken; their median counts
_SKEW_DEG = 1.0


@dataclass(frozen=True)
class Cause:
    """A code from the module docstring and a sentence; its numbers have the file's units beside them."""

    code: str
    sentence: str


@dataclass(frozen=True)
class _Place:
    """A place on a cut: line (2,) normal through it, its span and all spans of the cut."""

    comparison: Comparison
    difference: Difference
    crossings: Crossings
    span: int

    @property
    def at(self) -> FloatArray:
        return np.array(self.difference.at)

    @property
    def t(self) -> float:
        return float(self.crossings.span_length[self.span])

    @property
    def where(self) -> str:
        return place_text(self.difference.at, self.comparison.units.length)

    def length(self, value: float) -> str:
        return f"{_n(value)} {self.comparison.units.length}"

    def stress(self, value: float) -> str:
        return f"{_n(value)} {self.comparison.units.stress}"


def _n(value: float) -> str:
    return f"{value:.4g}" if abs(value) > 1e-9 else "0"


def place_text(at: Point, length: str) -> str:
    """Return "(y, z) mm" with the file's unit of length."""
    return f"({_n(at[0])}, {_n(at[1])}) {length}"


def cause_of(comparison: Comparison, difference: Difference, normal: FloatArray, one_wall: bool = False) -> Cause:
    """Return why the formula is off at a place of the cut with that normal (2,) through it, across one wall or all [mm, MPa]."""
    crossings, span = _cut_through(comparison, np.array(difference.at), normal)
    if span is None:
        return Cause("uneven", "The stress is not even over the cut; the formula's value is its mean.")
    place = _Place(comparison, difference, crossings, span)
    looks = (_corner, _layers, _poisson, _radius) if one_wall else _ALL
    for look in looks:
        found = look(place)
        if found is not None:
            return found
    return Cause(
        "uneven",
        f"The stress is not even over the cut (t = {place.length(place.t)}): the formula's value is its mean, the largest is at "
        f"{place.where}.",
    )


def _cut_through(comparison: Comparison, at: FloatArray, normal: FloatArray) -> tuple[Crossings, int | None]:
    """The line through a place, and its span there (None when the place lies on the line's very end)."""
    crossings = line_crossings(comparison.solved.curves, normal, np.array([at @ normal]))
    position, slack = float(at @ crossings.tangent), 1e-6 * comparison.solved.curves.size
    holds = (crossings.span_start <= position + slack) & (position <= crossings.span_end + slack)
    return crossings, int(np.argmax(holds)) if holds.any() else None


def _thicknesses(place: _Place) -> FloatArray:
    """Lengths of what lines across the cut cross, at the place itself and at places along the span (0 where none) [mm]."""
    crossings = place.crossings
    start, end = crossings.span_start[place.span], crossings.span_end[place.span]
    # the place first, moved off the span's very ends
    share = np.concatenate([[0.0], (np.arange(_PLACES) + 0.5) / _PLACES])
    position = start + share * (end - start)
    position[0] = np.clip(place.at @ crossings.tangent, start + 1e-3 * (end - start), end - 1e-3 * (end - start))
    places = crossings.point(np.zeros(len(position), np.int64), position)
    order = np.argsort(position)
    other = line_crossings(place.comparison.solved.curves, crossings.tangent, position[order])
    height = (places @ other.tangent)[order][other.span_line]
    holds = (other.span_start <= height) & (height <= other.span_end)
    result = np.zeros(len(position))
    result[order[other.span_line[holds]]] = other.span_length[holds]
    return result


def _corner(place: _Place) -> Cause | None:
    length = place.comparison.units.length
    for corner in place.comparison.solved.corners:
        distance = math.hypot(place.at[0] - corner.y, place.at[1] - corner.z)
        if distance < 2 * corner.distance:
            return Cause(
                "corner",
                f"Corner of {corner.angle_deg:.0f} deg at {place_text((corner.y, corner.z), length)}: the stress grows without "
                f"limit. Read at {place.length(max(distance, corner.distance))}; give a root radius or use the mean.",
            )
    return None


def _layers(place: _Place) -> Cause | None:
    mesh, G = place.comparison.solved.mesh, place.comparison.solved.warping.problem.moduli.G
    names = place.crossings.parts_of_span(place.span)
    tensors = np.array([G[mesh.part_names.index(name)] for name in names])
    if np.ptp(tensors, axis=0).max() <= _OTHER_G * np.abs(tensors).max():
        return None
    listed = ", ".join(f'"{name}"' for name in names)
    return Cause(
        "layers",
        f"The cut crosses layers of different G ({listed}): the stress goes with G, the formula spreads it evenly over "
        f"t = {place.length(place.t)}.",
    )


def _tau_at(place: _Place, plain: bool = False) -> FloatArray:
    """Stress at the place in the part whose value is compared, (2,) [MPa]."""
    solved = place.comparison.solved
    fields = solved.plain if plain else solved.fields
    points = fields.combine(place.comparison.forces).at(*place.difference.at)
    tau = np.array([[point.tau_xy, point.tau_xz] for point in points])
    result: FloatArray = tau[np.argmax(np.hypot(tau[:, 0], tau[:, 1]))]
    return result


def _flange(place: _Place) -> Cause | None:
    tau = _tau_at(place)
    tangent = place.crossings.tangent
    turned = abs(float(tau @ tangent)) > abs(float(tau @ place.crossings.normal))
    thickness = _thicknesses(place)
    usual = float(np.median(thickness[1:]))
    if place.t <= _LONG * usual or not (turned or thickness[0] > _JUNCTION * usual):
        return None
    readings = read_cuts(place.comparison.solved, place.crossings, place.comparison.forces)
    mine = (place.crossings.span == place.span)[:, None] & readings.clear
    along = float(np.abs(np.where(mine, readings.along, 0.0)).max())
    straight = np.abs(tangent).max() > 1 - 1e-9
    name = ("horizontal", "vertical")[int(np.argmax(np.abs(tangent)))] if straight else "lengthwise"
    return Cause(
        "flange",
        f"This cut lies in a flange {place.length(place.t)} wide and {place.length(usual)} thick: the {name} shear of "
        f"{place.stress(along)} is not in V S/(I t) = {place.stress(place.difference.elementary)}.",
    )


def _walls(place: _Place) -> Cause | None:
    crossings, count = place.crossings, len(place.crossings.span_line)
    if count < 2:
        return None
    flow = unit_flows(place.comparison.solved, crossings) @ as_unit(place.comparison.forces)
    means = flow / crossings.span_length
    whole = float(flow.sum() / crossings.span_length.sum())
    if (
        np.abs(means - whole).max() <= place.comparison.limits.good * abs(whole)
        and place.difference.ratio <= 1 + _CHANGED
    ):
        return None
    walls = (
        " + ".join(_n(t) for t in crossings.span_length)
        if count <= 6
        else f"{_n(float(crossings.span_length.sum()))} in all"
    )
    unit = place.comparison.units.length
    return Cause(
        "walls",
        f"Cut crosses {count} walls (t = {walls} {unit}). The formula's value is their mean; the field's largest is "
        f"{_n(place.difference.ratio)} times it at {place.where}.",
    )


def _poisson(place: _Place) -> Cause | None:
    ratio, elementary = place.difference.ratio, place.difference.elementary
    wide = place.t / float(np.median(_thicknesses(place)[1:]))
    if elementary == 0 or wide < _WIDE:
        return None
    plain = float(np.hypot(*_tau_at(place, plain=True))) / elementary
    if abs(ratio - plain) <= abs(ratio - 1) / 2:
        return None
    solved = place.comparison.solved
    part = solved.fields.combine(place.comparison.forces).at(*place.difference.at)[0].part
    nu = float(np.trace(solved.warping.problem.moduli.nu[solved.mesh.part_names.index(part)]) / 2)
    return Cause(
        "Poisson",
        f"b/h = {_n(wide)} with nu = {_n(nu)}: the edge is {_n(ratio)} times the formula by the Poisson effect of a free-sided "
        f"body ({_n(plain)} times at nu = 0); nu_effect = false shows the plain flow.",
    )


def _radius(place: _Place) -> Cause | None:
    step = _CLOSE * min(place.t, float(_thicknesses(place)[0]) or place.t)
    near = [_nearby(place, side * step) for side in (-1.0, 1.0)]
    lengths = [place.t, *(length for length in near if length is not None)]
    low, high = min(lengths), max(lengths)
    if max(high - place.t, place.t - low) <= _CHANGED * place.t:
        return None
    what = "root radius or taper" if high < _JUNCTION * low else "a junction or a sloping end"
    return Cause(
        "radius",
        f"The thickness changes from {_n(low)} to {place.length(high)} within {place.length(2 * step)} of {place.where} "
        f"({what}): the stress crowds "
        "at the side that turns, the formula spreads it over t.",
    )


def _nearby(place: _Place, step: float) -> float | None:
    """Length of the span that faces the place's own span on a line a step away; None beyond the section's end."""
    own = (place.crossings.span_start[place.span] + place.crossings.span_end[place.span]) / 2
    level = np.array([place.crossings.levels[0] + step])
    crossings = line_crossings(place.comparison.solved.curves, place.crossings.normal, level)
    holds = (crossings.span_start <= own) & (own <= crossings.span_end)
    return float(crossings.span_length[np.argmax(holds)]) if holds.any() else None


def _skew(place: _Place) -> Cause | None:
    forces, EI = place.comparison.forces, place.comparison.solved.area.EI
    V = np.array([forces.Vy, forces.Vz])
    a = np.linalg.solve(EI, V)
    angle = math.degrees(math.acos(min(1.0, abs(float(a @ V)) / float(np.linalg.norm(a) * np.linalg.norm(V)))))
    if angle <= _SKEW_DEG:
        return None
    return Cause(
        "skew",
        f"V is not along a principal axis: the section bends {angle:.0f} deg off V. S and I are taken about both axes "
        "(with Iyz); the flow turns along the walls, and a formula about one axis would be farther off.",
    )


_ALL = (_flange, _corner, _layers, _walls, _poisson, _radius, _skew)
