"""The elementary formula, with every symbol kept: tau = V S/(I t), for any section and any direction of V.

Equilibrium of the part A that a cut separates, sigma_x from bending: with a = EI^-1 V, r from the E-weighted centroid,

    q = -∫_A E (a . r) dA,    tau = q/t,

q through the cut along its normal n, which points out of A; t the length of the cut inside the section. With moments over the
reference modulus, S_y = ∫_A (E/E_ref) z dA, S_z = ∫_A (E/E_ref) y dA, this is

    q = -[(Vz Izz - Vy Iyz) S_y + (Vy Iyy - Vz Iyz) S_z] / (Iyy Izz - Iyz²),

and V S/I when V lies along a principal axis (D. I. Jourawski, 1856; any text, e.g. S. P. Timoshenko, Strength of Materials, part I,
1955; the unsymmetric and layered form derived here from the same equilibrium). q/t is the mean over the cut; nothing more follows
from equilibrium.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.cut_off import half_plane_moments
from xsec_fem.fem.line_crossings import Crossings
from xsec_fem.fem.separation import cut_off_moments
from xsec_fem.model.outline import Point
from xsec_fem.recovery.cuts import PlacedCut
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

NOT_SEPARATED = (
    "The cut does not separate the section: what it cuts hangs together elsewhere, as in a closed cell, so that equilibrium alone "
    "does not give its flow. No hand value."
)


@dataclass(frozen=True)
class HandCalculation:
    """One hand calculation, every symbol of it (N, mm, MPa).

    Attributes
    ----------
    start, end : outermost ends of the cut; normal : unit vector out of what is cut off, the direction of positive q.
    Vy, Vz : shear forces. E_ref : modulus over which all section values are taken.
    Iyy, Izz, Iyz : second moments [mm⁴]. A, Sy, Sz : area [mm²] and first moments [mm³] of what is cut off, about the centroid.
    walls : length t of each wall crossed [mm].
    """

    start: Point
    end: Point
    normal: Point
    Vy: float
    Vz: float
    E_ref: float
    Iyy: float
    Izz: float
    Iyz: float
    A: float
    Sy: float
    Sz: float
    walls: tuple[float, ...]

    @property
    def t(self) -> float:
        """Sum of the walls crossed [mm]."""
        return sum(self.walls)

    @property
    def q(self) -> float:
        """Flow through the cut [N/mm]. Source: Timoshenko 1955, for both axes derived here (module docstring)."""
        about_y = self.Vz * self.Izz - self.Vy * self.Iyz
        about_z = self.Vy * self.Iyy - self.Vz * self.Iyz
        return -(about_y * self.Sy + about_z * self.Sz) / (self.Iyy * self.Izz - self.Iyz**2)

    @property
    def tau(self) -> float:
        """q/t, the mean over the cut [MPa]. Source: Timoshenko 1955 (module docstring)."""
        return self.q / self.t

    @property
    def one_axis(self) -> float:
        """Vz S_y/(Iyy t) + Vy S_z/(Izz t) with q's sign: what is left when Iyz is forgotten [MPa]."""
        return -(self.Vz * self.Sy / self.Iyy + self.Vy * self.Sz / self.Izz) / self.t

    def symbols(self) -> tuple[tuple[str, float, str, str], ...]:
        """Return (symbol, value, dimension, meaning) of everything, in the order of the calculation.

        The dimension is a word or a power of length: "force", "L4", "stress", "flow".
        """
        return (
            ("Vy", self.Vy, "force", "shear force along y"),
            ("Vz", self.Vz, "force", "shear force along z"),
            ("E_ref", self.E_ref, "stress", "reference modulus"),
            ("Iyy", self.Iyy, "L4", "second moment about y"),
            ("Izz", self.Izz, "L4", "second moment about z"),
            ("Iyz", self.Iyz, "L4", "product moment"),
            ("A", self.A, "L2", "area cut off"),
            ("Sy", self.Sy, "L3", "first moment of it about y"),
            ("Sz", self.Sz, "L3", "first moment of it about z"),
            ("t", self.t, "L1", f"length of the cut in the section, {len(self.walls)} wall(s)"),
            ("q", self.q, "flow", "flow through the cut"),
            ("tau", self.tau, "stress", "mean over the cut, q/t"),
        )


