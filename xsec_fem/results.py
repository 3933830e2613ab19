"""The result of a solve: frozen objects, the JSON of schema "xsec_fem results 1", and the stress under any actions.

y, z of points, of the centroid and of the shear centres are in the section file's own axes. Numbers carry the file's units; the
`units` block says which.
"""

from __future__ import annotations

import html
import json
import math
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field, replace
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.compare import Comparison
from xsec_fem.elementary.formula import HandValue
from xsec_fem.elementary.verdict import Finding, Verdict
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Actions, Section
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.cuts import CutResult
from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.recovery.largest import Largest
from xsec_fem.recovery.section_forces import reduce_actions
from xsec_fem.recovery.stress_field import PointStress, SectionForces, StressField, UnitFields

FloatArray = npt.NDArray[np.float64]

SCHEMA = "xsec_fem results 1"


@dataclass(frozen=True)
class Properties:
    """Constants of the section; A, I.., Iw are E-weighted and IT, Asy, Asz G-weighted over the reference material.

    Lengths [mm], areas [mm²], second moments and IT [mm⁴], Iw [mm⁶]; stiffnesses EA [N], EI [N mm²], GIT [N mm²],
    EIw [N mm⁴]; shear_flexibility (2, 2) [1/N]; stiffness (6, 6): N, Vy, Vz, T, My, Mz at the centroid. For a file in
    "N mm"; other unit systems accordingly.
    """

    A: float
    yc: float
    zc: float
    Iyy: float
    Izz: float
    Iyz: float
    alpha_deg: float
    Iu: float
    Iv: float
    IT: float
    Iw: float
    ysc: float
    zsc: float
    ysc_trefftz: float
    zsc_trefftz: float
    Asy: float
    Asz: float
    shear_flexibility: tuple[tuple[float, ...], ...]
    EA: float
    EIyy: float
    EIzz: float
    EIyz: float
    GIT: float
    EIw: float
    stiffness: tuple[tuple[float, ...], ...]
    reference_material: str


@dataclass(frozen=True)
class Certificate:
    """Guaranteed intervals (lowest, highest) of the constants, in the units and axes of `Properties`.

    `energy_error` holds, for unit Vy, Vz and T, the largest possible relative error of the stress field in energy [-];
    `coupling` is that of shear_flexibility's mixed entry. `strict` is True when nothing but round-off stands between the section
    and the bounds; `reason` says why not.
    """

    energy_error: Mapping[str, float]
    IT: tuple[float, float]
    Asy: tuple[float, float]
    Asz: tuple[float, float]
    coupling: tuple[float, float]
    ysc_trefftz: tuple[float, float]
    zsc_trefftz: tuple[float, float]
    ysc: tuple[float, float]
    zsc: tuple[float, float]
    strict: bool
    reason: str


@dataclass(frozen=True)
class MeshStep:
    """One mesh of the adaptive sequence: nodes, triangles and the bounds of the energy errors of Vy, Vz and T [-]."""

    nodes: int
    elements: int
    energy_errors: Mapping[str, float]

    @property
    def energy_error(self) -> float:
        """The largest of the three [-]."""
        return max(self.energy_errors.values())


@dataclass(frozen=True)
class ConvergenceRow:
    """One mesh of the evidence: degree, nodes, triangles, bound of the energy error, observed order (None on the first row),

    IT [mm⁴] and Asz [mm²] with their guaranteed intervals.
    """

    degree: int
    nodes: int
    elements: int
    energy_error: float
    observed_order: float | None
    IT: float
    IT_interval: tuple[float, float]
    Asz: float
    Asz_interval: tuple[float, float]


@dataclass(frozen=True)
class Contact:
    """Two parts that touch along `length` [mm]; `joint` names the declared joint, None when they are simply one solid.

    `slit` is how much of that length is a slit, where the faces slide on each other [mm].
    """

    parts: tuple[str, str]
    length: float
    joint: str | None = None
    slit: float = 0.0


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

    `comparison` and `verdict` set the field against V S/(I t); None in a case without shear.
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


@dataclass(frozen=True)
class Check:
    """A number that must stay below a limit for the result to be trusted."""

    name: str
    value: float
    limit: float

    @property
    def ok(self) -> bool:
        """True when the value is within the limit."""
        return self.value <= self.limit


@dataclass(frozen=True)
class Caution:
    """Something the reader of the result must know: a short code and a sentence in plain words."""

    code: str
    message: str


