"""The largest stress and its place: over the nodes and between them, away from corners where it has no limit.

Nodes nearer to a singular corner than its stated distance do not take part; points on the circle of that distance do, so
that what is reported does not change with the mesh.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.locate import find_triangles
from xsec_fem.fem.reference_triangle import lattice
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.stress_field import PointStress, StressField

FloatArray = npt.NDArray[np.float64]
Measure = Callable[[StressField], FloatArray]

_FINE = 12  # divisions of a triangle's side when searching between nodes: a degree-4 peak is met to about 1e-4
_TRIANGLES = 8  # triangles searched
_ARC = 9  # points on the circle round a corner


@dataclass(frozen=True)
class Largest:
    """A largest value [MPa] at (y, z) [mm] in `part`, with the stresses there.

    `beside_corner` is True when it was read on the circle round a singular corner.
    """

    value: float
    y: float
    z: float
    part: str
    tau_xy: float
    tau_xz: float
    sigma_x: float
    beside_corner: bool = False


def tau_of(stress: PointStress) -> float:
    """Magnitude of the shear stress [MPa]."""
    return stress.tau


def von_mises_of(stress: PointStress) -> float:
    """Equivalent stress [MPa] (R. von Mises, 1913)."""
    return stress.von_mises


def largest_by_part(
    field: StressField, corners: Sequence[Corner], measure: Callable[[PointStress], float]
) -> tuple[Largest, ...]:
    """Return the largest value of a measure (tau_of or von_mises_of) in each part, in the mesh's order of parts [MPa]."""
    values = field.tau if measure is tau_of else field.von_mises
    clear = corner_mask(field.part_nodes.positions, corners)
    beside = [candidate for corner in corners for candidate in _on_circle(field, corner, measure)]
    result = []
    for index, name in enumerate(field.part_nodes.mesh.part_names):
        mine = field.part_nodes.part == index
        chosen = np.flatnonzero(mine & clear) if (mine & clear).any() else np.flatnonzero(mine)
        top = int(chosen[np.argmax(values[chosen])])
        candidates = [_at_node(field, top, measure), *_between_nodes(field, chosen, values, measure, corners)]
        candidates += [candidate for candidate in beside if candidate.part == name]
        result.append(max(candidates, key=lambda candidate: candidate.value))
    return tuple(result)


def _make(stress: PointStress, y: float, z: float, value: float, beside: bool = False) -> Largest:
    return Largest(
        value, float(y), float(z), stress.part, stress.tau_xy, stress.tau_xz, stress.sigma_x, beside_corner=beside
    )


def _at_node(field: StressField, node: int, measure: Callable[[PointStress], float]) -> Largest:
    numbering = field.part_nodes
    stress = PointStress(
        numbering.mesh.part_names[numbering.part[node]],
        float(field.tau_xy[node]),
        float(field.tau_xz[node]),
        float(field.sigma_x[node]),
    )
    y, z = numbering.positions[node]
    return _make(stress, y, z, measure(stress))


def _between_nodes(
    field: StressField,
    chosen: npt.NDArray[np.int64],
    values: FloatArray,
    measure: Callable[[PointStress], float],
    corners: Sequence[Corner],
) -> list[Largest]:
    """The best point of a fine lattice in the few triangles of the part whose nodes carry the largest values."""
    numbering, mesh = field.part_nodes, field.part_nodes.mesh
    allowed = np.zeros(len(values))
    allowed[chosen] = values[chosen]
    of_triangle = allowed[numbering.triangles].max(axis=1)
    tops = np.argsort(of_triangle)[::-1][:_TRIANGLES]
    tops = tops[(numbering.part[numbering.triangles[tops, 0]] == numbering.part[chosen[0]]) & (of_triangle[tops] > 0)]
    table = mesh.element.values(lattice(_FINE) / _FINE)
    nodes = numbering.triangles[tops]
    tau, sigma = table @ field.tau_components[nodes], table @ field.sigma_x[nodes][..., None]
    places = table @ mesh.nodes[mesh.triangles[tops]]
    shear = (tau**2).sum(axis=-1)
    size = np.sqrt(shear) if measure is tau_of else np.sqrt(sigma[..., 0] ** 2 + 3 * shear)
    size[~corner_mask(places, corners)] = -1.0
    if not size.size or size.max() < 0:
        return []
    m, q = np.unravel_index(int(np.argmax(size)), size.shape)
    part = mesh.part_names[mesh.part_of[tops[m]]]
    stress = PointStress(part, float(tau[m, q, 0]), float(tau[m, q, 1]), float(sigma[m, q, 0]))
    return [_make(stress, places[m, q, 0], places[m, q, 1], float(size[m, q]))]


def _on_circle(field: StressField, corner: Corner, measure: Callable[[PointStress], float]) -> list[Largest]:
    """The largest value of each part on the circle round a singular corner, inside the material."""
    first, last = corner.directions
    best: dict[str, Largest] = {}
    for angle in first + (last - first) * np.linspace(0.0, 1.0, _ARC):
        y, z = corner.y + corner.distance * np.cos(angle), corner.z + corner.distance * np.sin(angle)
        if not len(find_triangles(field.part_nodes.mesh, (y, z))[0]):
            continue  # a curved side leaves its tangent
        for stress in field.at(y, z):
            candidate = _make(stress, y, z, measure(stress), beside=True)
            if stress.part not in best or candidate.value > best[stress.part].value:
                best[stress.part] = candidate
    return list(best.values())
