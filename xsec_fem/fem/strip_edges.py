"""Edges of the mesh on a straight strip between two points."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
Strip = tuple[tuple[float, float], tuple[float, float]]

_ON_LINE = (
    1e-5  # of the section's size: a point nearer to a strip's line lies on it; the mesher moves points by 1e-6 of it
)


def on_strip(points: FloatArray, strip: Strip, size: float) -> npt.NDArray[np.bool_]:
    """Return True, shape (K,), for points (K, 2) on the straight strip between two points; `size` of the section [mm]."""
    start, along = np.array(strip[0]), np.subtract(strip[1], strip[0])
    length = float(np.hypot(*along))
    y, z = (points - start).T
    share, off = (y * along[0] + z * along[1]) / length**2, np.abs(y * along[1] - z * along[0]) / length
    result: npt.NDArray[np.bool_] = (share > 0) & (share < 1) & (off < _ON_LINE * size)
    return result


def strip_edges(mesh: Mesh, edges: Edges, chosen: IntArray, strip: Strip) -> IntArray:
    """Return those of the chosen edges (K,) whose middle lies on the straight strip between two points [mm], shape (k,)."""
    middle = mesh.nodes[edges.corners[chosen]].mean(axis=1)
    found: IntArray = chosen[on_strip(middle, strip, float(np.ptp(mesh.nodes, axis=0).max()))]
    return found