@dataclass(frozen=True)
class HandValue:
    """A hand calculation, or None and the reason why there is none."""

    calculation: HandCalculation | None
    reason: str = ""


def shear_gradient(solved: SolvedFields, forces: SectionForces) -> FloatArray:
    """Return a = EI^-1 V, shape (2,) [1/mm²]: d sigma_x/dx = E a . r [MPa/mm]. Source: module docstring."""
    result: FloatArray = np.linalg.solve(solved.area.EI, np.array([forces.Vy, forces.Vz]))
    return result


def hand_flows(moments: FloatArray, gradient: FloatArray) -> FloatArray:
    """Return q = -∫_A E a . r, shape (...), from (∫E, ∫E y, ∫E z), shape (..., 3), and a (2,) [N/mm]. Source: module docstring."""
    return np.asarray(-moments[..., 1:] @ gradient)


def reference_modulus(solved: SolvedFields) -> float:
    """Return the E that carries the largest share of EA [MPa]."""
    moduli, number = np.unique(solved.E, return_inverse=True)
    return float(moduli[np.argmax(np.bincount(number, solved.E * solved.area.part_areas))])


def level_formula(solved: SolvedFields, forces: SectionForces, normal: FloatArray, levels: FloatArray) -> FloatArray:
    """Return q/t of whole cuts n . x = level, shape (L,), levels (L,) in any order [mm -> MPa]; NaN where they miss the section.

    Source: module docstring.
    """
    order = np.argsort(levels)
    moments, t = half_plane_moments(solved.curves, normal, levels[order], solved.E, solved.area.centroid)
    tau = np.full(len(levels), np.nan)
    inside = t > 1e-8 * solved.curves.size  # a touched corner has no t
    tau[order[inside]] = hand_flows(moments[inside], shear_gradient(solved, forces)) / t[inside]
    return tau


def hand_calculation(
    solved: SolvedFields, crossings: Crossings, spans: IntArray, moments: FloatArray, forces: SectionForces
) -> HandCalculation:
    """Return the calculation for spans (n,) of one line that cut off moments (∫E, ∫E y, ∫E z), shape (3,) [N, mm, MPa]."""
    E_ref = reference_modulus(solved)
    line = crossings.span_line[spans[0]]
    start, end = (
        crossings.point(line, np.asarray(place))
        for place in (crossings.span_start[spans].min(), crossings.span_end[spans].max())
    )
    A, Sz, Sy = (float(value) / E_ref for value in moments)
    area = solved.area
    return HandCalculation(
        (float(start[0]), float(start[1])), (float(end[0]), float(end[1])),
        (float(crossings.normal[0]), float(crossings.normal[1])), forces.Vy, forces.Vz, E_ref,
        area.EIyy / E_ref, area.EIzz / E_ref, area.EIyz / E_ref, A, Sy, Sz,
        tuple(crossings.span_length[spans].tolist()),
    )  # fmt: skip


def hand_value(solved: SolvedFields, crossings: Crossings, spans: IntArray, forces: SectionForces) -> HandValue:
    """Return the hand value of a cut across spans (n,) of one line [N, mm, MPa].

    It is None with its reason where the cut does not separate the section.
    """
    cut = np.zeros(len(spans), np.int64)
    moments, separates = cut_off_moments(crossings, spans, cut, solved.E, solved.area.centroid)
    if not separates[0]:
        return HandValue(None, NOT_SEPARATED)
    return HandValue(hand_calculation(solved, crossings, spans, moments[0], forces))


def hand_of_cut(solved: SolvedFields, placed: PlacedCut, forces: SectionForces) -> HandValue:
    """Return the hand value of a cut of the section file [N, mm, MPa]."""
    return hand_value(solved, placed.crossings, placed.spans, forces)
