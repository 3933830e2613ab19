"""cuts.csv: every named cut of every case, one row each, then one a wall that it crosses; a row of units below the header."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator

from xsec_fem.results import CutComparison, Result

COLUMNS = (
    "case", "cut", "wall", "through", "from_y", "from_z", "to_y", "to_z", "t", "flow", "mean", "peak", "peak_y", "peak_z",
    "elementary", "ratio", "no_hand_value",
)  # fmt: skip


def cuts_csv(result: Result) -> str:
    """Return the text of cuts.csv; numbers in full, in the units of the second row; cells without a value are empty.

    `wall` is empty for the cut as a whole.
    """
    units = result.section.units
    unit_row = (
        "", "", "", "", *([units.length] * 5), units.flow, units.stress, units.stress, units.length, units.length,
        units.stress, "-", "",
    )  # fmt: skip
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerows([COLUMNS, unit_row])
    for case in result.cases:
        for cut in case.cuts:
            writer.writerows((case.name, *row) for row in _rows(cut))
    return text.getvalue()


def _rows(cut: CutComparison) -> Iterator[tuple[object, ...]]:
    field, calculation = cut.field, cut.hand.calculation
    elementary = None if calculation is None else calculation.tau
    yield (
        field.name, None, None, *field.start, *field.end, field.t, field.flow, field.mean, field.peak, *field.peak_at,
        elementary, cut.ratio, cut.hand.reason or None,
    )  # fmt: skip
    if len(field.spans) == 1:
        return
    for number, span in enumerate(field.spans, start=1):
        yield (
            field.name, number, "; ".join(span.parts), *span.start, *span.end, span.t, span.flow, span.mean, span.peak,
            *span.peak_at, None, None, None,
        )  # fmt: skip
