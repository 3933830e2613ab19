"""V S/I of sections built of simple pieces, with moduli and a product of inertia: equilibrium of what is cut off, nothing else.

q = ∫_A E (a . r) dA, a = EI^-1 V, r from the E-weighted centroid (D. I. Jourawski, 1856; any text on the strength of
materials; with Iyz and E derived here from the same equilibrium).
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Piece:
    """A piece of area, centroid (y, z), own second moments ∫z², ∫y², ∫yz, and modulus E."""

    area: float
    y: float
    z: float
    Iyy: float
    Izz: float
    Iyz: float = 0.0
    E: float = 1.0


def rectangle(width: float, height: float, y: float, z: float, E: float = 1.0) -> Piece:
    """A rectangle about (y, z)."""
    return Piece(width * height, y, z, width * height**3 / 12, height * width**3 / 12, 0.0, E)


def bead(leg: float, y: float, z: float, to_right: bool, upward: bool) -> Piece:
    """A right-angled triangle of equal legs, its right angle at (y, z), l⁴/36 and ∓ l⁴/72 about its centroid."""
    s, u = (1 if to_right else -1), (1 if upward else -1)
    return Piece(leg**2 / 2, y + s * leg / 3, z + u * leg / 3, leg**4 / 36, leg**4 / 36, -s * u * leg**4 / 72)


@dataclass(frozen=True)
class BuiltUp:
    """Pieces bonded to one section."""

    pieces: Sequence[Piece]

    @property
    def centroid(self) -> FloatArray:
        """(2,) E-weighted."""
        weights = np.array([piece.E * piece.area for piece in self.pieces])
        return np.asarray(weights @ np.array([(piece.y, piece.z) for piece in self.pieces]) / weights.sum())

    @property
    def EI(self) -> FloatArray:
        """[[∫E y², ∫E yz], [∫E yz, ∫E z²]] about the centroid."""
        y, z = self.centroid
        total = np.zeros((2, 2))
        for p in self.pieces:
            r = np.array([p.y - y, p.z - z])
            total += p.E * (np.array([[p.Izz, p.Iyz], [p.Iyz, p.Iyy]]) + p.area * np.outer(r, r))
        return total

    def flow(self, cut_off: Collection[int], Vy: float = 0.0, Vz: float = 0.0) -> float:
        """V S/I of the pieces cut off, force per length of beam."""
        gradient = np.linalg.solve(self.EI, [Vy, Vz])
        moved = [
            (p.E * p.area, p.y - self.centroid[0], p.z - self.centroid[1]) for p in (self.pieces[k] for k in cut_off)
        ]
        return float(sum(EA * (gradient @ [y, z]) for EA, y, z in moved))
