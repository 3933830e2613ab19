"""joints.csv: every joint of every case, one row each, then one a bead or row; a row of units below the header."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator

from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.report.joint_blocks import demand_unit
from xsec_fem.results import Result
from xsec_fem.units import UnitSystem

COLUMNS = (
    "case", "joint", "bond", "kind", "width", "flow", "share", "by_hand", "separates", "shared_with", "mean", "peak",
    "peak_y", "peak_z", "demand", "capacity", "demand_unit", "utilisation", "margin", "required", "required_is",
    "required_unit",
)  # fmt: skip


def joints_csv(result: Result) -> str:
    """Return the text of joints.csv; numbers in full, in the units of the second row; cells without a value are empty.

    `bond` is empty for the joint as a whole. Units that differ from joint to joint stand beside their numbers.
    """
    units = result.section.units
    unit_row = (
        "", "", "", "", units.length, units.flow, "-", units.flow, "", "", units.stress, units.stress,
        units.length, units.length, "demand_unit", "demand_unit", "", "-", "-", "required_unit", "", "",
    )  # fmt: skip
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerows([COLUMNS, unit_row])
    for case in result.cases:
        for joint in case.joints:
            writer.writerows((case.name, *row) for row in _rows(joint, units))
    return text.getvalue()


def _rows(joint: JointResult, units: UnitSystem) -> Iterator[tuple[object, ...]]:
    what = next((name for name in ("throat", "spacing", "strength") if name in joint.required), None)
    unit = {None: None, "strength": units.stress}.get(what, units.length)
    yield (
        joint.name, None, joint.kind, joint.width, joint.flow, None, joint.by_hand, joint.separates,
        "; ".join(joint.shared_with), joint.mean, joint.peak, *(joint.peak_at or (None, None)), joint.demand,
        joint.capacity, demand_unit(joint, units), joint.utilisation, joint.margin,
        joint.required[what] if what else None, what, unit,
    )  # fmt: skip
    own = {"fasteners": "spacing", "fillet weld": "throat"}.get(joint.kind)
    for bond in joint.bonds:
        demand = bond.force if joint.kind == "fasteners" else bond.mean
        size = None if demand is None else abs(demand)
        yield (
            joint.name, bond.name, joint.kind, bond.width, bond.flow, bond.share, None, None, None, bond.mean, bond.peak,
            *(bond.peak_at or (None, None)), size, joint.capacity, demand_unit(joint, units),
            size / joint.capacity if size is not None and joint.capacity else None, None,
            bond.required, own if bond.required is not None else None, units.length if bond.required is not None else None,
        )  # fmt: skip
