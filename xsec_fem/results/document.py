"""Entries of results.json: plain dictionaries of plain numbers."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import asdict
from typing import Any

from xsec_fem.elementary.verdict import Finding, Verdict
from xsec_fem.recovery.corners import Corner
from xsec_fem.results.cases import CaseResult, CutComparison


def corner_entry(corner: Corner) -> dict[str, Any]:
    """Return the entry of a singular corner [mm, deg]."""
    return {
        "y": corner.y, "z": corner.z, "angle_deg": corner.angle_deg, "exponent": corner.exponent,
        "parts": list(corner.parts), "distance": corner.distance,
    }  # fmt: skip


def _cut_entry(cut: CutComparison) -> dict[str, Any]:
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


def _verdict_entry(verdict: Verdict, sweep_files: Sequence[str]) -> dict[str, Any]:
    def entry(finding: Finding) -> dict[str, Any]:
        return {
            "name": finding.name, "side": finding.side, "grade": finding.grade, "worst_ratio": _finite(finding.ratio),
            "elasticity": finding.elasticity, "elementary": finding.elementary, "at": list(finding.at),
            "cause": finding.cause, "message": finding.message,
        }  # fmt: skip

    return {
        "verdict": verdict.grade, "message": verdict.message,
        "parts": [entry(finding) for finding in verdict.parts], "walls": [entry(finding) for finding in verdict.walls],
        **({"sweep": list(sweep_files)} if sweep_files else {}),
    }  # fmt: skip


def _finite(value: float) -> float | None:
    return value if math.isfinite(value) else None


def largest_entry(case: CaseResult) -> dict[str, Any]:
    """Return the name and the largest values of a case [MPa]."""
    return {"name": case.name, "tau_max": asdict(case.tau_max), "von_mises_max": asdict(case.von_mises_max)}


def comparison_part(document: Mapping[str, Any]) -> dict[str, Any]:
    """Return of the document of results.json only what sets the field against V S/(I t), case by case [N, mm, MPa]."""
    kept = ("name", "actions", "load_point", "T_total", "elementary", "cuts")
    head = {key: document[key] for key in ("schema", "title", "input", "versions", "units")}
    return {**head, "cases": [{key: case[key] for key in kept if key in case} for case in document["cases"]]}


def case_entry(case: CaseResult) -> dict[str, Any]:
    """Return the entry of a load case [N, mm, MPa]; keys without a value are left out."""
    actions = case.actions
    return {
        "name": case.name,
        "actions": {name: getattr(actions, name) for name in ("N", "Vy", "Vz", "T", "My", "Mz")},
        "load_point": actions.load_point,
        "T_total": case.T_total,
        "tau_max": asdict(case.tau_max),
        "von_mises_max": asdict(case.von_mises_max),
        "parts": [
            {"name": part.name, "tau_max": asdict(part.tau_max), "von_mises_max": asdict(part.von_mises_max)}
            | ({} if part.utilisation is None else {"utilisation": part.utilisation})
            for part in case.parts
        ],
        "joints": [joint.to_dict() for joint in case.joints],
        "probes": [
            {"name": probe.name, "y": probe.y, "z": probe.z, **asdict(value)}
            for probe in case.probes
            for value in probe.values
        ],
        "cuts": [_cut_entry(cut) for cut in case.cuts],
        **({} if case.verdict is None else {"elementary": _verdict_entry(case.verdict, case.sweep_files)}),
        "corners": [
            {key: value for key, value in asdict(corner).items() if value is not None} for corner in case.corners
        ],
    }  # fmt: skip
