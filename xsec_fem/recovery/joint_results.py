"""A joint under one load case: flow, demand, capacity and what is required, as a whole and bond by bond.

Demand is what the capacity is given for: the mean stress of glue, the flow over the throat of the worst bead, the force on one
fastener of the worst row. Full interaction (no slip) is assumed throughout.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import asdict, dataclass, field, replace
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.model.outline import Point
from xsec_fem.model.section import Bond, Fasteners, Joint
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.joint_lines import BondLine
from xsec_fem.recovery.joints import CutOff, JointFlows
from xsec_fem.recovery.stress_field import SectionForces

FloatArray = npt.NDArray[np.float64]

_NO_TOTAL = 1e-6  # a total below this share of the largest bond's flow is none: shares of it would say nothing
_ROUND_OFF = 1e-9  # of force over size: a flow below this is the round-off of a flow that is zero by symmetry


@dataclass(frozen=True)
class BondResult:
    """One bead or row under one load case.

    Attributes
    ----------
    name, at : "bead 1", "row y = 70", and its middle [mm].
    width : throat of a bead, strip of a row [mm].
    flow : force per length of beam; share of the joint's flow, None where the bonds' flows cancel.
    mean, peak, peak_at : shear on the throat [stress] and where it is largest, read at least `root_distance` from the root.
    force : of one fastener at the given spacing.
    required : throat or largest spacing for the capacity; None without one, or without flow.
    """

    name: str
    at: Point
    width: float
    flow: float
    share: float | None = None
    mean: float | None = None
    peak: float | None = None
    peak_at: Point | None = None
    root_distance: float | None = None
    force: float | None = None
    required: float | None = None


@dataclass(frozen=True)
class JointProfile:
    """Shear across a glue line or the throat of a bead, to draw.

    places : (L, n, 2) [mm], L lines of n points each in order; across : (L, n) tau . n there [stress], n from the first side out.
    """

    places: FloatArray
    across: FloatArray


@dataclass(frozen=True)
class JointResult:
    """A joint under one load case.

    Attributes
    ----------
    name, kind : as declared.
    width : over which the flow is spread: glue line, sum of throats, sum of strips; of contact the slit [mm].
    flow : force per length of beam, of all bonds together.
    by_hand : V S/I of the side that is cut off; None for contact.
    separates, shared_with : whether that is the joint's own flow, and if not, with which others it is shared.
    mean, peak, peak_at : shear stress of glue, or on the throats of a weld; None for fasteners and contact.
    demand, capacity : as the module says; None without something to compare.
    required : "strength" for glue, "throat" (and "leg") for a weld, "spacing" for fasteners.
    bonds : the beads or rows.
    remarks : what must be said beside the numbers.
    profiles : one a glue line or bead; not in results.json.
    """

    name: str
    kind: str
    width: float
    flow: float
    by_hand: float | None
    separates: bool
    shared_with: tuple[str, ...] = ()
    mean: float | None = None
    peak: float | None = None
    peak_at: Point | None = None
    demand: float | None = None
    capacity: float | None = None
    required: Mapping[str, float] = field(default_factory=dict)
    bonds: tuple[BondResult, ...] = ()
    remarks: tuple[str, ...] = ()
    profiles: tuple[JointProfile, ...] = field(default=(), repr=False, compare=False)

    @property
    def utilisation(self) -> float | None:
        """Demand over capacity [-]; None without either."""
        return None if self.capacity is None or self.demand is None else self.demand / self.capacity

    @property
    def margin(self) -> float | None:
        """1/utilisation - 1 [-]; None without a utilisation, or at no load."""
        return 1 / self.utilisation - 1 if self.utilisation else None

    def to_dict(self) -> dict[str, Any]:
        """Return the entry of results.json; keys without a value are left out, bonds are "beads" or "rows"."""
        entry = _present(asdict(replace(self, profiles=()))) | _present(
            {"utilisation": self.utilisation, "margin": self.margin}
        )
        bonds = [_present(bond) for bond in entry.pop("bonds")]
        del entry["profiles"]
        for key in ("shared_with", "required", "remarks"):
            if not entry[key]:
                del entry[key]
        if bonds:
            entry["rows" if self.kind == "fasteners" else "beads"] = bonds
        return entry


def _present(entry: Mapping[str, Any]) -> dict[str, Any]:
    return {
        key: list(value) if isinstance(value, tuple) else value for key, value in entry.items() if value is not None
    }


def joint_result(flows: JointFlows, forces: SectionForces, corners: Sequence[Corner]) -> JointResult:
    """Return one joint under the given forces [N, N mm -> N/mm, MPa]; stresses are read outside the corners' distances."""
    unit, joint = np.array([forces.Vy, forces.Vz, forces.T]), flows.joint
    cut = flows.cut_for(unit)
    result = JointResult(
        joint.name, joint.kind, math.fsum(bond.width for bond in flows.bonds), float(cut.flows.sum(axis=0) @ unit),
        float(cut.separated @ unit), not cut.shared_with, cut.shared_with, remarks=_remarks(flows, cut),
    )  # fmt: skip
    if not flows.bonds:
        return replace(result, width=flows.slit, by_hand=None)
    bonds = _bonds(flows, cut, unit, corners)
    if joint.fasteners is not None:
        return _of_fasteners(replace(result, bonds=bonds), joint.fasteners)
    worst = max(bonds, key=lambda bond: abs(bond.peak or 0.0))
    profiles = tuple(_profile(bond, unit, joint) for bond in flows.bonds if len(bond.places))
    result = replace(result, mean=result.flow / result.width, peak=worst.peak, peak_at=worst.peak_at, profiles=profiles)
    if joint.weld is not None:
        return _of_weld(replace(result, bonds=bonds), joint)
    demand = abs(result.flow / result.width)
    return replace(result, demand=demand, capacity=joint.strength, required={"strength": demand})


