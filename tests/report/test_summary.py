"""The summary: every number with a unit, nothing bonded silently, failures said."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from tests.report.sections import ALL
from xsec_fem.report.blocks import plain_text
from xsec_fem.report.numbers import number
from xsec_fem.report.summary import over_strength_lines, summary
from xsec_fem.results import Caution, Check


def text_of(result, files=()) -> str:
    return plain_text(summary(result, files))


@pytest.mark.parametrize("name", ALL)
def test_every_case_part_and_property_is_there_in_the_units_of_the_file(solved, name):
    result = solved(name)
    text, units = text_of(result), result.section.units
    assert text.startswith(f"{result.section.title}\n===")
    assert f"units: {units.name} (stress in {units.stress})" in text
    for item in (*result.section.parts, *result.section.actions, *result.section.joints, *result.section.probes):
        assert item.name in text
    for other in {"mm", "m", "in"} - {units.length}:
        assert f"[{other}]" not in text
    assert not re.search(r"(?<![\w.])-0(\.0*)?(?![\w.])", text)
    assert not re.search(r"\b(nan|inf)\b", text)


@pytest.mark.parametrize(
    ("symbol", "unit"),
    [
        ("A", "mm²"),
        ("yc", "mm"),
        ("Iyy", "mm⁴"),
        ("IT", "mm⁴"),
        ("Iw", "mm⁶"),
        ("ysc", "mm"),
        ("EIyy", "N mm²"),
        ("EIw", "N mm⁴"),
    ],
)
def test_properties_have_symbol_value_and_unit(solved, symbol, unit):
    result = solved("tee")
    scale = 120.0 if symbol in ("yc", "ysc") else 0.0
    row = rf"^  {symbol} +{re.escape(number(getattr(result.properties, symbol), scale=scale))} +{unit}  "
    assert re.search(row, text_of(result), re.MULTILINE)


def test_stiffness_areas_are_not_sold_as_resistance_areas(solved):
    rows = [line for line in text_of(solved("boards")).splitlines() if line.startswith("  As")]
    assert len(rows) == 2
    assert all(row.endswith("stiffness (Timoshenko), not a code's resistance area") for row in rows)


def test_what_touches_is_listed_with_its_joint_or_as_one_solid(solved):
    boards, tee = text_of(solved("boards")), text_of(solved("tee"))
    assert re.search(r"lower \| upper +100( +0)?  glue\n", boards)
    assert re.search(r"(flange \| web|web \| flange) +6( +0)?  none: taken as one solid\n", tee)


def test_the_joint_has_the_flow_by_hand(solved):
    # V S/I = 4000 (100 40 20)/(100 80³/12) = 75 N/mm, mean 0.75 MPa, utilisation 0.375 of 2.0 (V. Q/(I t), textbook)
    line = next(line for line in text_of(solved("boards")).splitlines() if line.startswith("  glue "))
    assert line.split()[:5] == ["glue", "glue", "75", "75", "0.75"]
    assert "0.375" in line


def test_corners_are_listed_and_values_beside_them_starred(solved):
    text = text_of(solved("tee"))
    assert "Corners where the stress grows without limit" in text
    assert re.search(r"\(-3, 100\) +270 +-0.333 +0.6", text)
    assert "without limit" not in text_of(solved("boards"))


def test_checks_take_one_line_when_fine_and_name_what_fails(solved):
    result = solved("boards")
    assert f"all {len(result.checks)} within their limits" in text_of(result)
    bad = replace(result, checks=(Check("balance", 0.5, 0.1), Check("other", 0.0, 1.0)))
    assert "FAILED: balance: 0.5 is above its limit 0.1 [-]\n  1 of 2 within their limits" in text_of(bad)


def test_warnings_and_files_are_told_in_full(solved):
    result = replace(solved("boards"), warnings=(Caution("code", "A whole sentence."),))
    text = text_of(result, ["out/x/results.json"])
    assert text.endswith("Warnings\n  A whole sentence.\n\nFiles written\n  out/x/results.json\n")


def test_what_is_over_its_strength_is_said(solved):
    result = solved("boards")
    case = result.cases[0]
    over = replace(result, cases=(replace(case, parts=(replace(case.parts[0], utilisation=1.25), *case.parts[1:])),))
    assert over_strength_lines(over) == ("support: part lower has utilisation 1.25",)
    assert "1.250 OVER" in text_of(over)
    assert over_strength_lines(result) == ()


def test_a_section_without_actions(solved):
    result = replace(solved("boards"), cases=())
    assert "No actions in the file: no stresses." in text_of(result)
