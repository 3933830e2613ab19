"""One load case: forces at the shear centre, stresses, largest values, joints, probes."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.compare import compare
from xsec_fem.elementary.formula import hand_of_cut
from xsec_fem.elementary.verdict import verdict
from xsec_fem.errors import Fault, InputError
from xsec_fem.model.section import Actions, Section
from xsec_fem.recovery.corners import Corner
from xsec_fem.recovery.cuts import PlacedCut, cut_result
from xsec_fem.recovery.joint_results import joint_result
from xsec_fem.recovery.joints import JointFlows
from xsec_fem.recovery.largest import Samples, largest_by_part, read_beside_corners
from xsec_fem.recovery.section_forces import reduce_actions
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces, StressField, UnitFields
from xsec_fem.results import CaseResult, CornerReading, CutComparison, PartResult, ProbeResult, Properties

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Recovered:
    """What every load case is combined from.

    Attributes
    ----------
    fields : nodal fields of unit actions.
    properties : constants of the section.
    corners : singular corners; `rings` the points beside them, `intensities` (C, 3) their K under unit Vy, Vz, T.
    flows : the joints' flows under unit actions.
    solved, cuts : what cuts are read from, and the section file's cuts placed on the mesh.
    """

    fields: UnitFields
    properties: Properties
    corners: Sequence[Corner]
    rings: Samples
    intensities: FloatArray
    flows: Sequence[JointFlows]
    solved: SolvedFields
    cuts: Sequence[PlacedCut]


def solve_case(section: Section, actions: Actions, unit: Recovered) -> CaseResult:
    """Return the stresses, largest values, joints and probes of one load case [N, mm, MPa]; InputError for a probe outside."""
    forces = reduce_actions(actions, unit.properties)
    stress = unit.fields.combine(forces)
    shear = largest_by_part(stress, unit.corners, unit.rings, "tau")
    equivalent = largest_by_part(stress, unit.corners, unit.rings, "von_mises")
    parts = tuple(
        PartResult(tau.part, tau, von_mises, _utilisation(section, tau.part, tau.value, von_mises.value))
        for tau, von_mises in zip(shear, equivalent, strict=True)
    )
    joints = tuple(joint_result(flow, forces, unit.corners) for flow in unit.flows)
    probes = probe_results(section, stress)
    comparison = compare(unit.solved, section, forces) if forces.Vy or forces.Vz else None
    cuts = (
        CutComparison(cut_result(unit.solved, cut, forces), hand_of_cut(unit.solved, cut, forces)) for cut in unit.cuts
    )
    return CaseResult(
        actions.name, actions, forces, stress, parts, joints, probes, corner_readings(stress, forces, unit),
        tuple(cuts), comparison, None if comparison is None else verdict(comparison),
    )  # fmt: skip


def corner_readings(stress: StressField, forces: SectionForces, unit: Recovered) -> tuple[CornerReading, ...]:
    """Return, for every singular corner, |tau| at its stated distance [MPa] and K [MPa mm^-exponent]."""
    beside = read_beside_corners(stress, unit.rings, len(unit.corners))
    K = np.abs(unit.intensities @ np.array([forces.Vy, forces.Vz, forces.T]))
    return tuple(
        CornerReading(corner.y, corner.z, corner.distance, _known(tau), _known(intensity))
        for corner, tau, intensity in zip(unit.corners, beside.tolist(), K.tolist(), strict=True)
    )


def _known(value: float) -> float | None:
    return value if math.isfinite(value) else None


def _utilisation(section: Section, part: str, tau: float, von_mises: float) -> float | None:
    """Larger of tau over the shear strength and von Mises over the strength; None without either.

    None for a weld bead: it is judged on its throat, by its joint. Beside its root every stress grows without limit.
    """
    if section.part(part).bead_of is not None:
        return None
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
