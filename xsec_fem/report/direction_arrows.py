"""Where to draw the directions of the shear stress: an even grid inside broad material, the middle of thin walls."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.locate import reference_coordinates
from xsec_fem.recovery.stress_field import StressField
from xsec_fem.report.sheet import Box

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_FAINT = 0.02  # no arrow where the stress is below this share of the largest: its direction is of no interest
_CLOSEST = 0.7  # arrows nearer to each other than this share of the spacing are dropped
_FINEST = 12  # divisions of a triangle's side at most, when looking for places
_FULL = 0.75  # a cell of the grid filled to this share with material has its arrow in the middle


def direction_arrows(stress: StressField, box: Box, spacing: float, largest: float) -> tuple[FloatArray, FloatArray]:
    """Return places and unit directions of tau, (K, 2) each, inside a box (y0, z0, y1, z1) at about `spacing` [mm].

    `largest` is the largest |tau| away from singular corners [MPa]: where tau is small beside it there is no arrow.
    One arrow a square cell: in its middle when that is full of material, else next to the middle of the material in it.
    """
    dense = _dense_points(stress, box, spacing / 5)
    if not len(dense.places):
        return np.zeros((0, 2)), np.zeros((0, 2))
    origin = np.array([box[0] + box[2], box[1] + box[3]]) / 2
    cells, cell = np.unique(np.rint((dense.places - origin) / spacing), axis=0, return_inverse=True)
    cell = cell.ravel()
    area = np.bincount(cell, dense.weights)
    full = area >= _FULL * spacing**2
    target = np.column_stack([np.bincount(cell, dense.weights * x) for x in dense.places.T]) / area[:, None]
    target[full] = origin + cells[full] * spacing
    order = np.lexsort((np.hypot(*(dense.places - target[cell]).T), cell))
    chosen = order[np.r_[True, np.diff(cell[order]) != 0]]
    at, along = _moved(stress, dense, chosen, target, full)
    size = np.hypot(*along.T)
    kept = _thinned(at, np.minimum(area, spacing**2), _CLOSEST * spacing)
    kept = kept[size[kept] > _FAINT * largest]
    return at[kept], along[kept] / size[kept, None]


@dataclass(frozen=True)
class _Dense:
    """Points inside triangles: places (K, 2), tau (K, 2), the area each stands for (K,) and its triangle (K,)."""

    places: FloatArray
    tau: FloatArray
    weights: FloatArray
    element: IntArray


def _moved(
    stress: StressField, dense: _Dense, chosen: IntArray, target: FloatArray, full: npt.NDArray[np.bool_]
) -> tuple[FloatArray, FloatArray]:
    """Places and tau of the chosen points, those of full cells moved to their targets: all at once where these lie in the
    same triangle, by searching where not.
    """
    mesh = stress.part_nodes.mesh
    at, along, element = dense.places[chosen], dense.tau[chosen], dense.element[chosen]
    local = reference_coordinates(mesh, element, target)
    with np.errstate(invalid="ignore"):
        inside = full & (local.min(axis=1) >= 0) & (local.sum(axis=1) <= 1)
    table = mesh.element.values(local[inside])
    nodes = element[inside]
    at[inside] = np.einsum("kn,knd->kd", table, mesh.nodes[mesh.triangles[nodes]])
    along[inside] = np.einsum("kn,knd->kd", table, stress.tau_components[stress.part_nodes.triangles[nodes]])
    for k in np.flatnonzero(full & ~inside):
        y, z = target[k].tolist()
        try:
            found = stress.at(y, z)[0]
        except ValueError:  # just outside of the material: stay at the point next to it
            continue
        at[k], along[k] = (y, z), (found.tau_xy, found.tau_xz)
    return at, along


def _dense_points(stress: StressField, box: Box, wanted: float) -> _Dense:
    """Points in the box inside the triangles, at most about `wanted` [mm] apart."""
    numbering = stress.part_nodes
    mesh = numbering.mesh
    low, high = mesh.boxes
    near = np.flatnonzero(((low <= box[2:]) & (high >= box[:2])).all(axis=1))
    corner = mesh.nodes[mesh.triangles[near, :3]]
    side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
    area = (side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]) / 2
    divisions = np.clip(np.ceil((high[near] - low[near]).max(axis=1) / wanted), 3, _FINEST).astype(int)
    found = [(np.zeros((0, 2)), np.zeros((0, 2)), np.zeros(0), np.zeros(0, np.int64))]
    for count in np.unique(divisions):
        mine = near[divisions == count]
        local = _inner_points(int(count))
        table = mesh.element.values(local)
        places = (table @ mesh.nodes[mesh.triangles[mine]]).reshape(-1, 2)
        tau = (table @ stress.tau_components[numbering.triangles[mine]]).reshape(-1, 2)
        weights = np.repeat(area[divisions == count] / len(local), len(local))
        inside = (places >= box[:2]).all(axis=1) & (places <= box[2:]).all(axis=1)
        found.append((places[inside], tau[inside], weights[inside], np.repeat(mine, len(local))[inside]))
    return _Dense(*(np.concatenate(arrays) for arrays in zip(*found, strict=True)))


def _inner_points(count: int) -> FloatArray:
    """Centres of the reference triangle's count² even pieces, (count², 2)."""
    i, j = (x.ravel() for x in np.meshgrid(np.arange(count), np.arange(count)))
    upward, downward = i + j < count, i + j < count - 1
    third = np.concatenate([np.full(upward.sum(), 1 / 3), np.full(downward.sum(), 2 / 3)])
    corner = np.column_stack([np.r_[i[upward], i[downward]], np.r_[j[upward], j[downward]]])
    return np.asarray((corner + third[:, None]) / count)


def _thinned(places: FloatArray, rank: FloatArray, least: float) -> IntArray:
    """Numbers of the places to keep: high rank first, none nearer than `least` [mm] to one kept."""
    kept: list[int] = []
    for k in np.argsort(-rank, kind="stable").tolist():
        if not kept or np.hypot(*(places[kept] - places[k]).T).min() >= least:
            kept.append(k)
    return np.array(kept, np.int64)
