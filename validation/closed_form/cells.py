"""Thin walls with closed cells: flows by equilibrium at the nodes and compatibility of warping round each cell.

Each wall carries q(s) = q0 - ∫ E t (a . r) ds; the walls' q0 follow from the balance of flow at every node and from
∮ q/(G t) ds = 2 A_m (twist + the Poisson term) round every cell (R. Bredt, Kritische Bemerkungen zur Drehungselastizität, Z.
VDI 40, 1896; the indeterminate shear flow of several cells: T. H. G. Megson, Aircraft Structures for Engineering Students, ch.
on closed section beams, from memory; the system below was derived here). Stresses are even across the thickness.

The Poisson term: where the section is free to change its shape, grad psi - d is compatible, and ∮ d . ds round a cell of area A_m
with centroid c is 2 nu A_m (a_y z_c - a_z y_c), a = EI^-1 V (derived here). It does not fade with the thickness: cells to
either side of the centroid are twisted against each other. Textbooks leave it out (nu = 0), as if diaphragms held the
section's shape.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]
Round = tuple[tuple[int, int], ...]  # walls of a cell, counter-clockwise, +1 along the wall, -1 against it


@dataclass(frozen=True)
class ThinWalls:
    """Mid-lines: nodes (N, 2), walls (W, 2) from node to node, thicknesses t (W,), cells."""

    nodes: FloatArray
    walls: npt.NDArray[np.int64]
    t: FloatArray
    cells: Sequence[Round]
    nu: float = 0.0

    @property
    def _ends(self) -> tuple[FloatArray, FloatArray]:
        return self.nodes[self.walls[:, 0]], self.nodes[self.walls[:, 1]]

    @property
    def lengths(self) -> FloatArray:
        """(W,) of the mid-lines."""
        a, b = self._ends
        return np.asarray(np.hypot(*(b - a).T))

    @property
    def centroid(self) -> FloatArray:
        """(2,) of the areas t ds."""
        a, b = self._ends
        area = self.t * self.lengths
        return np.asarray(area @ ((a + b) / 2) / area.sum())

    @property
    def second_moments(self) -> FloatArray:
        """[[∫y², ∫yz], [∫yz, ∫z²]] of the mid-lines about the centroid."""
        a, b = (end - self.centroid for end in self._ends)
        area, m = self.t * self.lengths, (a + b) / 2
        return np.asarray(np.einsum("w,wi,wj->ij", area, m, m) + np.einsum("w,wi,wj->ij", area / 12, b - a, b - a))

    def _round(self) -> FloatArray:
        """(C, W): the cells as sums of walls."""
        rows = np.zeros((len(self.cells), len(self.t)))
        for row, cell in zip(rows, self.cells, strict=True):
            for wall, sign in cell:
                row[wall] = sign
        return rows

    def areas(self) -> FloatArray:
        """(C,) areas enclosed by the cells' mid-lines."""
        a, b = self._ends
        return np.asarray(self._round() @ (a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]) / 2)

    def _cell_centroids(self) -> FloatArray:
        """(C, 2) from the section's centroid."""
        a, b = (end - self.centroid for end in self._ends)
        cross = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]
        return np.asarray(self._round() @ (cross[:, None] * (a + b)) / (6 * self.areas()[:, None]))

    def torsion(self) -> tuple[float, FloatArray]:
        """IT = 4 A_mᵀ D⁻¹ A_m and the flows of the walls at unit twist, D = ∮ ds/t with the shared walls off its diagonal."""
        around, areas = self._round(), self.areas()
        D = np.einsum("cw,dw,w->cd", around, around, self.lengths / self.t)
        flows = np.linalg.solve(D, 2 * areas)
        return float(2 * areas @ flows), around.T @ flows

    def shear(self, force: Sequence[float]) -> tuple[FloatArray, FloatArray]:
        """(W,) flows at the start and in the middle of each wall under a force without mean twist, positive along the wall."""
        a, b = (end - self.centroid for end in self._ends)
        gradient = np.linalg.solve(self.second_moments, np.asarray(force, float))
        fa, fb, L = a @ gradient, b @ gradient, self.lengths
        whole = -self.t * L * (fa + fb) / 2  # q(end) - q(start)
        mean = -self.t * L * (fa / 3 + fb / 6)  # mean of q(s) - q(start)
        # balance: what leaves by starting walls is what arrives by ending ones
        starts = (np.arange(len(self.nodes))[:, None] == self.walls[:, 0]).astype(float)
        ends = (np.arange(len(self.nodes))[:, None] == self.walls[:, 1]).astype(float)
        rows = np.vstack([(starts - ends)[:-1], self._round() * L / self.t])
        centre = self._cell_centroids()
        # G/E = 1/(2 (1 + nu)) times 2 nu A_m (a_z y_c - a_y z_c)
        free = self.nu / (1 + self.nu) * self.areas() * (gradient[1] * centre[:, 0] - gradient[0] * centre[:, 1])
        right = np.concatenate([(ends @ whole)[:-1], free - self._round() @ (L / self.t * mean)])
        start = np.linalg.solve(rows, right)
        middle = start - self.t * L / 2 * (3 * fa + fb) / 4
        return start, middle

    def shear_centre(self) -> FloatArray:
        """(2,) where a force causes no twist: the torque of its flows about the nodes' origin."""
        a, b = self._ends
        result = []
        for force, sign in (((0.0, 1.0), 1.0), ((1.0, 0.0), -1.0)):
            start, _ = self.shear(force)
            ra, rb = a - self.centroid, b - self.centroid
            gradient = np.linalg.solve(self.second_moments, force)
            mean = start - self.t * self.lengths * (ra @ gradient / 3 + rb @ gradient / 6)
            arm = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]
            result.append(sign * float(arm @ mean))
        return np.array(result)


def two_cell_box(
    depth: float, widths: tuple[float, float], webs: Sequence[float], flange: float, nu: float = 0.0
) -> ThinWalls:
    """Two cells side by side: mid-line depth and cell widths, three webs from left to right; lower left node at the origin.

    Walls 0-2 the webs upward, 3 and 4 the bottom, 5 and 6 the top, to the right.
    """
    y = [0.0, widths[0], widths[0] + widths[1]]
    nodes = np.array([(x, z) for z in (0.0, depth) for x in y])
    walls = np.array([(0, 3), (1, 4), (2, 5), (0, 1), (1, 2), (3, 4), (4, 5)])
    left: Round = ((3, 1), (1, 1), (5, -1), (0, -1))
    right: Round = ((4, 1), (2, 1), (6, -1), (1, -1))
    return ThinWalls(nodes, walls, np.array([*webs, *[flange] * 4]), (left, right), nu)


def square_tube_shear_coefficient() -> float:
    """As/A = 5/12 of a square tube as t -> 0: two webs of V/2 each and flanges of linear flow; derived here.

    side 1, I = 2/3 t: q = 3/4 V (s from the flange's middle) in half a flange of 1/2, 3/8 + 3/2 (s - s²)/2 in a web of 1.
    """
    x, weight = np.polynomial.legendre.leggauss(4)
    flange, web = (x + 1) / 4, (x + 1) / 2
    square = 4 * (weight @ (0.75 * flange) ** 2) / 4 + 2 * (weight @ (0.375 + 0.75 * (web - web**2)) ** 2) / 2
    return float(1 / (4 * square))
