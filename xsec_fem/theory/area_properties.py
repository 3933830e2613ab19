"""Area, centroid and second moments, weighted with E: the origin and the axes of all that follows.

Any textbook on the strength of materials, e.g. S. P. Timoshenko, Strength of Materials, part I, 1955, appendix A; the
weighting with E is that of transformed sections (ibid., art. on beams of two materials).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mapping import batches
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.moduli import Moduli

FloatArray = npt.NDArray[np.float64]


_EQUAL = 1e-9  # principal moments closer than this share are equal: an angle from their difference would be noise
_ROUND_OFF = 1e-12  # products of inertia below this share of the moments are the rounding of the sum


@dataclass(frozen=True)
class AreaProperties:
    """Integrals over the section.

    Attributes
    ----------
    part_areas : (P,) area of each part [mm²].
    EA : axial stiffness [N].
    centroid : (2,) E-weighted centroid in the file's axes [mm].
    EI : (2, 2) [[∫E y², ∫E y z], [∫E y z, ∫E z²]] about the centroid [N mm²].
    """

    part_areas: FloatArray
    EA: float
    centroid: FloatArray
    EI: FloatArray

    @property
    def EIyy(self) -> float:
        """∫E z², bending about y [N mm²]. Source: Timoshenko 1955 (module docstring)."""
        return float(self.EI[1, 1])

    @property
    def EIzz(self) -> float:
        """∫E y², bending about z [N mm²]. Source: Timoshenko 1955 (module docstring)."""
        return float(self.EI[0, 0])

    @property
    def EIyz(self) -> float:
        """∫E y z, without a minus sign [N mm²]. Source: Timoshenko 1955 (module docstring)."""
        return float(self.EI[0, 1])

    @cached_property
    def principal(self) -> tuple[float, float, float]:
        """Return (alpha_deg, EIu, EIv), EIu >= EIv [deg, N mm², N mm²].

        alpha is the angle from y to the axis u about which bending is stiffest, counter-clockwise, in (-90, 90]; 0 when
        both are equal to 1e-9. Source: Timoshenko 1955, appendix A.
        """
        half_sum, half_difference = (self.EIyy + self.EIzz) / 2, (self.EIyy - self.EIzz) / 2
        radius = float(np.hypot(half_difference, self.EIyz))
        if radius <= _EQUAL * half_sum:
            return 0.0, half_sum, half_sum
        # bending about the axis at angle a has ∫E (z cos a - y sin a)² = half_sum + radius cos(2 (a - alpha))
        shear = 0.0 if abs(self.EIyz) <= _ROUND_OFF * half_sum else self.EIyz
        alpha = float(np.degrees(np.arctan2(-shear, half_difference)) / 2)
        return alpha if alpha > -90.0 else 90.0, half_sum + radius, half_sum - radius


def area_properties(mesh: Mesh, moduli: Moduli) -> AreaProperties:
    """Integrate over the mesh, arrays of shape (P,), (2,) and (2, 2) as in AreaProperties; moments in N mm² for a file in N and mm.

    Moments are taken about the mean of the nodes and then shifted by the small way to the centroid, so that nothing
    cancels. Source: module docstring (Timoshenko 1955).
    """
    areas = np.zeros(len(mesh.part_names))
    EA, first, second = 0.0, np.zeros(2), np.zeros((2, 2))
    origin = mesh.nodes.mean(axis=0)
    for batch in batches(mesh):
        areas += np.bincount(batch.part, batch.weights.sum(axis=1), minlength=len(areas))
        weights = (batch.weights * moduli.E[batch.part][:, None]).ravel()
        r = (batch.points - origin).reshape(-1, 2)
        weighted = weights[:, None] * r
        EA += float(weights.sum())
        first += weighted.sum(axis=0)
        second += weighted.T @ r
    way = first / EA
    EI = second - EA * np.outer(way, way)
    return AreaProperties(areas, EA, origin + way, (EI + EI.T) / 2)
