"""What the reader of a result must know: each caution in one or two plain sentences, with its numbers."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from xsec_fem.model.section import Section
from xsec_fem.pipeline.joint_cautions import joint_cautions
from xsec_fem.pipeline.shear_cautions import shear_cautions
from xsec_fem.pipeline.solution import Solution
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.section_forces import reduce_actions
from xsec_fem.recovery.stress_field import UnitFields
from xsec_fem.results import CaseResult, Caution, Properties

# share of the Poisson part in the shear energy above which it is worth a sentence: 5 % of energy is about 20 % of stress
_POISSON_SHARE = 0.05
# hw/t above which shear buckling decides: 72 epsilon/eta with epsilon = 1, eta = 1.2 (EN 1993-1-5:2006, 5.1(2))
_SLENDER_WALL = 60.0
# decay length of restrained warping over the section's size above which it must be looked at (common practice, no source)
_WARPING_REACH = 1.0

_SLIT_DEG = 359.0  # corners beyond this are ends of slits, which no radius rounds

# a torque below this share of shear times size does not count as twist: it is the scatter of dimensions
_TWIST = 1e-3


@dataclass(frozen=True)
class Evidence:
    """What the cautions are drawn from."""

    section: Section
    solution: Solution
    properties: Properties
    cases: Sequence[CaseResult]
    fields: UnitFields

    @property
    def corners(self) -> Sequence[Corner]:
        """The singular corners."""
        return self.solution.corners

    @property
    def size(self) -> float:
        """Longer side of the section's bounding box [mm]."""
        return float(np.ptp(self.solution.mesh.nodes, axis=0).max())


def cautions(evidence: Evidence) -> tuple[Caution, ...]:
    """Return all cautions, the reader's first; numbers in the file's units (mm, N, MPa)."""
    found = [Caution(code, message) for code, message in evidence.section.cautions]
    for source in (_accuracy, _load_points, _corners, _unequal_nu, _poisson, _restrained_warping, _slender_walls):
        found += source(evidence)
    found += joint_cautions(evidence.section, evidence.cases)
    found += shear_cautions(evidence.section, evidence.cases, evidence.fields, evidence.corners)
    return tuple(found)


def _accuracy(evidence: Evidence) -> Iterator[Caution]:
    wanted, solution = evidence.section.solve.accuracy, evidence.solution
    if solution.no_bounds:
        yield Caution(
            "no certificate",
            f"No guaranteed bounds could be computed on this mesh, and it was not refined: {solution.no_bounds}. "
            "Thicker layers or larger radii make it better conditioned.",
        )
    if solution.bounds is not None and solution.energy_error > wanted:
        drawn = all(part.face is not None for part in evidence.section.parts)
        why = f"the mesh already has {len(solution.mesh.nodes)} nodes" if drawn else "a mesh from a file is not refined"
        yield Caution(
            "accuracy",
            f"The guaranteed energy error is {_rounded_up(solution.energy_error):.2g}, above the {wanted:g} asked for: {why}. "
            "The intervals "
            "printed beside the constants hold all the same.",
        )


def _rounded_up(bound: float) -> float:
    """A bound with two digits, rounded so that it stays one [-]."""
    step = 10.0 ** (math.floor(math.log10(bound)) - 1)
    return math.ceil(bound / step) * step


def _load_points(evidence: Evidence) -> Iterator[Caution]:
    units = evidence.section.units
    for case in evidence.cases:
        if case.actions.load_point is not None or not (case.actions.Vy or case.actions.Vz):
            continue
        forces = reduce_actions(replace(case.actions, load_point="centroid"), evidence.properties)
        field = evidence.fields.combine(forces)
        clear = corner_mask(field.part_nodes.positions, evidence.corners)
        other = float(field.tau[clear].max()) if clear.any() else float(field.tau.max())
        size = evidence.size
        if abs(forces.T - case.forces.T) <= 1e-6 * size * (abs(forces.Vy) + abs(forces.Vz)):
            continue  # the two centres coincide
        yield Caution(
            "load point",
            f"{case.name}: the shear force has no load_point and was taken through the shear centre. Through the centroid "
            f"the torque would be {forces.T:.4g} {units.moment} and the largest tau {other:.3g} {units.stress} instead of "
            f"{case.tau_max.value:.3g}. Give load_point.",
        )


def _corners(evidence: Evidence) -> Iterator[Caution]:
    length = evidence.section.units.length
    if not evidence.corners:
        return
    worst = min(evidence.corners, key=lambda corner: corner.exponent)
    others = len(evidence.corners) - 1
    more = f" (and {others} more such corner{'s' if others > 1 else ''}, listed under corners)" if others else ""
    reading = f"Stresses are read {worst.distance:.3g} {length} away from it"
    remedy = (
        "Use the mean over the joint"
        if worst.angle_deg > _SLIT_DEG
        else "Give a root radius, or use the mean over the joint"
    )
    yield Caution(
        "singular corner",
        f"Corner of {worst.angle_deg:.0f} deg at ({worst.y:.4g}, {worst.z:.4g}){more}: the stress grows without limit, as "
        f"r^{worst.exponent:.3f}. {reading}. {remedy}.",
    )


def _unequal_nu(evidence: Evidence) -> Iterator[Caution]:
    if not evidence.solution.warping.problem.moduli.equal_nu:
        yield Caution(
            "unequal nu",
            "The parts have different Poisson's ratios: the in-plane stresses that this causes where they meet are neglected. "
            "Compare with nu_effect = false to see how much nu matters here.",
        )


def _poisson(evidence: Evidence) -> Iterator[Caution]:
    for index, name in ((1, "Vy"), (2, "Vz")):
        used = any(getattr(case.actions, name) for case in evidence.cases)
        share = (
            evidence.solution.integrals.energy[index + 2, index + 2] / evidence.solution.integrals.energy[index, index]
        )
        if used and share > _POISSON_SHARE:
            yield Caution(
                "Poisson effect",
                f"Wide body: the Poisson effect of a beam with free sides adds {100 * share:.0f} % to the shear energy of {name}; "
                "stresses at the sides are far above the formula. nu_effect = false shows the plain flow, as of a plate "
                "that cannot curve sideways.",
            )


def _restrained_warping(evidence: Evidence) -> Iterator[Caution]:
    properties = evidence.properties
    size = evidence.size
    reach = math.sqrt(properties.EIw / properties.GIT)
    twisted = [case.name for case in evidence.cases if abs(case.T_total) > _TWIST * size * _shear_of(case)]
    if twisted and reach > _WARPING_REACH * size:
        yield Caution(
            "restrained warping",
            f"{', '.join(twisted)}: the section is twisted, and restrained warping is not included. Its reach sqrt(E Iw/(G IT)) is "
            f"{reach:.4g} {evidence.section.units.length}, {reach / size:.1f} times the section's size: near a support that "
            "prevents warping the stresses differ.",
        )


def _shear_of(case: CaseResult) -> float:
    forces = case.forces
    return abs(forces.Vy) + abs(forces.Vz) or 1e-300


def _slender_walls(evidence: Evidence) -> Iterator[Caution]:
    for part in evidence.section.parts:
        for wall in part.walls:
            length = max(math.dist(a, b) for a, b in zip(wall.points, wall.points[1:], strict=False))
            if length > _SLENDER_WALL * wall.thickness:
                yield Caution(
                    "slender wall",
                    f"{part.name}/{wall.name}: length/thickness = {length / wall.thickness:.0f}: shear buckling is outside this "
                    "check.",
                )
