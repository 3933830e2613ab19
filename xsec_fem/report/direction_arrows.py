"""Where to draw the directions of the shear stress: an even grid inside broad material, the middle of thin walls."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.recovery.stress_field import StressField
from xsec_fem.report.sheet import Box

FloatArray = npt.NDArray[np.float64]

_FAINT = 0.02  # no arrow where the stress is below this share of the largest: its direction is of no interest
_CLOSEST = 0.7  # arrows nearer to each other than this share of the spacing are dropped
_FINEST = 12  # divisions of a triangle's side at most, when looking for places
_FULL = 0.75  # a cell of the grid filled to this share with material has its arrow in the middle


def direction_arrows(stress: StressField, box: Box, spacing: float) -> tuple[FloatArray, FloatArray]:
    """Return places and unit directions of tau, (K, 2) each, inside a box (y0, z0, y1, z1) at about `spacing` [mm].

    One arrow a square cell: in its middle when that is full of material, else next to the middle of the material in it.
    """
    places, tau, weights = _dense_points(stress, box, spacing / 5)
    inside = (places >= box[:2]).all(axis=1) & (places <= box[2:]).all(axis=1)
    places, tau, weights = places[inside], tau[inside], weights[inside]
    if not len(places):
        return np.zeros((0, 2)), np.zeros((0, 2))
    origin = np.array([box[0] + box[2], box[1] + box[3]]) / 2
    cells, cell = np.unique(np.rint((places - origin) / spacing), axis=0, return_inverse=True)
    cell = cell.ravel()
    share = np.bincount(cell, weights) / spacing**2
    mean = np.column_stack([np.bincount(cell, weights * x) for x in places.T]) / (share * spacing**2)[:, None]
    off = np.hypot(*(places - mean[cell]).T)
    order = np.lexsort((off, cell))
    chosen = order[np.r_[True, np.diff(cell[order]) != 0]]
    at, along = places[chosen], tau[chosen]
    for k in np.flatnonzero(share >= _FULL):
        middle = origin + cells[k] * spacing
        found = stress.at(*middle.tolist()) if (np.abs(middle - at[k]) < spacing).all() else ()
        if found:
            at[k], along[k] = middle, (found[0].tau_xy, found[0].tau_xz)
    size = np.hypot(*along.T)
    kept = _thinned(at, np.minimum(share, 1.0), _CLOSEST * spacing)
    kept = kept[size[kept] > _FAINT * stress.tau.max()]
    return at[kept], along[kept] / size[kept, None]


def _dense_points(stress: StressField, box: Box, wanted: float) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Points inside the triangles that reach into the box, at most about `wanted` [mm] apart: places, tau and area of each."""
    numbering = stress.part_nodes
    mesh = numbering.mesh
    low, high = mesh.boxes
    near = np.flatnonzero(((low <= box[2:]) & (high >= box[:2])).all(axis=1))
    corner = mesh.nodes[mesh.triangles[near, :3]]
    side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
    area = (side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]) / 2
    divisions = np.clip(np.ceil((high[near] - low[near]).max(axis=1) / wanted), 3, _FINEST).astype(int)
    points, values, weights = [np.zeros((0, 2))], [np.zeros((0, 2))], [np.zeros(0)]
    for count in np.unique(divisions):
        mine = divisions == count
        local = _inner_points(int(count))
        table = mesh.element.values(local)
        points.append((table @ mesh.nodes[mesh.triangles[near[mine]]]).reshape(-1, 2))
        values.append((table @ stress.tau_components[numbering.triangles[near[mine]]]).reshape(-1, 2))
        weights.append(np.repeat(area[mine] / len(local), len(local)))
    return np.concatenate(points), np.concatenate(values), np.concatenate(weights)


def _inner_points(count: int) -> FloatArray:
    """Centres of the reference triangle's count² even pieces, (count², 2)."""
    i, j = (x.ravel() for x in np.meshgrid(np.arange(count), np.arange(count)))
    upward, downward = i + j < count, i + j < count - 1
    third = np.concatenate([np.full(upward.sum(), 1 / 3), np.full(downward.sum(), 2 / 3)])
    corner = np.column_stack([np.r_[i[upward], i[downward]], np.r_[j[upward], j[downward]]])
    return np.asarray((corner + third[:, None]) / count)


def _thinned(places: FloatArray, rank: FloatArray, least: float) -> npt.NDArray[np.int64]:
    """Numbers of the places to keep: high rank first, none nearer than `least` [mm] to one kept."""
    kept: list[int] = []
    for k in np.argsort(-rank, kind="stable").tolist():
        if not kept or np.hypot(*(places[kept] - places[k]).T).min() >= least:
            kept.append(k)
    return np.array(kept, np.int64)
