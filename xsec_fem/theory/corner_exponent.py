"""The exponent of the stress at a corner: u ~ r^lambda, tau ~ r^(lambda - 1), unbounded when lambda < 1.

For antiplane shear in a wedge of sectors with tensors G_k and free sides, u = r^lambda (A cos + B sin) in each sector after the
affine map G^(-1/2), in which the equation becomes Laplace's. There the pair (u, flow/lambda) is (R cos phase, -g R sin phase) with
g = sqrt(det G): the phase grows by lambda b over a sector of mapped angle b, and tan phase jumps by the ratio of the g where
two sectors meet. Free sides mean sin phase = 0, so lambda is where the phase reaches pi. The phase grows with lambda (Sturm's
oscillation theorem), so there is one such place and none can be missed.

One material: lambda = pi/w (the method of M. L. Williams, Stress singularities resulting from various boundary conditions in
angular corners of plates in extension, J. Appl. Mech. 19, 1952; the antiplane equation is derived here).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

_SCAN = 200  # steps of the search for a sign change: modes of a closed wedge split by less are not singular to 0.5 %
_BISECTIONS = 54  # halvings of (0, 1]: 2^-54 is below round-off


@dataclass(frozen=True)
class Sector:
    """One material sector of a wedge: from direction `start` to `end`, counter-clockwise [rad], with G (2, 2) [MPa]."""

    start: float
    end: float
    G: FloatArray

    @property
    def angle(self) -> float:
        """Angle of the sector, in (0, 2 pi) [rad]."""
        return self.end - self.start

    def mapped(self) -> tuple[float, float]:
        """Return the angle after the map G^(-1/2) [rad] and g = sqrt(det G) [MPa].

        Source: derived here, for a wedge as in Williams 1952 (module docstring).
        """
        values, vectors = np.linalg.eigh(self.G)
        root = vectors @ np.diag(values**-0.5) @ vectors.T

        # the map turns directions by less than 90 deg; steps below 90 deg keep track of the winding
        steps = max(1, int(np.ceil(self.angle / (np.pi / 4))))
        angles = self.start + self.angle * np.arange(steps + 1) / steps
        directions = root @ np.array([np.cos(angles), np.sin(angles)])
        turned = np.unwrap(np.arctan2(directions[1], directions[0]))
        return float(turned[-1] - turned[0]), float(np.sqrt(values[0] * values[1]))


def wedge_exponent(sectors: Sequence[Sector]) -> float:
    """Return lambda of a wedge with free sides, its sectors counter-clockwise; 1.0 when no root lies in (0, 1].

    The stress exponent is lambda - 1. Source: Williams 1952 (module docstring); angles in rad, G (2, 2) in MPa.
    """
    pairs = [sector.mapped() for sector in sectors]

    def phase(lam: float) -> float:
        total, before = 0.0, pairs[0][1]
        for angle, g in pairs:
            ratio, s, c = before / g, np.sin(total), np.cos(total)
            total += np.arctan((ratio - 1) * s * c / (c * c + ratio * s * s)) + lam * angle
            before = g
        return float(total)

    if phase(1.0) <= np.pi:
        return 1.0
    low, high = 0.0, 1.0
    for _ in range(_BISECTIONS):
        middle = (low + high) / 2
        low, high = (middle, high) if phase(middle) < np.pi else (low, middle)
    return (low + high) / 2


def closed_wedge_exponent(sectors: Sequence[Sector]) -> float:
    """Return lambda where materials meet all round a point, sectors counter-clockwise; 1.0 when no root lies in (0, 1).

    The pair carried once round must return to itself: det(M - 1) = det M + 1 - tr M = 0. From ray to ray it is scaled by
    (rho_k/rho_k+1)^lambda, rho = |G^(-1/2) e| along the ray: 1 for isotropic sectors. Source: Williams 1952 (module docstring), the
    closing condition derived here; angles in rad, G (2, 2) in MPa.
    """
    grid = np.arange(1, _SCAN) / _SCAN
    values = np.array([_closing(sectors, lam) for lam in grid])
    change = np.flatnonzero(values < 0)
    if not len(change):
        return 1.0
    low, high = (grid[change[0] - 1] if change[0] else 0.0), grid[change[0]]
    for _ in range(_BISECTIONS):
        middle = (low + high) / 2
        low, high = (low, middle) if _closing(sectors, middle) < 0 else (middle, high)
    return float((low + high) / 2)


def _closing(sectors: Sequence[Sector], lam: float) -> float:
    """det(M - 1) of one turn: positive for small lam, negative between the two modes that contrast has split."""
    M = np.eye(2)
    for sector, following in zip(sectors, [*sectors[1:], sectors[0]], strict=True):
        angle, g = sector.mapped()
        c, s = np.cos(lam * angle), np.sin(lam * angle)
        ray = np.array([np.cos(sector.end), np.sin(sector.end)])
        rho = [np.sqrt(ray @ np.linalg.solve(G, ray)) for G in (sector.G, following.G)]
        M = (rho[0] / rho[1]) ** lam * np.array([[c, s / g], [-g * s, c]]) @ M
    return float(np.linalg.det(M) + 1 - np.trace(M))


@dataclass(frozen=True)
class WedgeMode:
    """The singular mode u = r^lam phi(angle) of a wedge of isotropic sectors, phi is 1 on the first free side where there is one.

    In sector k, with angle b from its start, phi = cosine[k] cos(lam b) + sine[k] sin(lam b).
    """

    sectors: tuple[Sector, ...]
    lam: float
    cosine: FloatArray
    sine: FloatArray

    def values(self, sector: int, angles: FloatArray) -> FloatArray:
        """Return phi [-] at angles (n,) measured from +y [rad] inside one sector, shape (n,). Source: Williams 1952."""
        b = self.lam * (angles - self.sectors[sector].start)
        result: FloatArray = self.cosine[sector] * np.cos(b) + self.sine[sector] * np.sin(b)
        return result

    @property
    def steepness(self) -> float:
        """Largest G |grad u| r^(1 - lam) of the mode [MPa]: the same all over one sector. Source: Williams 1952."""
        g = np.array([sector.G[0, 0] for sector in self.sectors])
        return float((g * self.lam * np.hypot(self.cosine, self.sine)).max())


def wedge_mode(sectors: Sequence[Sector], lam: float, closed: bool = False) -> WedgeMode | None:
    """Return the mode of the exponent lam, (n,) coefficients, or None when a sector is not isotropic (G in MPa).

    `closed` sectors go all round a point; the others have free sides.

    Source: Williams 1952 (module docstring).
    """
    if any(not np.allclose(sector.G, sector.G[0, 0] * np.eye(2), rtol=1e-12) for sector in sectors):
        return None
    carried = np.eye(2)
    turns = []
    for sector in sectors:
        g, c, s = sector.G[0, 0], np.cos(lam * sector.angle), np.sin(lam * sector.angle)
        turns.append(carried)
        carried = np.array([[c, s / g], [-g * s, c]]) @ carried
    start = np.array([1.0, 0.0])
    if closed:  # the pair that one turn carries into itself
        start = np.linalg.svd(carried - np.eye(2))[2][-1]
    pairs = np.array([turn @ start for turn in turns])
    cosine, sine = pairs[:, 0], pairs[:, 1] / [sector.G[0, 0] for sector in sectors]
    return WedgeMode(tuple(sectors), lam, cosine, sine)