@dataclass(frozen=True)
class Result:
    """Everything a solve found.

    Attributes
    ----------
    section : the section as read.
    mesh : the mesh it was solved on.
    properties : constants of the section.
    cases : one entry a load case.
    contacts, corners, checks, warnings : what touches, where stress has no limit, trust, cautions.
    fields : nodal fields of unit actions.
    certificate : guaranteed intervals, None when not asked for.
    rounded : the same section with its sharp corners rounded by [solve] try_radius, None when not asked for.
    convergence : rows of the evidence, empty when not asked for.
    mesh_steps : the meshes solved on the way to the accuracy asked for, the last one being `mesh`.
    versions : of this package and the libraries used.
    timings : seconds by stage.
    """

    section: Section
    mesh: Mesh
    properties: Properties
    cases: tuple[CaseResult, ...]
    contacts: tuple[Contact, ...]
    corners: tuple[Corner, ...]
    checks: tuple[Check, ...]
    warnings: tuple[Caution, ...]
    fields: UnitFields
    certificate: Certificate | None = None
    rounded: Result | None = None
    mesh_steps: tuple[MeshStep, ...] = ()
    convergence: tuple[ConvergenceRow, ...] = ()
    versions: Mapping[str, str] = field(default_factory=dict)
    timings: Mapping[str, float] = field(default_factory=dict)

    def stress(self, actions: Actions) -> StressField:
        """Return the stresses under any actions, as arrays of shape (S,) and (S, 2) on the nodes split by part [MPa]."""
        return self.fields.combine(reduce_actions(actions, self.properties))

    def at(self, y: float, z: float, actions: Actions | None = None) -> tuple[PointStress, ...]:
        """Return the stress at (y, z) [mm], one entry a part there; `actions` None: the first load case [MPa].

        Raises ValueError when the point lies outside the section, or when there is no load case to take.
        """
        if actions is None:
            if not self.cases:
                raise ValueError(f"the section has {len(self.cases)} load cases: give actions")
            return self.cases[0].stress.at(y, z)
        return self.stress(actions).at(y, z)

    @property
    def over_strength(self) -> bool:
        """True when a part or a joint of any case is above its strength."""
        return any(case.utilisation is not None and case.utilisation > 1.0 for case in self.cases)

    @property
    def away_from_corners(self) -> npt.NDArray[np.bool_]:
        """(S,) True for nodes at least the stated distance away from every corner where the stress has no limit."""
        return corner_mask(self.fields.part_nodes.positions, self.corners)

    def with_timings(self, **seconds: float) -> Result:
        """Return the same result with more stages timed [s]."""
        return replace(self, timings={**self.timings, **seconds})

    def to_dict(self) -> dict[str, Any]:
        """Return the document of results.json; numbers bare, one `units` block."""
        section, units = self.section, self.section.units
        return {
            "schema": SCHEMA,
            "title": section.title,
            "input": {"file": section.path.name if section.path else None, "sha256": section.sha256 or None},
            "versions": dict(self.versions),
            "units": {
                "system": units.name, "length": units.length, "force": units.force, "stress": units.stress,
                "moment": units.moment,
            },
            "mesh": {
                "order": self.mesh.order, "nodes": len(self.mesh.nodes), "elements": len(self.mesh.triangles),
                "source": self.mesh.source, "adapt_steps": max(len(self.mesh_steps) - 1, 0),
            },
            "properties": asdict(self.properties),
            **({} if self.certificate is None else {"certificate": asdict(self.certificate)}),
            "contacts": [asdict(contact) for contact in self.contacts],
            "corners": [_corner_dict(corner) for corner in self.corners],
            "cases": [_case_dict(case) for case in self.cases],
            **({} if self.rounded is None else {"try_radius": _rounded_dict(self.rounded)}),
            **({"convergence": [asdict(row) for row in self.convergence]} if self.convergence else {}),
            "timings": dict(self.timings),
            "checks": [{**asdict(check), "ok": check.ok} for check in self.checks],
            "warnings": [asdict(caution) for caution in self.warnings],
        }  # fmt: skip

    def to_json(self) -> str:
        """Return results.json as text; not-a-number never occurs in it (ValueError if it would)."""
        return json.dumps(self.to_dict(), indent=1, allow_nan=False, ensure_ascii=False) + "\n"

    def _repr_html_(self) -> str:
        """A small table for notebooks."""
        properties, units = self.properties, self.section.units
        rows = [
            ("A", properties.A, units.power(2)), ("Iyy", properties.Iyy, units.power(4)),
            ("Izz", properties.Izz, units.power(4)), ("IT", properties.IT, units.power(4)),
            ("Asy", properties.Asy, units.power(2)), ("Asz", properties.Asz, units.power(2)),
            ("ysc", properties.ysc, units.length), ("zsc", properties.zsc, units.length),
        ]  # fmt: skip
        rows += [(f"largest |tau|, {case.name}", case.tau_max.value, units.stress) for case in self.cases]
        body = "".join(
            f"<tr><td>{html.escape(name)}</td><td style='text-align:right'>{value:.5g}</td><td>{unit}</td></tr>"
            for name, value, unit in rows
        )
        return f"<table><caption>{html.escape(self.section.title)}</caption>{body}</table>"


