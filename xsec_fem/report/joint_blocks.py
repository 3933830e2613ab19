"""The joints of one load case in words and tables: flow beside V S/I, demand beside capacity, beads and rows one by one."""

from __future__ import annotations

from xsec_fem.recovery.joint_results import BondResult, JointResult
from xsec_fem.report.blocks import Block, Lines, Table
from xsec_fem.report.numbers import number, point
from xsec_fem.report.wording import section_size
from xsec_fem.results import CaseResult, Result
from xsec_fem.units import UnitSystem


def joint_blocks(result: Result, case: CaseResult) -> list[Block]:
    """Return the tables of the joints and of their beads and rows, then what must be said beside them (file's units)."""
    if not case.joints:
        return []
    blocks: list[Block] = [_joints(result, case)]
    if any(joint.bonds for joint in case.joints):
        blocks.append(_bonds(result, case))
    remarks = tuple(f"{joint.name}: {remark}" for joint in case.joints for remark in joint.remarks)
    return [*blocks, Lines(remarks)] if remarks else blocks


def required_text(joint: JointResult, units: UnitSystem) -> str:
    """Return "throat 4.4 mm", "spacing 204 mm" or "strength 0.93 MPa": what the flow asks for; "-" without flow."""
    for what, unit in (("leg", units.length), ("throat", units.length), ("spacing", units.length)):
        if what in joint.required:
            return f"{what} {number(joint.required[what], 4)} {unit}"
    return f"strength {number(joint.required['strength'], 4)} {units.stress}" if "strength" in joint.required else "-"


def demand_unit(joint: JointResult, units: UnitSystem) -> str:
    """Return the unit of a joint's demand and capacity: a force for fasteners, else a stress."""
    return units.force if joint.kind == "fasteners" else units.stress


def _joints(result: Result, case: CaseResult) -> Table:
    units, size, flow = result.section.units, section_size(result), _flow_scale(case)
    header = (
        "joint", "kind", f"flow [{units.flow}]", f"by hand V S/I [{units.flow}]", f"mean [{units.stress}]",
        f"peak [{units.stress}]", f"at (y, z) [{units.length}]", "demand", "capacity", "utilisation [-]", "required",
    )  # fmt: skip
    rows = tuple(
        (
            joint.name, joint.kind, number(joint.flow, scale=flow),
            _or_dash(joint.by_hand, flow) + ("" if joint.separates else " (shared)"),
            _or_dash(joint.mean, case.tau_max.value), _or_dash(joint.peak, case.tau_max.value),
            point(*joint.peak_at, size) if joint.peak_at else "-",
            _measure(joint.demand, demand_unit(joint, units)), _measure(joint.capacity, demand_unit(joint, units)),
            utilisation_text(joint.utilisation), required_text(joint, units),
        )
        for joint in case.joints
    )  # fmt: skip
    return Table(header, rows, "llrrrrlrrrl")


def _bonds(result: Result, case: CaseResult) -> Table:
    units, size = result.section.units, section_size(result)
    header = (
        "joint", "bead or row", f"at (y, z) [{units.length}]", f"width [{units.length}]", f"flow [{units.flow}]",
        "share [-]", f"mean [{units.stress}]", f"peak [{units.stress}]", f"force of one [{units.force}]", "required",
    )  # fmt: skip
    rows = tuple(
        (
            joint.name, bond.name, point(*bond.at, size), number(bond.width), number(bond.flow, scale=_flow_scale(case)),
            "-" if bond.share is None else f"{bond.share:.3f}", _or_dash(bond.mean), _or_dash(bond.peak),
            _or_dash(bond.force), _bond_required(joint, bond, units),
        )
        for joint in case.joints
        for bond in joint.bonds
    )  # fmt: skip
    return Table(header, rows, "lllrrrrrrl")


def _bond_required(joint: JointResult, bond: BondResult, units: UnitSystem) -> str:
    if bond.required is None:
        return "-"
    return f"{'spacing' if joint.kind == 'fasteners' else 'throat'} {number(bond.required, 4)} {units.length}"


def _flow_scale(case: CaseResult) -> float:
    return max(abs(joint.flow) for joint in case.joints)


def _or_dash(value: float | None, scale: float = 0.0) -> str:
    return "-" if value is None else number(value, scale=scale)


def _measure(value: float | None, unit: str) -> str:
    return "-" if value is None else f"{number(value, 4)} {unit}"


def utilisation_text(utilisation: float | None) -> str:
    """Return "0.833", "1.042 OVER" or "-" [-]."""
    if utilisation is None:
        return "-"
    return f"{utilisation:.3f}" + (" OVER" if utilisation > 1.0 else "")
