"""What one load case gives: largest stresses, joints, probes, corners, cuts and the verdict on the formula."""

from __future__ import annotations

from dataclasses import dataclass

from xsec_fem.elementary.compare import Comparison
from xsec_fem.elementary.formula import HandValue
from xsec_fem.elementary.verdict import Verdict
from xsec_fem.model.section import Actions
from xsec_fem.recovery.cuts import CutResult
from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.recovery.largest import Largest
from xsec_fem.recovery.stress_field import PointStress, SectionForces, StressField


@dataclass(frozen=True)
class PartResult:
    """The largest stresses of one part [MPa] and its utilisation, None without a strength."""

    name: str
    tau_max: Largest
    von_mises_max: Largest
    utilisation: float | None = None


@dataclass(frozen=True)
class ProbeResult:
    """Stresses at a named point; one entry for each part that holds the point [MPa]."""

    name: str
    y: float
    z: float
    values: tuple[PointStress, ...]


@dataclass(frozen=True)
class CornerReading:
    """A singular corner under one load case: |tau| at `distance` [MPa] and K of |tau| = K r^exponent; None where not to be had."""

    y: float
    z: float
    distance: float
    tau: float | None
    intensity: float | None


@dataclass(frozen=True)
class CutComparison:
    """A named cut under one load case: what the field says, and the hand calculation where the cut separates the section."""

    field: CutResult
    hand: HandValue

    @property
    def ratio(self) -> float | None:
        """Largest |tau . n| of the field over V S/(I t); None without a hand value."""
        calculation = self.hand.calculation
        return abs(self.field.peak / calculation.tau) if calculation is not None and calculation.tau else None


@dataclass(frozen=True)
class CaseResult:
    """One load case: actions as given, forces at the shear centre, largest stresses, joints, probes, corners and cuts.

    `comparison` and `verdict` set the field against V S/(I t); None in a case without shear. `sweep_files` are the names of the
    files that its sweeps of cuts were written to.
    """

    name: str
    actions: Actions
    forces: SectionForces
    stress: StressField
    parts: tuple[PartResult, ...]
    joints: tuple[JointResult, ...] = ()
    probes: tuple[ProbeResult, ...] = ()
    corners: tuple[CornerReading, ...] = ()
    cuts: tuple[CutComparison, ...] = ()
    comparison: Comparison | None = None
    verdict: Verdict | None = None
    sweep_files: tuple[str, ...] = ()

    @property
    def T_total(self) -> float:
        """Torque about the shear centre of zero mean twist: T and the shear's own [N mm]."""
        return self.forces.T

    @property
    def tau_max(self) -> Largest:
        """The largest shear stress of the section [MPa]."""
        return max((part.tau_max for part in self.parts), key=lambda largest: largest.value)

    @property
    def von_mises_max(self) -> Largest:
        """The largest equivalent stress of the section [MPa]."""
        return max((part.von_mises_max for part in self.parts), key=lambda largest: largest.value)

    @property
    def utilisation(self) -> float | None:
        """The largest utilisation of any part or joint; None when nothing has a strength."""
        parts = [part.utilisation for part in self.parts]
        known = [value for value in (*parts, *(joint.utilisation for joint in self.joints)) if value is not None]
        return max(known) if known else None
