"""How strong the singular stress at a corner is: |tau| -> K r^exponent, with K under unit actions.

Near the corner u = (linear function) + A r^lam phi + weaker terms. The linear function balances the prescribed strain at
the corner; what is left is projected on phi over a circle, weighted with g: the other modes of the wedge are orthogonal
to it, so that A is found to the order of the smooth rest, r^(2 - lam). K = A times the mode's steepness.
Source of the modes: xsec_fem.theory.corner_exponent; the projection was derived here (Sturm-Liouville orthogonality in the angle).
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.locate import find_triangles
from xsec_fem.recovery.corners import Corner
from xsec_fem.theory.corner_exponent import WedgeMode, wedge_mode
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION, Warping

FloatArray = npt.NDArray[np.float64]

_POINTS = 12  # Gauss points in each sector: the modes turn by less than 360 deg, products are integrated to 1e-8
_RADIUS = 0.5  # of the corner's stated distance: inside it the smooth rest is small, outside the mesh's innermost ring


def corner_intensities(warping: Warping, stiffness: ShearStiffness, corners: Sequence[Corner]) -> FloatArray:
    """Return K of every corner under unit Vy, Vz and T, shape (C, 3) [MPa mm^-exponent per N, per N mm].

    NaN where a sector at the corner is not isotropic, or where a curved side leaves the circle's arc outside the section.
    Source: derived here, on the modes of Williams 1952 (module docstring).
    """
    result = np.full((len(corners), 3), np.nan)
    for row, corner in enumerate(corners):
        mode = wedge_mode(corner.sectors, corner.exponent + 1.0, corner.inside)
        if mode is not None:
            amplitude = _amplitudes(warping, corner, mode)
            unit = np.append(amplitude[SHEAR] + amplitude[POISSON], amplitude[TORSION] / stiffness.GIT)
            result[row] = mode.steepness * unit
    return result


def _amplitudes(warping: Warping, corner: Corner, mode: WedgeMode) -> FloatArray:
    """A of the five problems at a corner, (5,); NaN when a point of the circle lies outside the section."""
    radius = _RADIUS * corner.distance
    place = np.array([corner.y, corner.z])
    strain = _prescribed_at(warping, place, corner.part)
    gauss, weights = np.polynomial.legendre.leggauss(_POINTS)
    top, bottom, mean, size = np.zeros(len(strain)), 0.0, np.zeros(len(strain)), 0.0
    samples = []
    for number, sector in enumerate(mode.sectors):
        angles = sector.start + sector.angle * (gauss + 1) / 2
        share = sector.G[0, 0] * weights * sector.angle / 2
        directions = np.column_stack([np.cos(angles), np.sin(angles)])
        u = _values_at(warping, place + radius * directions) + radius * directions @ strain.T
        samples.append((share, mode.values(number, angles), u))
        mean += share @ u
        size += float(share.sum())
    for share, phi, u in samples:  # the constant mode is orthogonal to phi; taking it out keeps round-off small
        top += (share * phi) @ (u - mean / size)
        bottom += float(share @ phi**2)
    amplitude: FloatArray = top / (bottom * radius**mode.lam)
    return amplitude


def _prescribed_at(warping: Warping, place: FloatArray, part: int) -> FloatArray:
    """The prescribed strain g of the five problems at a point of a part, (5, 2)."""
    problem = warping.problem
    r = (place - problem.area.centroid)[None, None]
    strain: FloatArray = problem.prescribed(np.array([part]), r)[0, 0]
    return strain


def _values_at(warping: Warping, places: FloatArray) -> FloatArray:
    """The five functions at points (n, 2), shape (n, 5); NaN outside the section."""
    mesh = warping.problem.mesh
    values = np.full((len(places), warping.functions.shape[1]), np.nan)
    for row, (y, z) in enumerate(places.tolist()):
        elements, reference = find_triangles(mesh, (y, z))
        if len(elements):
            values[row] = mesh.element.values(reference[:1])[0] @ warping.functions[mesh.triangles[elements[0]]]
    return values
