"""The mesh as it is drawn: each triangle of order p cut into p² flat ones on the nodes split by part, and the parts' outlines."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.part_nodes import PartNodes

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@dataclass(frozen=True)
class DrawingMesh:
    """What all pictures of a result share.

    Attributes
    ----------
    places : (S, 2) nodes split by part [mm].
    triangles : (K, 3) flat triangles on them.
    outlines : closed polylines of nodes (n,) round every part and its holes.
    part : (S,) part of each node.
    walls : (P,) mean thickness of each part, twice its area over its perimeter [mm].
    clear : (S,) True away from the corners where the stress has no limit.
    """

    places: FloatArray
    triangles: IntArray
    outlines: tuple[IntArray, ...]
    part: IntArray
    walls: FloatArray
    clear: npt.NDArray[np.bool_]

    @property
    def box(self) -> tuple[float, float, float, float]:
        """(y min, z min, y max, z max) [mm]."""
        (y0, z0), (y1, z1) = self.places.min(axis=0).tolist(), self.places.max(axis=0).tolist()
        return y0, z0, y1, z1

    @property
    def loops(self) -> list[FloatArray]:
        """The outlines as points, (n, 2) each, closing point repeated [mm]."""
        return [self.places[outline] for outline in self.outlines]


def drawing_mesh(numbering: PartNodes, clear: npt.NDArray[np.bool_] | None = None) -> DrawingMesh:
    """Return the flat triangles (K, 3) and outlines of a mesh's split nodes; `clear` (S,) is all True when None [mm]."""
    flat = small_triangles(numbering.mesh.element.nodes, numbering.mesh.order)
    triangles = numbering.triangles[:, flat].reshape(-1, 3)
    edges = _used_once(triangles)
    places = numbering.positions
    ends = places[edges]
    perimeter = np.bincount(numbering.part[edges[:, 0]], np.hypot(*(ends[:, 1] - ends[:, 0]).T))
    side1, side2 = places[triangles[:, 1]] - places[triangles[:, 0]], places[triangles[:, 2]] - places[triangles[:, 0]]
    double_area = side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]
    area = np.bincount(numbering.part[triangles[:, 0]], double_area / 2)
    clear = np.ones(len(places), bool) if clear is None else clear
    return DrawingMesh(places, triangles, _chained(edges), numbering.part, 2 * area / perimeter, clear)


def small_triangles(reference_nodes: FloatArray, order: int) -> IntArray:
    """Return the p² triangles (p², 3) between a triangle's nodes (n, 2), counter-clockwise, as local node numbers."""
    steps = np.rint(reference_nodes * order).astype(int).tolist()
    at = {(i, j): k for k, (i, j) in enumerate(steps)}
    upward = [(at[i, j], at[i + 1, j], at[i, j + 1]) for i, j in at if i + j < order]
    downward = [(at[i + 1, j], at[i + 1, j + 1], at[i, j + 1]) for i, j in at if i + j < order - 1]
    return np.array(upward + downward, np.int64)


def _used_once(triangles: IntArray) -> IntArray:
    """(L, 2) edges that belong to one triangle only, in its walking direction."""
    edges = np.concatenate([triangles[:, [0, 1]], triangles[:, [1, 2]], triangles[:, [2, 0]]])
    size = int(edges.max()) + 1
    keys = edges.min(axis=1) * size + edges.max(axis=1)
    _, first, counts = np.unique(keys, return_index=True, return_counts=True)
    return np.asarray(edges[first[counts == 1]])


def _chained(edges: IntArray) -> tuple[IntArray, ...]:
    """Closed polylines made of the directed edges (L, 2); where two loops share a node, either way on is right."""
    following: dict[int, list[int]] = {}
    for a, b in edges.tolist():
        following.setdefault(a, []).append(b)
    loops = []
    while following:
        start = next(iter(following))
        loop = [start]
        while loop[-1] in following:
            nexts = following[loop[-1]]
            last = loop[-1]
            loop.append(nexts.pop())
            if not nexts:
                del following[last]
        loops.append(np.array(loop, np.int64))
    return tuple(loops)
