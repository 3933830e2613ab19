"""Nodes split by part: where two parts meet, each keeps its own value; inside a part a node has one."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mapping import map_points, physical_gradients
from xsec_fem.fem.mesh import Mesh

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_BATCH = 16384  # triangles at a time, to bound memory


@dataclass(frozen=True)
class PartNodes:
    """A numbering of (node, part) pairs.

    Attributes
    ----------
    mesh : the mesh.
    node : (S,) mesh node of each pair.
    part : (S,) part of each pair.
    triangles : (M, n) pair numbers of each triangle's nodes.
    """

    mesh: Mesh
    node: IntArray
    part: IntArray
    triangles: IntArray

    @classmethod
    def of(cls, mesh: Mesh) -> PartNodes:
        """Number the pairs of a mesh, sorted by part, then node; arrays shaped as in the class, (S,) and (M, n)."""
        size = len(mesh.nodes)
        keys = mesh.triangles + size * mesh.part_of[:, None]
        pairs, triangles = np.unique(keys, return_inverse=True)
        return cls(mesh, pairs % size, pairs // size, triangles.reshape(keys.shape))

    @cached_property
    def positions(self) -> FloatArray:
        """Coordinates of the pairs in the file's axes, shape (S, 2) [mm]."""
        return self.mesh.nodes[self.node]

    @cached_property
    def _sharing(self) -> FloatArray:
        """(S,) number of triangles of the part at the node."""
        return np.bincount(self.triangles.ravel(), minlength=len(self.node)).astype(float)

    def mean_gradients(self, u: FloatArray) -> FloatArray:
        """Return gradients of nodal functions u (N, k), shape (S, k, 2) [unit of u per mm].

        The value at a node is the mean over the triangles of its part there.
        """
        mesh, count = self.mesh, u.shape[1]
        total = np.zeros((len(self.node), count, 2))
        for straight in (True, False):
            chosen = np.flatnonzero(mesh.curved != straight)
            for start in range(0, len(chosen), _BATCH):
                elements = chosen[start : start + _BATCH]
                points = mesh.element.nodes
                _, jacobian, det = map_points(mesh, elements, points, straight)
                values = physical_gradients(mesh.element, points, u[mesh.triangles[elements]], jacobian, det)
                where = self.triangles[elements].ravel()
                for k in range(count):
                    for d in range(2):
                        total[:, k, d] += np.bincount(where, values[:, :, k, d].ravel(), minlength=len(total))
        return total / self._sharing[:, None, None]
