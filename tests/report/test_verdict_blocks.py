"""The verdict in the summary and in the comparison: sentence, parts, walls, reasons once."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from tests.report.sections import ALL
from xsec_fem.report.blocks import plain_text
from xsec_fem.report.compare_summary import compare_summary, wall_blocks
from xsec_fem.report.verdict_blocks import verdict_blocks


def text_of(result, case=0, every=False) -> str:
    return plain_text(verdict_blocks(result, result.cases[case], every))


def test_a_good_formula_takes_one_sentence(solved):
    assert text_of(solved("boards")) == (
        "  V S/(I t) against the elasticity solution: good\n  V S/(I t) is good here: within 5 % in every part.\n"
    )


def test_every_part_is_listed_when_asked_for(solved):
    text = text_of(solved("boards"), every=True)
    rows = [line.split() for line in text.splitlines() if line.startswith(("  lower ", "  upper "))]
    assert {row[0] for row in rows} == {"lower", "upper"}
    assert all(row[1] == "good" for row in rows)
    assert "elasticity [MPa]" in text


def test_a_poor_formula_with_its_parts_walls_and_reasons(solved):
    text = text_of(solved("profile"))
    assert text.startswith(
        "  V S/(I t) against the elasticity solution: poor\n  V S/(I t) is poor here. profile: Formula too low"
    )
    assert re.search(r"^  profile +poor +formula too low", text, re.MULTILINE)
    assert re.search(r"^  profile/top flange +poor +formula too low", text, re.MULTILINE)
    assert "profile/web " not in text.split("1 more within 5 %")[0].split("ratio [-]")[1]
    assert re.search(r"^  \d more within 5 %: xsec-fem compare lists them$", text, re.MULTILINE)
    assert text.count("This cut lies in a flange 300 mm wide and 20 mm thick") == 1
    assert "Torsion" not in text


def test_torsion_is_said_to_be_left_out(solved):
    assert "Torsion is left out on both sides." in text_of(solved("sharp"))


def test_no_verdict_without_shear(solved):
    assert verdict_blocks(solved("axial"), solved("axial").cases[0]) == []


def test_an_infinite_ratio_is_a_dash(solved):
    result = solved("profile")
    case = result.cases[0]
    findings = (replace(case.verdict.parts[0], elementary=0.0), *case.verdict.parts[1:])
    bad = replace(case, verdict=replace(case.verdict, parts=findings))
    text = plain_text(verdict_blocks(result, bad))
    assert re.search(r"^  profile +poor +formula too low +\S+ +0 +-  \(", text, re.MULTILINE)


@pytest.mark.parametrize("name", [*ALL, "box", "profile"])
def test_the_comparison_has_every_case_with_its_actions(solved, name):
    result = solved(name)
    text = plain_text(compare_summary(result, ["out/x/comparison.json"]))
    assert text.startswith(f"{result.section.title}\n===")
    assert text.endswith("Files written\n  out/x/comparison.json\n")
    for case in result.cases:
        assert case.name in text
    shear = sum(case.comparison is not None for case in result.cases)
    assert text.count("V S/(I t) against the elasticity solution: ") == shear
    assert text.count("No shear force in this case: nothing to compare.") == len(result.cases) - shear
    assert text.count("good: within 5 %; use with care: within 20 %; poor: beyond.") == shear
    assert "Section properties" not in text
    assert not re.search(r"\b(nan|inf)\b", text)


def test_cuts_are_calculated_symbol_by_symbol_in_the_comparison(solved):
    assert "hand calculation: neutral axis" in plain_text(compare_summary(solved("profile")))
    assert "No actions in the file" in plain_text(compare_summary(replace(solved("boards"), cases=())))


def test_walls_have_both_hand_values(solved):
    result = solved("profile")
    rows = {line.split("  ")[1]: line.split() for line in plain_text(wall_blocks(result, result.cases[0])).splitlines()}
    web = rows["profile/web"]
    # 77.3 MPa by hand at the neutral axis by either cut (tests/test_demos.py); in the flange only the cut across it is near
    assert [float(cell) for cell in web[-4:]] == pytest.approx([77.3] * 4, abs=0.05)
    flange = [float(cell) for cell in rows["profile/top flange"][-4:]]
    assert flange[0] == pytest.approx(flange[2], rel=1e-3)
    assert flange[3] < 0.2 * flange[1]


def test_walls_of_a_closed_cell_have_one_hand_value(solved):
    result = solved("box")
    text = plain_text(wall_blocks(result, result.cases[0]))
    assert text.count("closed cell") == 4
    assert wall_blocks(result, result.cases[1]) == []
