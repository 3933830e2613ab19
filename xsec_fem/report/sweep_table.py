"""Sweeps of parallel cuts as CSV: the formula and the field level by level, a row of units below the header."""

from __future__ import annotations

import csv
import io
import math

from xsec_fem.elementary.compare import Comparison
from xsec_fem.elementary.formula import reference_modulus
from xsec_fem.elementary.sweep import CSV_COLUMNS, Sweep, axis_sweeps
from xsec_fem.report.wording import slug
from xsec_fem.units import UnitSystem


def case_sweeps(comparison: Comparison, every: bool) -> tuple[Sweep, ...]:
    """Return the cuts perpendicular to V, and with `every` those along the axes too [mm, MPa]."""
    if not every:
        return (comparison.sweep,)
    return (comparison.sweep, *axis_sweeps(comparison.solved, comparison.forces))


def sweep_name(sweep: Sweep, prefix: str = "") -> str:
    """Return the file's name, "sweep_perpendicular_to_v.csv", behind the case's own prefix when there are several cases."""
    return f"{prefix}_sweep_{slug(sweep.name)}.csv" if prefix else f"sweep_{slug(sweep.name)}.csv"


def sweep_csv(sweep: Sweep, comparison: Comparison, units: UnitSystem) -> str:
    """Return the text of one family, 200 levels in rows; numbers in full, cells empty where a cut meets nothing."""
    unit_row = (
        "", units.length, "-", units.length, units.power(3), units.power(3), *([units.stress] * 4), units.length,
        units.length,
    )  # fmt: skip
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerows([CSV_COLUMNS, unit_row])
    for row in sweep.rows(reference_modulus(comparison.solved)):
        writer.writerow(["" if isinstance(value, float) and math.isnan(value) else value for value in row])
    return text.getvalue()
