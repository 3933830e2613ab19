"""Options of solve: accuracy, certificate, convergence, hand calculation, all pictures, progress on a terminal."""

from __future__ import annotations

import io
import json
import re

import pytest

from tests.report.more_sections import ROWS, SHARP
from xsec_fem.cli.main import main
from xsec_fem.cli.progress import step_line, step_printer
from xsec_fem.results import MeshStep


@pytest.fixture
def sharp(here):
    (here / "sharp.toml").write_text(SHARP.replace("[solve]\ntry_radius = 0.2\n", ""))
    return "sharp.toml"


def document(here, name="x"):
    return json.loads((here / name / "results.json").read_text())


def test_accuracy_wins_over_the_file(sharp, here):
    errors = {}
    for accuracy in ("0.05", "0.004"):
        assert main(["solve", sharp, "--quiet", "--no-pictures", "--out", "x", "--accuracy", accuracy]) == 0
        errors[accuracy] = max(document(here)["certificate"]["energy_error"].values())
        assert errors[accuracy] <= float(accuracy)
        assert document(here)["mesh"]["steps"][-1]["nodes"] == document(here)["mesh"]["nodes"]
    assert errors["0.05"] > 0.004


@pytest.mark.parametrize("word", ["0", "1", "-0.1", "fine", "nan"])
def test_an_accuracy_that_is_none(boards, capsys, word):
    assert main(["solve", str(boards), f"--accuracy={word}"]) == 2
    assert (
        f"argument --accuracy: must be a number between 0 and 1, such as 0.01 (got {word})" in capsys.readouterr().err
    )


def test_no_certificate_skips_the_bounds_and_says_so(sharp, here, capsys):
    assert main(["solve", sharp, "--no-pictures", "--no-certificate", "--out", "x"]) == 0
    out = capsys.readouterr().out
    assert "none: bounds were not asked for, and the mesh was not refined" in out
    assert "guaranteed interval" not in out
    assert "certificate" not in document(here)
    assert "certificate" not in document(here)["timings"]
    assert document(here)["mesh"]["steps"] == []


def test_convergence_adds_table_key_picture_and_time(boards, here, capsys):
    assert main(["solve", str(boards), "--convergence", "--out", "x"]) == 0
    out = capsys.readouterr().out
    assert "\nConvergence\n" in out
    assert (here / "x" / "convergence.png").stat().st_size > 10_000
    rows = document(here)["convergence"]
    assert len(rows) == 5
    assert {"degree", "nodes", "elements", "energy_error", "observed_order", "IT", "IT_interval"} <= set(rows[0])
    assert document(here)["timings"]["convergence"] > 0
    assert main(["solve", str(boards), "--out", "y", "--quiet", "--no-pictures"]) == 0
    assert "convergence" not in document(here, "y")


def test_hand_prints_the_symbols_of_every_cut(boards, capsys):
    assert main(["solve", str(boards), "--no-pictures", "--hand"]) == 0
    assert re.search(
        r"^  Iyy +4\.2667e6  mm⁴ ", capsys.readouterr().out.split("hand calculation: middle")[1], re.MULTILINE
    )


def test_all_pictures(here, capsys):
    (here / "rows.toml").write_text(ROWS)
    assert main(["solve", "rows.toml", "--all-pictures", "--no-certificate", "--quiet", "--out", "x"]) == 1  # the bolts
    names = {path.name for path in (here / "x").iterdir()}
    assert {"sketch.png", "tau.png", "joints.png", "ratio.png", "tau_by_depth.png"} <= names
    assert main(["solve", "rows.toml", "--all-pictures", "--no-pictures"]) == 2
    assert "not allowed with argument" in capsys.readouterr().err


def test_the_standard_pictures_stay_what_they_are(boards, here):
    assert main(["solve", str(boards), "--quiet"]) == 0
    pictures = {path.name for path in (here / "out" / "boards").glob("*.png")}
    assert pictures == {"sketch.png", "tau_xz.png", "tau_xy.png", "tau.png"}


def test_the_sweep_and_the_cuts_are_written_and_named(boards, here):
    assert main(["solve", str(boards), "--quiet", "--no-pictures", "--out", "x"]) == 0
    assert document(here)["cases"][0]["elementary"]["sweep"] == ["sweep_perpendicular_to_v.csv"]
    assert {"sweep_perpendicular_to_v.csv", "cuts.csv"} <= {path.name for path in (here / "x").iterdir()}


class Terminal(io.StringIO):
    """A stream that says it is a terminal."""

    def isatty(self):
        return True


def test_a_line_a_mesh_on_a_terminal_only(sharp, monkeypatch, capsys):
    words = ["solve", sharp, "--no-pictures", "--accuracy", "0.02"]
    assert main(words) == 0
    assert capsys.readouterr().err == ""
    terminal = Terminal()
    monkeypatch.setattr("sys.stderr", terminal)
    assert main([*words, "--quiet"]) == 0
    assert terminal.getvalue() == ""
    assert main(words) == 0
    lines = re.sub(r"\x1b\[[0-9;]*m", "", terminal.getvalue()).splitlines()
    assert lines
    assert all(
        re.fullmatch(r"mesh of \d+ nodes: energy error at most \S+ %, asked for 2 %(: refining)?", line)
        for line in lines
    )
    assert not lines[-1].endswith("refining")


def test_what_a_line_says():
    step = MeshStep(1297, 150, {"Vy": 0.01, "Vz": 0.02, "T": 0.0311})
    assert step_line(step, 0.01) == "mesh of 1297 nodes: energy error at most 3.11 %, asked for 1 %: refining"
    assert step_line(step, 0.05) == "mesh of 1297 nodes: energy error at most 3.11 %, asked for 5 %"
    assert step_printer(0.01, quiet=True) is None
