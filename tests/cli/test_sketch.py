"""xsec-fem sketch: the whole output, and that it needs no mesher."""

from __future__ import annotations

import sys

from tests.report.sections import ALL
from tests.report.test_section_summary import WHOLE
from xsec_fem.cli.main import main


def test_the_whole_output(boards, here, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "gmsh", None)
    assert main(["sketch", str(boards)]) == 0
    out, err = capsys.readouterr()
    expected = WHOLE.replace("built in Python", "boards.toml").replace("sketch.png", "out/boards/sketch.png")
    assert (out, err) == (expected, "")
    assert [path.name for path in (here / "out" / "boards").iterdir()] == ["sketch.png"]


def test_svg_and_another_folder(tee, here):
    assert main(["sketch", str(tee), "--svg", "--out", "x"]) == 0
    assert sorted(path.name for path in (here / "x").iterdir()) == ["sketch.png", "sketch.svg"]


def test_faults_end_it(here, capsys):
    (here / "wrong.toml").write_text(ALL["boards"].replace("height = 40", "height = 0"))
    assert main(["sketch", "wrong.toml"]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.count("height must be > 0") == 2


def test_parts_of_a_mesh_file_are_drawn(boards, here, capsys):
    text = ALL["boards"] + '\n[solve]\nmesh_file = "boards.msh"\n'
    (here / "meshed.toml").write_text(text)
    assert main(["solve", "meshed.toml", "--quiet", "--no-pictures"]) == 0
    parts = text.replace("[solve]", "").replace('mesh_file = "boards.msh"', "")
    for name in ("lower", "upper"):
        at = "at = [0, -20]" if name == "lower" else "at = [0, 20]"
        parts = parts.replace(
            f'name = "{name}"\nmaterial = "board"\nshape = "rectangle"\nwidth = 100\nheight = 40\n{at}',
            f'name = "{name}"\nmaterial = "board"\nshape = "file"\npath = "boards.msh"\nregion = "{name}"',
        )
    (here / "from_mesh.toml").write_text(parts)
    assert main(["sketch", "from_mesh.toml"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    assert "lower | upper                100  glue" in out
    assert (here / "out" / "from_mesh" / "sketch.png").exists()


def test_without_matplotlib_the_check_still_works(boards, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "matplotlib.figure", None)
    assert main(["sketch", str(boards)]) == 3
    out, err = capsys.readouterr()
    assert "read without fault: 2 parts" in out
    assert err.startswith("boards.toml: no pictures")
