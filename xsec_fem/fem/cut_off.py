"""Weighted area and first moments of what lines cut off, exact also on curved sides.

With s along the line and h = n . x across it, Green's theorem with a field along s only,

    ∫_A f ds dh = ∮ (∫ f ds) dh,

leaves nothing on the line itself, where dh = 0: what is below a level needs the edges alone, each up to where the line crosses
it. An edge between two triangles of the same weight cancels, so a section of one material needs its free boundary only.
f = 1, s, h have the antiderivatives s, s²/2, s h: polynomials of the edge's parameter, integrated exactly by Gauss points.
(Green's theorem for areas and moments of polygons is common practice, no source.)
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edge_curves import EdgeCurves, EdgePieces, tangent_of
from xsec_fem.fem.line_crossings import EdgeHits, edge_hits, tolerance
from xsec_fem.fem.polynomial_roots import evaluate
from xsec_fem.fem.quadrature import interval_rule

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@dataclass(frozen=True)
class EdgeMoments:
    """The edge integrals of Green's theorem for one direction, about an origin.

    Attributes
    ----------
    curves, pieces : the edges.
    origin : (2,) point from which moments are taken [mm].
    """

    curves: EdgeCurves
    pieces: EdgePieces
    origin: FloatArray

    def between(self, piece: IntArray, start: FloatArray, end: FloatArray) -> FloatArray:
        """Return ∫ (s, s²/2, s h) dh along parts of edges, shape (J, 3) [mm², mm³].

        piece : (J,) pieces; start, end : (J,) parameters on their edges, 0 to 1 [-].
        """
        frame = np.stack([tangent_of(self.pieces.normal), self.pieces.normal], axis=1)
        polynomial = self.curves.coefficients[self.pieces.edge[piece]].copy()
        polynomial[:, 0] -= self.origin
        along, height = np.moveaxis(polynomial @ frame, -1, 0)
        slope = height[:, 1:] * np.arange(1, height.shape[1])
        rule = interval_rule(3 * self.curves.mesh.order - 1)
        u = start[:, None] + rule.points[:, 0] * (end - start)[:, None]
        s, h = evaluate(along, u), evaluate(height, u)
        weights = evaluate(slope, u) * rule.weights * (end - start)[:, None]
        return np.stack([(weights * f).sum(axis=1) for f in (s, s * s / 2, s * h)], axis=1)

    def whole(self, piece: IntArray) -> FloatArray:
        """Return the integrals over whole pieces (J,), shape (J, 3) [mm², mm³]."""
        return self.between(piece, *self.pieces.bounds[piece].T)

    def below(self, hits: EdgeHits, chosen: IntArray) -> FloatArray:
        """Return the integrals over the lower part of each crossed piece, for the chosen hits (m,), shape (m, 3) [mm², mm³]."""
        piece, u = hits.piece[chosen], hits.u[chosen]
        low, high = self.pieces.bounds[piece].T
        rising = self.pieces.rising[piece]
        return self.between(piece, np.where(rising, low, u), np.where(rising, u, high))

    def in_section_axes(self, integrals: FloatArray) -> FloatArray:
        """Turn (∫w, ∫w s, ∫w h) into (∫w, ∫w y, ∫w z), shape (..., 3) [mm², mm³ times the unit of w], y and z from the origin."""
        frame = np.stack([tangent_of(self.pieces.normal), self.pieces.normal])
        return np.concatenate([integrals[..., :1], integrals[..., 1:] @ frame], axis=-1)


def edge_jumps(curves: EdgeCurves, weight: FloatArray) -> FloatArray:
    """Return the jump of a weight across every edge, shape (K,), in the unit of the weight.

    It is that of the first triangle minus that of the second, which is zero beyond free edges; weight : (P,) per part.
    """
    sides, part_of = curves.edges.triangles, curves.mesh.part_of
    second = np.where(sides[:, 1] >= 0, weight[part_of[sides[:, 1]]], 0.0)
    return np.asarray(weight[part_of[sides[:, 0]]] - second)


def half_plane_moments(
    curves: EdgeCurves, normal: FloatArray, levels: FloatArray, weight: FloatArray, origin: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Integrate over what lies below each level, and measure the lines inside the section.

    normal : (2,) unit. levels : (L,) ascending [mm]. weight : (P,) per part, E for first moments. origin : (2,) [mm].
    Returns (∫w, ∫w y, ∫w z), shape (L, 3), y and z from the origin, and the length (L,) of each line inside [mm].
    """
    pieces = curves.pieces(normal)
    jump = edge_jumps(curves, weight)[pieces.edge]
    free = (curves.edges.triangles[:, 1] < 0)[pieces.edge]
    used = np.flatnonzero((jump != 0) | free)
    moments = EdgeMoments(curves, pieces, origin)
    whole = jump[used, None] * moments.whole(used)
    order = np.argsort(pieces.high[used], kind="stable")
    total = np.vstack([np.zeros((1, 3)), np.cumsum(whole[order], axis=0)])
    # fully below: high + slack < level, the complement of the rule for crossings
    below = total[np.searchsorted(pieces.high[used][order] + tolerance(curves), levels, side="left")]
    hits = edge_hits(curves, pieces, levels, used)
    part = jump[hits.piece, None] * moments.below(hits, np.arange(len(hits.u)))
    for column in range(3):
        below[:, column] += np.bincount(hits.line, part[:, column], minlength=len(levels))
    signed = np.where(pieces.rising[hits.piece], 1.0, -1.0) * hits.position * free[hits.piece]
    return moments.in_section_axes(below), np.bincount(hits.line, signed, minlength=len(levels)).astype(float)
