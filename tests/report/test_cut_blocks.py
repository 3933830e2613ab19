"""Named cuts: field beside hand value, walls, reasons, and every symbol of the hand calculation."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from xsec_fem.report.blocks import plain_text
from xsec_fem.report.cut_blocks import cut_blocks, unit_of
from xsec_fem.report.summary import summary
from xsec_fem.units import UNIT_SYSTEMS


def line_of(text: str, start: str) -> list[str]:
    return next(line for line in text.splitlines() if line.startswith(start)).split()


def test_a_cut_through_glued_boards(solved):
    # at z = 10: S = 100 30 25 = 75,000, I = 100 80³/12, t = 100: V S/I = 70.3125 N/mm, mean 0.703125 MPa (textbook)
    result = solved("boards")
    text = plain_text(cut_blocks(result, result.cases[0]))
    cells = line_of(text, "  middle ")
    assert cells[1:4] == ["70.313", "100", "0.70313"]
    assert cells[-2] == "0.70313"
    assert float(cells[-1]) == pytest.approx(result.cases[0].cuts[0].ratio, abs=5e-4)
    assert "hand calculation" not in text
    assert "torsion" not in text


def test_the_hand_calculation_symbol_by_symbol(solved):
    result = solved("boards")
    text = plain_text(cut_blocks(result, result.cases[0], hand=True))
    assert "  hand calculation: middle\n" in text
    assert "tau = q/t, q = -Vz Sy/Iyy" in text
    for symbol, value, unit in (
        ("Vy", "0", "N"), ("Vz", "4000", "N"), ("E_ref", "11600", "MPa"), ("Iyy", "4.2667e6", "mm⁴"), ("Iyz", "0", "mm⁴"),
        ("t", "100", "mm"), ("tau", "0.70313", "MPa"),
    ):  # fmt: skip
        assert re.search(rf"^  {symbol} +{re.escape(value)}  {unit} ", text, re.MULTILINE), symbol
    assert re.search(r"^  Sy +-?75000  mm³ ", text, re.MULTILINE) or re.search(r"^  A +3000  mm² ", text, re.MULTILINE)
    assert plain_text(summary(result, hand=True)).count("hand calculation: middle") == 1
    assert "hand calculation" not in plain_text(summary(result))


def test_both_axes_stand_in_the_formula_of_an_unsymmetric_section(solved):
    result = solved("sharp")
    text = plain_text(cut_blocks(result, result.cases[0], hand=True))
    assert "q = -[(Vz Izz - Vy Iyz) Sy + (Vy Iyy - Vz Iyz) Sz]/(Iyy Izz - Iyz²)" in text
    assert "The field's values hold torsion too; V S/(I t) does not know it." in text


def test_a_cut_in_a_closed_cell_says_why_there_is_no_hand_value(solved):
    result = solved("box")
    text = plain_text(cut_blocks(result, result.cases[0], hand=True))
    assert line_of(text, "  one web ")[-2:] == ["none", "-"]
    assert "one web: The cut does not separate the section" in text
    assert "hand calculation: one web" not in text
    walls = [line for line in text.splitlines() if re.match(r"  both webs +[12] ", line)]
    assert len(walls) == 2
    assert all(line.split()[7] == "4" for line in walls)


def test_no_cuts_no_blocks(solved):
    result = solved("tee")
    assert cut_blocks(result, result.cases[0], hand=True) == []
    assert cut_blocks(result, replace(solved("boards").cases[0], cuts=())) == []


@pytest.mark.parametrize(
    ("dimension", "unit"),
    [("force", "kip"), ("stress", "ksi"), ("flow", "kip/in"), ("L1", "in"), ("L3", "in³"), ("L4", "in⁴")],
)
def test_units_of_the_symbols(dimension, unit):
    assert unit_of(dimension, UNIT_SYSTEMS["kip in"]) == unit
