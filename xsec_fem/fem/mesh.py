"""The triangle mesh: checked once on entry, never changed afterwards.

Corner, edge and node numbering of one triangle (order 3 shown), the numbering of gmsh for every order 1 to 5:

    z                   corners 0 1 2, counter-clockwise
    |   2               edge 0 from corner 0 to 1, edge 1 from 1 to 2, edge 2 from 2 to 0
    |   7 6             then order-1 nodes on each edge in walking direction: 3 4 | 5 6 | 7 8
    |   8 9 5           then the inner nodes, numbered as a triangle of order - 3
    |   0 3 4 1
    +------------ y

Edges of an element are straight or curved polynomials of the mesh's order through their nodes.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.fem.quadrature import triangle_rule
from xsec_fem.fem.reference_triangle import LagrangeTriangle, lagrange_triangle, node_count, reflected_numbering

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_DIGITS = 16 * np.finfo(float).eps  # positions of side nodes carry a few roundings of their coordinates
_STRAIGHT = 1e-10  # an edge node farther from the chord's even division than this share of the element is a curve's


@dataclass(frozen=True)
class Mesh:
    """A conforming mesh of Lagrange triangles with named parts.

    Attributes
    ----------
    nodes : (N, 2) coordinates y, z in the section file's axes [mm].
    triangles : (M, (p+1)(p+2)/2) node numbers, in the order drawn above.
    part_of : (M,) index into `part_names` of each triangle.
    part_names : names of the parts; every one has at least one triangle.
    source : one line on where the mesh came from.

    Raises
    ------
    MeshingError
        When array lengths disagree, or a triangle is flat or folded (det J <= 0); the message names it and its place.
    """

    nodes: FloatArray
    triangles: IntArray
    part_of: IntArray
    part_names: tuple[str, ...]
    source: str = ""

    @classmethod
    def build(
        cls, nodes: FloatArray, triangles: IntArray, part_of: IntArray, part_names: tuple[str, ...], source: str = ""
    ) -> Mesh:
        """Make a mesh from raw arrays: unused nodes are dropped, clockwise triangles are turned round.

        Arrays are shaped as in the class (a third coordinate of the nodes is left out) [mm]; raises MeshingError like the
        constructor.
        """
        nodes, triangles = np.asarray(nodes, float)[:, :2], np.asarray(triangles, np.int64)
        corner = nodes[triangles[:, :3]]
        side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
        clockwise = side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0] < 0
        triangles = triangles.copy()
        triangles[clockwise] = triangles[clockwise][:, reflected_numbering(order_of(triangles.shape[1]))]
        used, renumbered = np.unique(triangles, return_inverse=True)
        return cls(nodes[used], renumbered.reshape(triangles.shape), np.asarray(part_of, np.int64), part_names, source)

    def __post_init__(self) -> None:
        if self.nodes.ndim != 2 or self.nodes.shape[1] != 2:
            raise MeshingError(f"nodes must be an array of (y, z) rows, but its shape is {self.nodes.shape}")
        if len(self.triangles) == 0 or len(self.triangles) != len(self.part_of):
            raise MeshingError(f"{len(self.triangles)} triangles, but {len(self.part_of)} part numbers")
        order_of(self.triangles.shape[1])
        if self.triangles.min() < 0 or self.triangles.max() >= len(self.nodes):
            raise MeshingError(
                f"triangles use node numbers {self.triangles.min()} to {self.triangles.max()}, "
                f"but there are {len(self.nodes)} nodes"
            )
        if not np.isfinite(self.nodes).all():
            node = int(np.argmin(np.isfinite(self.nodes).all(axis=1)))
            raise MeshingError(f"node {node} lies at {tuple(self.nodes[node].tolist())}")
        if self.part_of.min() < 0 or self.part_of.max() >= len(self.part_names):
            raise MeshingError(
                f"triangles have part numbers {self.part_of.min()} to {self.part_of.max()}, "
                f"but there are {len(self.part_names)} part names"
            )
        missing = np.setdiff1d(np.arange(len(self.part_names)), self.part_of)
        if len(missing):
            raise MeshingError(f"part {self.part_names[missing[0]]!r} has no triangle")
        self._check_orientation()

    def _check_orientation(self) -> None:
        """det J > 0 at the nodes and wherever it will be integrated, named element and place otherwise."""
        worst = self.worst_jacobian
        bad = int(np.argmin(worst))
        if worst[bad] <= 0 or not np.isfinite(worst[bad]):
            y, z = self.nodes[self.triangles[bad, :3]].mean(axis=0)
            part = self.part_names[self.part_of[bad]]
            raise MeshingError(
                f"triangle {bad} of part {part!r} at ({y:.6g}, {z:.6g}) is flat or folded: its smallest det J / mean "
                f"is {worst[bad]:.3g}. A finer mesh or a larger radius mends it"
            )

    @property
    def order(self) -> int:
        """Polynomial degree of the triangles, 1 to 5."""
        return order_of(self.triangles.shape[1])

    @property
    def element(self) -> LagrangeTriangle:
        """The reference triangle of this order."""
        return lagrange_triangle(self.order)

    @cached_property
    def curved(self) -> npt.NDArray[np.bool_]:
        """True for triangles with a curved side (or unevenly spaced side nodes), shape (M,)."""
        corner = self.nodes[self.triangles[:, :3]]
        straight = lagrange_triangle(1).values(self.element.nodes)
        size = np.linalg.norm(corner[:, 1] - corner[:, 0], axis=1) + np.linalg.norm(corner[:, 2] - corner[:, 0], axis=1)
        round_off = _DIGITS * np.abs(self.nodes).max()  # of coordinates far from the origin
        off = np.abs(self.nodes[self.triangles] - np.einsum("qk,mkd->mqd", straight, corner)).max(axis=(1, 2))
        result: npt.NDArray[np.bool_] = off > np.maximum(_STRAIGHT * size, round_off)
        return result

    @cached_property
    def worst_jacobian(self) -> FloatArray:
        """Smallest det J over the mean of |det J| of the same triangle, at its nodes and Gauss points, shape (M,) [-].

        1 for straight triangles, -1 for clockwise and 0 for flat ones.
        """
        points = np.vstack([self.element.nodes, triangle_rule(4 * self.order - 2).points])
        corner = self.nodes[self.triangles[:, :3]]
        side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
        det0 = side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]
        longest = np.maximum((side1**2).sum(axis=1), (side2**2).sum(axis=1))
        worst = np.where(np.abs(det0) > 1e-12 * longest, np.sign(det0), 0.0)
        bent = np.flatnonzero(self.curved)
        if len(bent):
            gradients = self.element.gradients(points)
            jacobian = np.einsum("qnr,mnd->mqdr", gradients, self.nodes[self.triangles[bent]])
            det = jacobian[..., 0, 0] * jacobian[..., 1, 1] - jacobian[..., 0, 1] * jacobian[..., 1, 0]
            worst[bent] = np.minimum(worst[bent], det.min(axis=1) / np.abs(det).mean(axis=1))
        return worst

    @cached_property
    def boxes(self) -> tuple[FloatArray, FloatArray]:
        """Lowest and highest coordinates of each triangle's nodes, shape (M, 2) each [mm]."""
        x = self.nodes[self.triangles]
        return x.min(axis=1), x.max(axis=1)

    def with_nodes(self, nodes: FloatArray) -> Mesh:
        """Return the same mesh with moved nodes, shape (N, 2) [mm]; used to shift and turn meshes in tests and tools.

        Raises MeshingError like the constructor.
        """
        return replace(self, nodes=nodes)


def order_of(nodes_per_triangle: int) -> int:
    """Return the order whose triangle has that many nodes; MeshingError when there is none."""
    for order in range(1, 6):
        if node_count(order) == nodes_per_triangle:
            return order
    raise MeshingError(f"triangles with {nodes_per_triangle} nodes are not Lagrange triangles of order 1 to 5")