def _corner_dict(corner: Corner) -> dict[str, Any]:
    return {
        "y": corner.y, "z": corner.z, "angle_deg": corner.angle_deg, "exponent": corner.exponent,
        "parts": list(corner.parts), "distance": corner.distance,
    }  # fmt: skip


def _cut_dict(cut: CutComparison) -> dict[str, Any]:
    field, calculation = cut.field, cut.hand.calculation
    entry: dict[str, Any] = {
        "name": field.name, "flow": field.flow, "t": field.t, "mean": field.mean, "peak": field.peak,
        "peak_at": list(field.peak_at),
        "walls": [
            {"t": span.t, "parts": list(span.parts), "flow": span.flow, "mean": span.mean, "peak": span.peak}
            for span in field.spans
        ],
    }  # fmt: skip
    if calculation is None:
        return {**entry, "no_hand_value": cut.hand.reason}
    symbols = {symbol: value for symbol, value, *_ in calculation.symbols()}
    return {**entry, "elementary": calculation.tau, "ratio": cut.ratio, "hand": symbols}


def _verdict_dict(verdict: Verdict) -> dict[str, Any]:
    def entry(finding: Finding) -> dict[str, Any]:
        return {
            "name": finding.name, "side": finding.side, "grade": finding.grade, "worst_ratio": _finite(finding.ratio),
            "elasticity": finding.elasticity, "elementary": finding.elementary, "at": list(finding.at),
            "cause": finding.cause, "message": finding.message,
        }  # fmt: skip

    return {
        "verdict": verdict.grade, "message": verdict.message,
        "parts": [entry(finding) for finding in verdict.parts], "walls": [entry(finding) for finding in verdict.walls],
    }  # fmt: skip


def _finite(value: float) -> float | None:
    return value if math.isfinite(value) else None


def _rounded_dict(rounded: Result) -> dict[str, Any]:
    return {
        "radius": rounded.section.solve.try_radius,
        "properties": asdict(rounded.properties),
        "cases": [
            {"name": case.name, "tau_max": asdict(case.tau_max), "von_mises_max": asdict(case.von_mises_max)}
            for case in rounded.cases
        ],
    }


def _largest_dict(largest: Largest) -> dict[str, Any]:
    return asdict(largest)


def _case_dict(case: CaseResult) -> dict[str, Any]:
    actions = case.actions
    return {
        "name": case.name,
        "actions": {name: getattr(actions, name) for name in ("N", "Vy", "Vz", "T", "My", "Mz")},
        "load_point": actions.load_point,
        "T_total": case.T_total,
        "tau_max": _largest_dict(case.tau_max),
        "von_mises_max": _largest_dict(case.von_mises_max),
        "parts": [
            {"name": part.name, "tau_max": _largest_dict(part.tau_max), "von_mises_max": _largest_dict(part.von_mises_max)}
            | ({} if part.utilisation is None else {"utilisation": part.utilisation})
            for part in case.parts
        ],
        "joints": [joint.to_dict() for joint in case.joints],
        "probes": [
            {"name": probe.name, "y": probe.y, "z": probe.z, **asdict(value)}
            for probe in case.probes
            for value in probe.values
        ],
        "cuts": [_cut_dict(cut) for cut in case.cuts],
        **({} if case.verdict is None else {"elementary": _verdict_dict(case.verdict)}),
        "corners": [
            {key: value for key, value in asdict(corner).items() if value is not None} for corner in case.corners
        ],
    }  # fmt: skip
