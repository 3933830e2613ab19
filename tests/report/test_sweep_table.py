"""Sweeps and cuts as CSV: header, units, numbers in full."""

from __future__ import annotations

import csv
import io

import pytest

from xsec_fem.elementary.sweep import CSV_COLUMNS, LEVELS
from xsec_fem.report.cut_table import COLUMNS, cuts_csv
from xsec_fem.report.sweep_table import case_sweeps, sweep_csv, sweep_name


def rows_of(text: str) -> list[list[str]]:
    return list(csv.reader(io.StringIO(text)))


def test_a_sweep_has_a_unit_row_and_the_formula_in_closed_form(solved):
    result = solved("boards")
    comparison = result.cases[0].comparison
    (sweep,) = case_sweeps(comparison, every=False)
    header, units, *rows = rows_of(sweep_csv(sweep, comparison, result.section.units))
    assert header == list(CSV_COLUMNS)
    assert units == ["", "mm", "-", "mm", "mm³", "mm³", "MPa", "MPa", "MPa", "MPa", "mm", "mm"]
    assert len(rows) == LEVELS
    for row in rows[::20]:
        z = float(row[1])
        # V S/(I t) of 100 x 80: V/2I (h²/4 - z²) (textbook)
        exact = 4000 / (2 * 100 * 80**3 / 12) * (40**2 - z**2)
        assert float(row[6]) == pytest.approx(exact, rel=1e-12)
        assert float(row[7]) == pytest.approx(exact, rel=1e-9)  # equilibrated field: round-off of the system
        assert float(row[9]) >= float(row[8]) * (1 - 1e-12)


@pytest.mark.parametrize(
    ("name", "case", "families"),
    [
        ("boards", 0, ["perpendicular to V", "along z"]),
        ("box", 0, ["perpendicular to V", "along y"]),
        ("deck", 0, ["perpendicular to V", "along y", "along z"]),
    ],
)
def test_families(solved, name, case, families):
    comparison = solved(name).cases[case].comparison
    assert [sweep.name for sweep in case_sweeps(comparison, every=True)] == families
    assert case_sweeps(comparison, every=False) == (comparison.sweep,)


def test_names_of_the_files(solved):
    sweep = solved("boards").cases[0].comparison.sweep
    assert sweep_name(sweep) == "sweep_perpendicular_to_v.csv"
    assert sweep_name(sweep, "support") == "support_sweep_perpendicular_to_v.csv"


def test_cuts_with_and_without_a_hand_value(solved):
    result = solved("box")
    header, units, *rows = rows_of(cuts_csv(result))
    assert header == list(COLUMNS)
    assert len(units) == len(header)
    assert units[header.index("flow")] == "N/mm"
    table = [dict(zip(header, row, strict=True)) for row in rows if row[0] == "sideways"]
    assert [(row["cut"], row["wall"]) for row in table] == [
        ("both webs", ""), ("both webs", "1"), ("both webs", "2"), ("one web", ""),
    ]  # fmt: skip
    whole, first, second, alone = table
    assert float(whole["flow"]) == pytest.approx(float(first["flow"]) + float(second["flow"]), abs=1e-9)
    assert whole["no_hand_value"] == ""
    assert alone["elementary"] == alone["ratio"] == ""
    assert alone["no_hand_value"].startswith("The cut does not separate the section")
