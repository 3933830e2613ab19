"""One load case: forces at the shear centre, stresses, largest values, joints, probes."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.section import Actions, Section
from xsec_fem.recovery.corners import Corner
from xsec_fem.recovery.joints import JointFlows, joint_result
from xsec_fem.recovery.largest import Samples, largest_by_part
from xsec_fem.recovery.section_forces import reduce_actions
from xsec_fem.recovery.stress_field import StressField, UnitFields
from xsec_fem.results import CaseResult, PartResult, ProbeResult, Properties


def solve_case(
    section: Section,
    actions: Actions,
    fields: UnitFields,
    properties: Properties,
    corners: Sequence[Corner],
    rings: Samples,
    flows: Sequence[JointFlows],
) -> CaseResult:
    """Return the stresses, largest values, joints and probes of one load case [N, mm, MPa]; InputError for a probe outside."""
    forces = reduce_actions(actions, properties)
    stress = fields.combine(forces)
    shear = largest_by_part(stress, corners, rings, "tau")
    equivalent = largest_by_part(stress, corners, rings, "von_mises")
    parts = tuple(
        PartResult(tau.part, tau, von_mises, _utilisation(section, tau.part, tau.value, von_mises.value))
        for tau, von_mises in zip(shear, equivalent, strict=True)
    )
    joints = tuple(joint_result(flow, fields, forces, corners) for flow in flows)
    return CaseResult(actions.name, actions, forces, stress, parts, joints, probe_results(section, stress))


def _utilisation(section: Section, part: str, tau: float, von_mises: float) -> float | None:
    """Larger of tau over the shear strength and von Mises over the strength; None without either."""
    material = section.materials[section.part(part).material]
    ratios = []
    if material.shear_strength is not None:
        ratios.append(tau / material.shear_strength)
    if material.strength is not None:
        ratios.append(von_mises / material.strength)
    return max(ratios) if ratios else None


def probe_results(section: Section, stress: StressField) -> tuple[ProbeResult, ...]:
    """Return the stresses at all probes [MPa]; InputError lists every probe outside the section."""
    results, faults = [], []
    for number, probe in enumerate(section.probes):
        try:
            results.append(ProbeResult(probe.name, *probe.at, stress.at(*probe.at)))
        except ValueError as error:
            place = f'probes[{number}] "{probe.name}": at'
            faults.append(Fault(section.path.name if section.path else "", place, str(error), str(list(probe.at))))
    if faults:
        raise InputError(faults)
    return tuple(results)
