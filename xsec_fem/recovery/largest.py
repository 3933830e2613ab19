"""The largest stress and its place: over the nodes and between them, away from corners where it has no limit.

Nodes nearer to a singular corner than its stated distance do not take part; points on the circle of that distance do, so
that what is reported does not change with the mesh.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.locate import find_triangles
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.reference_triangle import lattice
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.stress_field import StressField

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
BoolArray = npt.NDArray[np.bool_]
Measure = Literal["tau", "von_mises"]

_FINE = 12  # divisions of a side, twice over: half a step of 1/144 misses a parabola over one side by 1e-5 of its rise
_TRIANGLES = 8  # triangles searched in each part
_ARC = 9  # points on the circle round a corner


@dataclass(frozen=True)
class Largest:
    """A largest value [MPa] at (y, z) [mm] in `part`, with the stresses there.

    `beside_corner` is True when it was read within twice the stated distance of a singular corner: the corner governs it.
    """

    value: float
    y: float
    z: float
    part: str
    tau_xy: float
    tau_xz: float
    sigma_x: float
    beside_corner: bool = False


@dataclass(frozen=True)
class Samples:
    """Points inside triangles at which nodal fields are read.

    Attributes
    ----------
    elements : (K,) triangle of each point.
    values : (K, n) basis functions there.
    places : (K, 2) the points in the file's axes [mm].
    corner : (K,) number of the singular corner a point belongs to, -1 for none.
    """

    elements: IntArray
    values: FloatArray
    places: FloatArray
    corner: IntArray


@dataclass(frozen=True)
class Readings:
    """Stresses read at points: places (K, 2), part (K,), tau (K, 2), sigma_x (K,) [MPa]."""

    places: FloatArray
    part: IntArray
    tau: FloatArray
    sigma_x: FloatArray

    def measure(self, what: Measure) -> FloatArray:
        """Return |tau| or the equivalent stress, shape (K,) [MPa] (R. von Mises, 1913)."""
        shear = (self.tau**2).sum(axis=1)
        return np.asarray(np.sqrt(shear if what == "tau" else self.sigma_x**2 + 3 * shear))

    def chosen(self, which: BoolArray) -> Readings:
        """Return the readings where the mask is True, arrays of shape (k, ...) as in the class [mm, MPa]."""
        return Readings(self.places[which], self.part[which], self.tau[which], self.sigma_x[which])

    def at(self, index: int, value: float, part_names: Sequence[str], corners: Sequence[Corner]) -> Largest:
        """Return one reading as a Largest of that value [MPa]."""
        (y, z), (tau_xy, tau_xz) = self.places[index].tolist(), self.tau[index].tolist()
        beside = any(math.hypot(y - corner.y, z - corner.z) < 2 * corner.distance for corner in corners)
        name = part_names[int(self.part[index])]
        return Largest(value, y, z, name, tau_xy, tau_xz, float(self.sigma_x[index]), beside)


def corner_rings(mesh: Mesh, corners: Sequence[Corner]) -> Samples:
    """Return the points inside the material on the circles of the stated distance round all singular corners [mm].

    Arrays are shaped as in Samples.
    """
    elements, values, places, owner = [], [], [], []
    for number, corner in enumerate(corners):
        first, last = corner.directions
        for angle in first + (last - first) * np.linspace(0.0, 1.0, _ARC):
            place = (corner.y + corner.distance * np.cos(angle), corner.z + corner.distance * np.sin(angle))
            found, reference = find_triangles(mesh, place)  # none where a curved side leaves its tangent
            elements.append(found)
            values.append(mesh.element.values(reference))
            places.append(np.tile(place, (len(found), 1)))
            owner.append(np.full(len(found), number))
    if not elements:
        return Samples(
            np.zeros(0, np.int64), np.zeros((0, mesh.triangles.shape[1])), np.zeros((0, 2)), np.zeros(0, np.int64)
        )
    return Samples(np.concatenate(elements), np.vstack(values), np.vstack(places), np.concatenate(owner))


def largest_by_part(
    field: StressField, corners: Sequence[Corner], rings: Samples, what: Measure
) -> tuple[Largest, ...]:
    """Return the largest |tau| or equivalent stress in each part, in the mesh's order of parts [MPa].

    `rings` are the points of `corner_rings`, shaped as in Samples. A part that lies within the corners' distances altogether is
    read at its nodes.
    """
    numbering = field.part_nodes
    nodes = Readings(numbering.positions, numbering.part, field.tau_components, field.sigma_x)
    ring = _read(field, rings)
    result = []
    for index in range(len(numbering.mesh.part_names)):
        mine = nodes.chosen(nodes.part == index)
        clear = corner_mask(mine.places, corners)
        between = _between_nodes(field, index, corners, what)
        candidates = [mine.chosen(clear if clear.any() else ~clear), between, ring.chosen(ring.part == index)]
        best = [
            readings.at(int(np.argmax(values)), float(values.max()), numbering.mesh.part_names, corners)
            for readings, values in ((readings, readings.measure(what)) for readings in candidates)
            if len(values)
        ]
        result.append(max(best, key=lambda largest: largest.value))
    return tuple(result)


def read_beside_corners(field: StressField, rings: Samples, count: int) -> FloatArray:
    """Return the largest |tau| on the circle round each of the `count` corners, shape (count,) [MPa].

    NaN where no point lies inside.
    """
    tau = _read(field, rings).measure("tau")
    largest = np.full(count, -np.inf)
    np.maximum.at(largest, rings.corner, tau)
    return np.where(np.isfinite(largest), largest, np.nan)


def _read(field: StressField, samples: Samples) -> Readings:
    """Interpolate the nodal stresses of each sample's own part."""
    nodes = field.part_nodes.triangles[samples.elements]
    return Readings(
        samples.places,
        field.part_nodes.mesh.part_of[samples.elements],
        np.einsum("kn,knd->kd", samples.values, field.tau_components[nodes]),
        np.einsum("kn,kn->k", samples.values, field.sigma_x[nodes]),
    )


