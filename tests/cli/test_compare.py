"""xsec-fem compare: output, files and exit codes."""

from __future__ import annotations

import json
import re
import sys

import pytest

from tests.report.more_sections import BOX
from tests.report.sections import ALL
from xsec_fem.cli.main import main
from xsec_fem.elementary.sweep import LEVELS


@pytest.fixture
def box(here):
    (here / "box.toml").write_text(BOX)
    return "box.toml"


def test_tables_and_files_of_a_good_formula(boards, here, capsys):
    assert main(["compare", str(boards)]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    lines = out.splitlines()
    assert lines[:2] == ["Two boards", "=========="]
    headings = [line for line in lines if line and not line.startswith((" ", "="))]
    assert headings == ["Two boards", "Load case: support", "Files written"]
    assert "  V S/(I t) is good here: within 5 % in every part." in lines
    assert "  hand calculation: middle" in lines
    written = [line.split("/")[-1] for line in out.split("Files written\n")[1].splitlines()]
    assert written == [
        "comparison.json", "sweep_perpendicular_to_v.csv", "sweep_along_z.csv", "cuts.csv", "ratio.png", "tau_by_depth.png",
    ]  # fmt: skip
    assert sorted(written) == sorted(path.name for path in (here / "out" / "boards").iterdir())


def test_cases_without_shear_have_no_files_of_their_own(box, here, capsys):
    assert main(["compare", box, "--no-pictures", "--out", "x"]) == 0
    assert "No shear force in this case: nothing to compare." in capsys.readouterr().out
    assert sorted(path.name for path in (here / "x").iterdir()) == [
        "comparison.json", "cuts.csv", "sideways_sweep_along_y.csv", "sideways_sweep_perpendicular_to_v.csv",
    ]  # fmt: skip


def test_json_is_the_comparison_and_nothing_else(box, here, capsys):
    assert main(["compare", box, "--json", "--no-pictures", "--out", "x"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    assert out == (here / "x" / "comparison.json").read_text()
    document = json.loads(out)
    assert set(document) == {"schema", "title", "input", "versions", "units", "cases"}
    sideways, pull = document["cases"]
    assert "elementary" not in pull
    elementary = sideways["elementary"]
    assert elementary["verdict"] == "poor"
    assert set(elementary) == {"verdict", "message", "parts", "walls", "sweep"}
    assert {"name", "worst_ratio", "side", "at", "message", "grade", "cause"} <= set(elementary["parts"][0])
    for name in elementary["sweep"]:
        assert len((here / "x" / name).read_text().splitlines()) == LEVELS + 2
    both, one = sideways["cuts"]
    assert "ratio" in both
    assert "no_hand_value" in one


def test_several_files_one_after_the_other_or_as_a_list(boards, box, here, capsys):
    assert main(["compare", str(boards), box, "--no-pictures"]) == 0
    assert "\n\nBox\n===\n" in capsys.readouterr().out
    assert main(["compare", str(boards), box, "--no-pictures", "--json"]) == 0
    assert [document["title"] for document in json.loads(capsys.readouterr().out)] == ["Two boards", "Box"]
    assert main(["compare", "no.toml", box, "--no-pictures"]) == 2
    out, err = capsys.readouterr()
    assert err.startswith("no.toml does not exist")
    assert out.startswith("Box\n")


@pytest.mark.parametrize(
    ("words", "grade"),
    [([], "good"), (["--good", "0.01"], "use with care"), (["--good", "0.01", "--care", "0.02"], "poor")],
)
def test_limits_can_be_set(boards, capsys, words, grade):
    # the sides of 100 x 80 are 3.7 % above the mean by the Poisson effect (rectangle, series; tests/theory/test_flexure_exact.py)
    assert main(["compare", str(boards), "--no-pictures", "--json", *words]) == 0
    assert json.loads(capsys.readouterr().out)["cases"][0]["elementary"]["verdict"] == grade


@pytest.mark.parametrize(
    ("words", "message"),
    [
        (["--good", "0.3"], "--good must be below --care, 0.2 (got 0.3)."),
        (["--good", "-1"], "argument --good: must be a number between 0 and 1, such as 0.01 (got -1)"),
        (["--care", "much"], "argument --care: must be a number between 0 and 1, such as 0.01 (got much)"),
        (["--quiet"], "unrecognized arguments: --quiet"),
    ],
)
def test_usage_errors(boards, capsys, words, message):
    assert main(["compare", str(boards), *words]) == 2
    assert message in capsys.readouterr().err


def test_strength_does_not_count_here(here, capsys):
    (here / "weak.toml").write_text(ALL["boards"].replace("shear_strength = 1.6", "shear_strength = 0.1"))
    assert main(["compare", "weak.toml", "--no-pictures"]) == 0


def test_svg_beside_png(boards, here):
    assert main(["compare", str(boards), "--svg"]) == 0
    names = {path.name for path in (here / "out" / "boards").iterdir()}
    assert {"ratio.svg", "tau_by_depth.svg", "ratio.png"} <= names


def test_without_matplotlib_the_numbers_are_there(boards, here, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "matplotlib.figure", None)
    assert main(["compare", str(boards)]) == 3
    out, err = capsys.readouterr()
    assert re.fullmatch(r"boards\.toml: no pictures: matplotlib cannot be loaded .*\n", err)
    assert "V S/(I t) is good here" in out


def test_an_output_folder_that_cannot_be_made(boards, here, capsys):
    (here / "file").write_text("")
    assert main(["compare", str(boards), "--out", "file/x"]) == 2
    assert "output folder file/x cannot be written" in capsys.readouterr().err
