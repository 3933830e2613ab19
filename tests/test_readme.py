"""The README's commands exist, its Python runs, its section file solves, and what it promises is there."""

import re
from pathlib import Path

import pytest

from xsec_fem import parse_section, solve
from xsec_fem.cli.main import main
from xsec_fem.model.shapes import SHAPES

ROOT = Path(__file__).parents[1]
TEXT = (ROOT / "README.md").read_text(encoding="utf-8")


def blocks(language):
    return re.findall(rf"```{language}\n(.*?)```", TEXT, flags=re.DOTALL)


def test_exactly_two_set_up_commands():
    commands = [line for block in blocks("sh") for line in block.strip().splitlines()]
    assert len(commands) == 2
    for command in commands:
        assert command.startswith("python3 -m venv .venv && .venv/bin/pip install")
    assert "<!-- test command -->" in TEXT


def test_python_runs(monkeypatch, capsys):
    monkeypatch.chdir(ROOT)
    (code,) = blocks("python")
    exec(compile(code, "README.md", "exec"), {})
    assert len(capsys.readouterr().out.splitlines()) == 4


def test_section_file_solves():
    (text,) = blocks("toml")
    result = solve(parse_section(text, "readme.toml", ROOT))
    assert not result.over_strength
    (joint,) = result.cases[0].joints
    assert joint.separates


def test_first_demo_writes_the_files_named(tmp_path, capsys):
    assert main(["solve", str(ROOT / "meshes/five_boards.toml"), "--out", str(tmp_path)]) == 0
    first = TEXT.split("```sh")[0]
    named = set(re.findall(r"`([\w.]+\.(?:json|vtu|csv|png))`", first))
    assert {"results.json", "fields.vtu", "joints.csv", "sketch.png", "tau_xz.png", "tau_xy.png", "tau.png"} <= named
    assert named <= {path.name for path in tmp_path.rglob("*")}


@pytest.mark.parametrize("command", re.findall(r"^\| `xsec-fem (\w+)", TEXT, flags=re.MULTILINE))
def test_commands_of_the_table_exist(command, capsys):
    assert main([command, "--help"]) == 0
    assert command in capsys.readouterr().out


def test_number_of_shapes_is_true():
    (count,) = set(re.findall(r"(\d+) shapes", TEXT))
    assert int(count) == len(SHAPES)


def test_picture_is_there():
    for target in re.findall(r"!\[[^\]]*\]\(([^)]+)\)", TEXT):
        assert (ROOT / target).is_file()


@pytest.mark.parametrize(
    "word", ["buckling", "fatigue", "restrained warping", "shear lag", "Local codes", "licensed engineer"]
)
def test_limits_are_named(word):
    assert word in TEXT
