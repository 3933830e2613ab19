"""Find the triangle that holds a point, and the point's reference coordinates in it."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_EDGE = 1e-7  # a point this share of a triangle outside it counts as on its edge: typed coordinates have about 8 digits
_NEWTON_STEPS = 12  # quadratic convergence from the straight triangle's coordinates: 6 suffice on any valid triangle


def reference_coordinates(mesh: Mesh, elements: IntArray, points: FloatArray) -> FloatArray:
    """Invert the map: return the reference coordinates, shape (m, 2) [-], of points (m, 2) [mm], one in each given triangle (m,).

    Points outside come back with coordinates outside the reference triangle, NaN where the map has no inverse.
    """
    x = mesh.nodes[mesh.triangles[elements]]
    side = np.stack([x[:, 1] - x[:, 0], x[:, 2] - x[:, 0]], axis=-1)
    guess: FloatArray = np.linalg.solve(side, (points - x[:, 0])[..., None])[..., 0].astype(np.float64)
    bent = np.flatnonzero(mesh.curved[elements])
    for _ in range(_NEWTON_STEPS if len(bent) else 0):
        at, xb = guess[bent], x[bent]
        value = np.einsum("mn,mnd->md", mesh.element.values(at), xb)
        jacobian = np.einsum("mnr,mnd->mdr", mesh.element.gradients(at), xb)
        det = jacobian[:, 0, 0] * jacobian[:, 1, 1] - jacobian[:, 0, 1] * jacobian[:, 1, 0]
        jacobian[~(np.abs(det) > 0)] = np.nan
        lost = ~np.isfinite(jacobian).all(axis=(1, 2)) | (np.abs(at) > 3).any(axis=1)
        jacobian[lost] = np.eye(2)
        step = np.linalg.solve(jacobian, (points[bent] - value)[..., None])[..., 0]
        step[lost] = np.nan
        guess[bent] = at + step
    return guess


def find_triangles(mesh: Mesh, point: tuple[float, float]) -> tuple[IntArray, FloatArray]:
    """Return all triangles that hold the point (y, z) [mm], edges included, and its reference coordinates there [-].

    Their shape is (m,) and (m, 2); both are empty when the point lies outside the section.
    """
    target = np.asarray(point, float)
    low, high = mesh.boxes
    margin = 0.2 * (high - low) * mesh.curved[:, None] + _EDGE * (high - low).max(axis=1, keepdims=True)
    near = np.flatnonzero(((low - margin <= target) & (target <= high + margin)).all(axis=1))
    if not len(near):
        return near, np.zeros((0, 2))
    reference = reference_coordinates(mesh, near, np.broadcast_to(target, (len(near), 2)))
    third = 1.0 - reference.sum(axis=1)
    with np.errstate(invalid="ignore"):
        inside = (reference.min(axis=1) >= -_EDGE) & (third >= -_EDGE)
    return near[inside], reference[inside]
