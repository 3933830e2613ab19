"""joints.csv: every joint of every case, one row each, a row of units below the header."""

from __future__ import annotations

import csv
import io

from xsec_fem.results import Result

COLUMNS = (
    "case", "joint", "kind", "width", "flow", "by_hand", "separates", "mean", "peak", "peak_y", "peak_z", "demand",
    "capacity", "utilisation",
)  # fmt: skip


def joints_csv(result: Result) -> str:
    """Return the text of joints.csv; numbers in full, in the units of the second row; empty cells without a strength."""
    units = result.section.units
    unit_row = (
        "", "", "", units.length, units.flow, units.flow, "", units.stress, units.stress, units.length, units.length,
        units.stress, units.stress, "-",
    )  # fmt: skip
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerows([COLUMNS, unit_row])
    for case in result.cases:
        for joint in case.joints:
            writer.writerow(
                (
                    case.name, joint.name, joint.kind, joint.width, joint.flow, joint.by_hand, joint.separates, joint.mean,
                    joint.peak, *joint.peak_at, joint.demand, joint.capacity, joint.utilisation,
                )
            )  # fmt: skip
    return text.getvalue()
