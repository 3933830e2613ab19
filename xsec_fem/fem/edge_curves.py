"""The edges of a mesh as polynomial curves, and their pieces that only rise or only fall along a direction.

    x(u), u from 0 to 1, walks counter-clockwise round the edge's first triangle; height = n . x, position = t . x,

t the direction that has n on its left. A line n . x = level crosses a piece once or not at all.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edge_integrals import edge_nodes
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.polynomial_roots import evaluate, turning_points

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_STRAIGHT = (
    1e-12  # inner nodes this share of the chord, or of the largest coordinate, off an even division are round-off
)


def tangent_of(normal: FloatArray) -> FloatArray:
    """Return the unit direction, shape (2,) [-], that has the unit normal (2,) on its left: (0, 1) -> (1, 0)."""
    return np.array([normal[1], -normal[0]])


@dataclass(frozen=True)
class EdgePieces:
    """Pieces of edges along one direction.

    Attributes
    ----------
    normal : (2,) the unit direction along which heights are measured.
    edge : (J,) edge of each piece, ascending.
    bounds : (J, 2) parameters where it starts and ends.
    heights : (J, 2) heights there, strictly apart or equal [mm].
    """

    normal: FloatArray
    edge: IntArray
    bounds: FloatArray
    heights: FloatArray

    @cached_property
    def low(self) -> FloatArray:
        """Lower of the two heights, shape (J,) [mm]."""
        return np.asarray(self.heights.min(axis=1))

    @cached_property
    def high(self) -> FloatArray:
        """Higher of the two heights, shape (J,) [mm]."""
        return np.asarray(self.heights.max(axis=1))

    @property
    def rising(self) -> npt.NDArray[np.bool_]:
        """True where the height grows with the parameter, shape (J,)."""
        result: npt.NDArray[np.bool_] = self.heights[:, 1] > self.heights[:, 0]
        return result


@dataclass(frozen=True)
class EdgeCurves:
    """All edges of a mesh as curves."""

    mesh: Mesh
    edges: Edges

    @cached_property
    def nodes(self) -> IntArray:
        """Nodes of each edge, walking round its first triangle, shape (K, p+1)."""
        return edge_nodes(self.mesh, self.edges, np.arange(len(self.edges.corners)))

    @cached_property
    def coefficients(self) -> FloatArray:
        """Coefficients of x(u), lowest power first, shape (K, p+1, 2) [mm]."""
        powers = np.arange(self.mesh.order + 1)
        inverse = np.linalg.inv((powers[:, None] / self.mesh.order) ** powers)
        result: FloatArray = np.einsum("ij,kjd->kid", inverse, self.mesh.nodes[self.nodes])
        # exact ends and exact chords: a straight edge has no round-off in its higher coefficients
        x = self.mesh.nodes[self.nodes]
        straight = ~self.curved
        result[straight] = 0.0
        result[:, 0] = x[:, 0]
        result[straight, 1] = x[straight, -1] - x[straight, 0]
        return result

    @cached_property
    def curved(self) -> npt.NDArray[np.bool_]:
        """True for edges that are not straight with evenly spaced nodes, shape (K,)."""
        x = self.mesh.nodes[self.nodes]
        share = np.linspace(0.0, 1.0, self.mesh.order + 1)[:, None]
        chord = x[:, -1] - x[:, 0]
        off = np.abs(x - (x[:, :1] + share * chord[:, None])).max(axis=(1, 2))
        result: npt.NDArray[np.bool_] = off > _STRAIGHT * np.maximum(np.abs(chord).max(axis=1), np.abs(x).max())
        return result

    @cached_property
    def size(self) -> float:
        """Longer side of the section's bounding box [mm]."""
        return float(np.ptp(self.mesh.nodes, axis=0).max())

    def points(self, edge: IntArray, u: FloatArray) -> FloatArray:
        """Return x(u), shape (J, 2) or (J, m, 2), on edges (J,) at u (J,) or (J, m) [mm]."""
        c = self.coefficients[edge]
        return np.stack([evaluate(c[..., d], u) for d in (0, 1)], axis=-1)

    def pieces(self, normal: FloatArray) -> EdgePieces:
        """Return the pieces of all edges along a unit direction of shape (2,), arrays shaped as in EdgePieces; heights in mm."""
        heights = self.mesh.nodes @ normal
        straight, bent = np.flatnonzero(~self.curved), np.flatnonzero(self.curved)
        ends = heights[self.nodes[:, [0, -1]]]
        edge = [straight]
        bounds, height = [np.tile([0.0, 1.0], (len(straight), 1))], [ends[straight]]
        if len(bent):
            polynomial = self.coefficients[bent] @ normal
            breaks = turning_points(polynomial)
            levels = evaluate(polynomial, breaks)
            for place, column in ((0.0, 0), (1.0, 1)):  # the nodes' own heights: neighbours must agree to the last bit
                levels = np.where(breaks == place, ends[bent, column : column + 1], levels)
            for k in range(breaks.shape[1] - 1):
                used = breaks[:, k] < breaks[:, k + 1]
                edge.append(bent[used])
                bounds.append(breaks[used, k : k + 2])
                height.append(levels[used, k : k + 2])
        order = np.argsort(np.concatenate(edge), kind="stable")
        return EdgePieces(
            normal, np.concatenate(edge)[order], np.concatenate(bounds)[order], np.concatenate(height)[order]
        )