def _between_nodes(field: StressField, part: int, corners: Sequence[Corner], what: Measure) -> Readings:
    """Readings round the best point of a lattice in the few triangles of a part whose nodes carry the largest values."""
    numbering, mesh = field.part_nodes, field.part_nodes.mesh
    size = np.where(corner_mask(numbering.positions, corners), field.tau if what == "tau" else field.von_mises, 0.0)
    mine = np.flatnonzero(mesh.part_of == part)
    tops = mine[np.argsort(size[numbering.triangles[mine]].max(axis=1))[::-1][:_TRIANGLES]]
    table = mesh.element.values(lattice(_FINE) / _FINE)
    places = (table @ mesh.nodes[mesh.triangles[tops]]).reshape(-1, 2)
    nowhere = np.full(len(places), -1)
    samples = Samples(np.repeat(tops, len(table)), np.tile(table, (len(tops), 1)), places, nowhere)
    coarse = _read(field, samples)
    value = np.where(corner_mask(places, corners), coarse.measure(what), -1.0)
    best = int(np.argmax(value))
    if value[best] < 0:
        return coarse.chosen(value >= 0)
    fine = _around(mesh, int(samples.elements[best]), lattice(_FINE)[best % len(table)] / _FINE)
    return _read(field, fine).chosen(corner_mask(fine.places, corners))


def _around(mesh: Mesh, element: int, at: FloatArray) -> Samples:
    """Points of a triangle round reference coordinates (2,), _FINE times closer than the first lattice, `at` among them."""
    step = np.arange(-_FINE, _FINE + 1) / _FINE**2
    points = at + np.stack(np.meshgrid(step, step), axis=-1).reshape(-1, 2)
    points = points[(points.min(axis=1) >= 0) & (points.sum(axis=1) <= 1 + 1e-12)]
    table = mesh.element.values(points)
    nowhere = np.full(len(points), -1)
    return Samples(np.full(len(points), element), table, table @ mesh.nodes[mesh.triangles[element]], nowhere)