def _remarks(flows: JointFlows, cut: CutOff) -> tuple[str, ...]:
    if not flows.bonds:
        return ("Contact carries no shear: the faces slide along each other.",)
    if not cut.shared_with:
        return ()
    names = " and ".join(f"'{name}'" for name in (flows.joint.name, *cut.shared_with))
    return (f"The joint does not separate the section: V S/I gives only the sum over {names}.",)


def _bonds(flows: JointFlows, cut: CutOff, unit: FloatArray, corners: Sequence[Corner]) -> tuple[BondResult, ...]:
    """Flow, share and stress of each bond; flows that are round-off of the forces are set to nothing for what is required."""
    values = [float(value) for value in cut.flows @ unit]
    largest, total = max(abs(value) for value in values), math.fsum(values)
    some_total = abs(total) > _NO_TOTAL * largest
    least = _ROUND_OFF * float(np.abs(unit) @ [1 / flows.size, 1 / flows.size, 1 / flows.size**2])
    return tuple(
        replace(
            _stressed(bond, unit, corners),
            flow=value,
            share=value / total if some_total else None,
            mean=value / bond.width if len(bond.places) else None,
            required=_required(flows.joint, index, abs(value)) if abs(value) > least else None,
        )
        for index, (bond, value) in enumerate(zip(flows.bonds, values, strict=True))
    )


def _stressed(bond: BondLine, unit: FloatArray, corners: Sequence[Corner]) -> BondResult:
    """The largest |tau . n| at the bond's places, outside the stated distance of singular corners where there are any."""
    plain = BondResult(bond.name, bond.at, bond.width, 0.0)
    if not len(bond.places):
        return plain
    across = bond.across @ unit
    clear = corner_mask(bond.places, corners)
    top = int(np.argmax(np.where(clear if clear.any() else True, np.abs(across), -1.0)))
    place = (float(bond.places[top, 0]), float(bond.places[top, 1]))
    return replace(plain, peak=float(across[top]), peak_at=place, root_distance=bond.root_distance or None)


def _profile(bond: BondLine, unit: FloatArray, joint: Joint) -> JointProfile:
    """The stress at the bond's places: edge by edge of the mesh along a glue line, from root to surface of a bead."""
    lines = len(bond.edges) if joint.kind == "glue" else 1
    return JointProfile(bond.places.reshape(lines, -1, 2), (bond.across @ unit).reshape(lines, -1))


def _required(joint: Joint, index: int, flow: float) -> float | None:
    """Throat of a bead, or largest spacing of a row, at which its demand is the capacity; None without a capacity."""
    if joint.fasteners is not None:
        return joint.fasteners.capacity / flow
    bond = joint.bonds[index] if joint.weld is not None else None
    if bond is None or bond.throat is None or joint.strength is None:
        return None
    # the penetration keeps its share of the effective throat
    return max(0.0, flow / joint.strength - (math.dist(*bond.throat) - _plain_throat(bond)))


def _plain_throat(bond: Bond) -> float:
    """Throat of a bead without its penetration: leg cos(phi/2)."""
    return (bond.leg or 0.0) * math.cos(math.radians(bond.angle_deg or 0.0) / 2)


def _of_weld(result: JointResult, joint: Joint) -> JointResult:
    """Demand of the worst bead; the required throat is that of the bead that needs most."""
    demand = max(abs(bond.mean or 0.0) for bond in result.bonds)
    required = {"strength": demand}
    needs = [(bond.required, k) for k, bond in enumerate(result.bonds) if bond.required is not None]
    if needs:
        throat, k = max(needs)
        required = {"throat": throat}
        if joint.weld is not None and joint.weld.leg is not None:
            required["leg"] = throat / math.cos(math.radians(joint.bonds[k].angle_deg or 0.0) / 2)
    return replace(result, demand=demand, capacity=joint.strength, required=required)


def _of_fasteners(result: JointResult, fasteners: Fasteners) -> JointResult:
    """Force on one fastener of the worst row at the given spacing; the required spacing is the largest one allowed."""
    needs = [bond.required for bond in result.bonds if bond.required is not None]
    required = {"spacing": min(needs)} if needs else {}
    if fasteners.spacing is None:
        return replace(result, capacity=fasteners.capacity, required=required)
    spacing = fasteners.spacing
    bonds = tuple(replace(bond, force=bond.flow * spacing) for bond in result.bonds)
    demand = max(abs(bond.flow) * spacing for bond in bonds)
    return replace(result, bonds=bonds, demand=demand, capacity=fasteners.capacity, required=required)
