"""xsec-fem solve: output, files and exit codes."""

from __future__ import annotations

import json
import re
import sys

import pytest

from tests.report.sections import ALL
from xsec_fem.cli import solve as solve_command
from xsec_fem.cli.main import main

WEAK = ALL["boards"].replace("shear_strength = 1.6", "shear_strength = 0.1")
WRONG = ALL["boards"].replace(
    "width = 100\nheight = 40\nat = [0, 20]", "width = 100\nheight = -40\nat = [0, 20]\ncolour = 3"
)


def headings(text: str) -> list[str]:
    return [line for line in text.splitlines() if line and not line.startswith((" ", "="))]


def test_the_summary_and_the_files(boards, here, capsys):
    assert main(["solve", str(boards)]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    chapters = ["Two boards", "Section properties", "Load case: support", "Parts that touch", "Checks", "Files written"]
    told = headings(out)
    places = [next(k for k, line in enumerate(told) if line.startswith(chapter)) for chapter in chapters]
    assert places == sorted(places)
    assert (places[0], places[-1]) == (0, len(told) - 1)
    written = [line.strip() for line in out.split("Files written\n")[1].splitlines()]
    folder = here / "out" / "boards"
    assert {path.split("/")[-1] for path in written} == {path.name for path in folder.iterdir()}
    assert {"results.json", "fields.vtu", "joints.csv", "sketch.png", "tau_xz.png", "tau_xy.png", "tau.png"} <= {
        path.name for path in folder.iterdir()
    }


def test_results_json_has_the_schema_and_the_times_of_all_stages(boards, here, capsys):
    assert main(["solve", str(boards), "--quiet", "--out", "x"]) == 0
    assert capsys.readouterr() == ("", "")
    document = json.loads((here / "x" / "results.json").read_text())
    assert document["schema"] == "xsec_fem results 1"
    assert document["input"]["file"] == "boards.toml"
    assert {"read", "mesh", "assemble", "factorise", "solve", "recover", "pictures", "total"} <= set(
        document["timings"]
    )
    stages = sum(seconds for name, seconds in document["timings"].items() if name != "total")
    assert stages <= document["timings"]["total"] * 1.001  # clocks of the same process, rounded
    # 4000 N on 100 x 80: A and V S/I in closed form
    assert document["properties"]["A"] == pytest.approx(8000, rel=1e-12)
    assert document["cases"][0]["joints"][0]["flow"] == pytest.approx(75.0, rel=1e-9)


def test_json_prints_the_same_document_and_nothing_else(boards, here, capsys):
    assert main(["solve", str(boards), "--json", "--no-pictures", "--out", "x"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    assert out == (here / "x" / "results.json").read_text()
    assert not list((here / "x").glob("*.png"))


def test_several_files_give_a_list_and_folders_of_their_own(boards, tee, here, capsys):
    assert main(["solve", str(boards), str(tee), "--json", "--no-pictures", "--out", "x"]) == 0
    documents = json.loads(capsys.readouterr().out)
    assert [document["title"] for document in documents] == ["Two boards", "Welded tee"]
    assert sorted(path.name for path in (here / "x").iterdir()) == ["boards", "tee"]


def test_several_files_are_told_one_after_the_other_and_the_worst_code_wins(tee, here, capsys):
    (here / "weak.toml").write_text(WEAK)
    assert main(["solve", "weak.toml", "no.toml", str(tee), "--no-pictures"]) == 2
    out, err = capsys.readouterr()
    assert out.index("Two boards") < out.index("Welded tee")
    assert "\n\nWelded tee\n" in out
    assert err.startswith("no.toml does not exist")
    assert main(["solve", "weak.toml", str(tee), "--no-pictures", "--quiet"]) == 1


def test_over_strength_is_exit_code_1_also_when_quiet(here, capsys):
    (here / "weak.toml").write_text(WEAK)
    assert main(["solve", "weak.toml", "--quiet", "--no-pictures"]) == 1
    out, err = capsys.readouterr()
    assert out == ""
    assert re.fullmatch(
        r"over strength: support: part lower has utilisation \d\.\d+\n"
        r"over strength: support: part upper has utilisation \d\.\d+\n", err,
    )  # fmt: skip


def test_all_faults_of_a_file_on_stderr_one_a_line(here, capsys):
    (here / "wrong.toml").write_text(WRONG)
    assert main(["solve", "wrong.toml"]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    lines = err.splitlines()
    assert len(lines) == 2
    assert all(line.startswith('wrong.toml: parts[1] "upper": ') for line in lines)
    assert not (here / "out").exists()


@pytest.mark.parametrize("order", [3, 5])
def test_order_wins_over_the_file(boards, here, order):
    assert main(["solve", str(boards), "--order", str(order), "--quiet", "--no-pictures"]) == 0
    assert json.loads((here / "out" / "boards" / "results.json").read_text())["mesh"]["order"] == order


def test_svg_beside_png(boards, here):
    assert main(["solve", str(boards), "--quiet", "--svg"]) == 0
    names = {path.name for path in (here / "out" / "boards").iterdir()}
    assert {"sketch.svg", "tau_xz.svg", "tau_xy.svg", "tau.svg", "tau.png"} <= names


@pytest.mark.parametrize(
    ("words", "message"),
    [
        (["solve"], "required: FILE"),
        (["solve", "x.toml", "--order", "6"], "argument --order"),
        (["solve", "x.toml", "--fast"], "unrecognized arguments: --fast"),
        (["solv"], "invalid choice: 'solv'"),
    ],
)
def test_usage_errors(words, message, capsys):
    assert main(words) == 2
    assert message in capsys.readouterr().err


def test_an_output_folder_that_cannot_be_made(boards, here, capsys):
    (here / "file").write_text("")
    assert main(["solve", str(boards), "--out", "file/x"]) == 2
    err = capsys.readouterr().err
    assert err == "output folder file/x cannot be written: not a directory. Give another folder with --out.\n"


def test_without_matplotlib_all_but_the_pictures_is_there(boards, here, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "matplotlib.figure", None)
    assert main(["solve", str(boards)]) == 3
    out, err = capsys.readouterr()
    assert err.startswith("boards.toml: no pictures: matplotlib cannot be loaded")
    assert err.count("\n") == 1
    assert "Two boards" in out
    assert (here / "out" / "boards" / "results.json").exists()


def test_the_meshing_library_missing_is_exit_code_3(boards, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "gmsh", None)
    assert main(["solve", str(boards)]) == 3
    err = capsys.readouterr().err
    assert "gmsh cannot be loaded" in err
    assert "xsec-fem doctor" in err


def test_interrupt_and_closed_pipe_end_quietly(boards, capsys, monkeypatch):
    for error in (KeyboardInterrupt, BrokenPipeError):

        def stop(*_, error=error, **__):
            raise error

        monkeypatch.setattr(solve_command, "print_blocks", stop)
        before = sys.stdout
        assert main(["solve", str(boards), "--no-pictures"]) == 130
        if sys.stdout is not before:  # a closed pipe: what is still said goes nowhere
            sys.stdout.close()
            sys.stdout = before
        assert capsys.readouterr().err == ""
