"""The one door: drawn or file, the order rule, and the mesh written on request."""

from __future__ import annotations

import subprocess
import sys
from dataclasses import replace

import pytest

from tests.meshing.sections import file_section, part_areas, rectangle, section
from xsec_fem.errors import InputError
from xsec_fem.meshing.front import make_mesh
from xsec_fem.model.section import SolveSettings

DRAWN = section({"left": rectangle(0, 0, 2, 3), "right": rectangle(2, 0, 5, 3)})


@pytest.mark.parametrize(("given", "expected"), [(None, 4), (1, 1), (5, 5)])
def test_order_of_a_drawn_section(given, expected):
    assert make_mesh(replace(DRAWN, solve=SolveSettings(order=given))).order == expected


@pytest.mark.parametrize("ending", ["msh", "vtu"])
def test_the_mesh_is_written_when_asked_and_can_be_used_again(tmp_path, ending):
    path = tmp_path / f"out.{ending}"
    mesh = make_mesh(replace(DRAWN, solve=SolveSettings(order=3, mesh_file=path)))
    again = make_mesh(file_section(path, {"right": "right", "left": "left"}))
    assert again.order == 3
    assert part_areas(again) == pytest.approx(part_areas(mesh), rel=1e-12)
    assert again.part_names == ("right", "left")


def test_a_script_is_meshed(tmp_path):
    path = tmp_path / "g.geo"
    path.write_text('SetFactory("OpenCASCADE");\nRectangle(1) = {0, 0, 0, 4, 2};\n')
    mesh = make_mesh(file_section(path, {"plate": None}))
    assert (mesh.order, part_areas(mesh)) == (4, pytest.approx({"plate": 8.0}, rel=1e-12))


def test_drawn_parts_and_file_parts_do_not_mix(tmp_path):
    mixed = replace(DRAWN, parts=(*DRAWN.parts, *file_section(tmp_path / "m.msh", {"rail": "rail"}).parts))
    with pytest.raises(
        InputError, match='parts must be all drawn or all from one file: "rail" comes from a file, "left" is'
    ):
        make_mesh(mixed)


def test_a_section_without_parts_is_refused():
    with pytest.raises(InputError, match=r"parts must hold at least one part \(got none\)"):
        make_mesh(section({}))


def test_gmsh_and_meshio_are_loaded_late():
    code = "import sys, xsec_fem.meshing.front; print([m for m in ('gmsh', 'meshio', 'scipy.spatial') if m in sys.modules])"
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "[]"
