"""Geometry scripts (.geo): physical surfaces are parts, curves stay curves, faults in plain words."""

from __future__ import annotations

import numpy as np
import pytest

from tests.meshing.sections import edge_uses, file_section, part_areas
from xsec_fem.errors import InputError, MeshingError
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.sizing import SizeField

OPEN_CASCADE = """SetFactory("OpenCASCADE");
Rectangle(1) = {0, 0, 0, 10, 5};
Disk(2) = {5, 2.5, 0, 1};
BooleanFragments{ Surface{1}; Delete; }{ Surface{2}; Delete; }
Physical Surface("in", 7) = {2};
Physical Surface("out", 8) = {3};
Mesh.ElementOrder = 2;
Mesh.RecombineAll = 1;
General.Terminal = 1;
Mesh.MeshSizeMax = 1;
"""
BUILT_IN = """h = 2;
Point(1) = {0, 0, 0, h}; Point(2) = {10, 0, 0, h}; Point(3) = {0, 10, 0, h}; Point(4) = {-10, 0, 0, h};
Point(5) = {0, -10, 0, h};
Circle(1) = {2, 1, 3}; Circle(2) = {3, 1, 4}; Circle(3) = {4, 1, 5}; Circle(4) = {5, 1, 2};
Point(12) = {4, 0, 0, h}; Point(14) = {-4, 0, 0, h}; Point(13) = {0, 2, 0, h}; Point(15) = {0, -2, 0, h};
Ellipse(5) = {12, 1, 12, 13}; Ellipse(6) = {13, 1, 12, 14}; Ellipse(7) = {14, 1, 12, 15}; Ellipse(8) = {15, 1, 12, 12};
Curve Loop(1) = {1, 2, 3, 4}; Curve Loop(2) = {5, 6, 7, 8};
Plane Surface(1) = {1, 2}; Plane Surface(2) = {2};
Physical Surface("in") = {2};
Physical Surface("out") = {1};
"""


def geo(tmp_path, text, regions, scale=1.0):
    path = tmp_path / "part.geo"
    path.write_text(text)
    return file_section(path, regions, scale)


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
@pytest.mark.parametrize(
    ("text", "areas"),
    [
        (OPEN_CASCADE, {"pin": np.pi, "plate": 50 - np.pi}),
        (BUILT_IN, {"pin": 8 * np.pi, "plate": 92 * np.pi}),
    ],
)
def test_surfaces_become_parts_of_the_wanted_order(tmp_path, text, areas, order, capfd):
    mesh = mesh_section(geo(tmp_path, text, {"pin": "in", "plate": "out"}, scale=2.0), order)
    assert mesh.order == order
    assert set(edge_uses(mesh)) == {1, 2}
    rel = {1: 0.2, 2: 5e-3, 3: 5e-3, 4: 1e-4, 5: 1e-4}[order]  # coarse: elements of up to 60 degrees
    assert part_areas(mesh) == pytest.approx({name: 4 * area for name, area in areas.items()}, rel=rel)
    assert capfd.readouterr().err == ""


def test_the_vertex_of_a_closed_curve_has_two_parameters(tmp_path):
    # Disk is one closed curve with one vertex: its last element must not run back round the whole circle
    mesh = mesh_section(geo(tmp_path, OPEN_CASCADE, {"pin": 7, "plate": 8}), 3)
    rim = np.hypot(*(mesh.nodes - [5, 2.5]).T)
    shared = np.intersect1d(*(np.unique(mesh.triangles[mesh.part_of == k]) for k in (0, 1)))
    assert np.abs(rim[shared] - 1).max() < 1e-12


def test_sizes_of_the_caller_replace_those_of_the_script(tmp_path):
    section = geo(tmp_path, BUILT_IN, {"pin": "in", "plate": "out"}, scale=0.1)
    own = mesh_section(section, 1)
    fine = mesh_section(section, 1, SizeField(np.zeros((1, 2)), np.array([0.05])))
    assert len(fine.triangles) > 8 * len(own.triangles)
    assert len(mesh_section(section, 1).triangles) == len(own.triangles)


@pytest.mark.parametrize(
    ("text", "regions", "message"),
    [
        (OPEN_CASCADE, {"a": "inn", "b": "out"}, r"Did you mean 'in'\?"),
        (OPEN_CASCADE, {"a": "in"}, r'1 of 2 surfaces in region "out" belong to no part'),
        ("Point(1) = {0, 0, 0};\n", {"a": None}, "has no surface"),
        ('SetFactory("OpenCASCADE");\nBox(1) = {0, 0, 0, 1, 1, 1};\n', {"a": None}, "has volumes"),
        ('SetFactory("OpenCASCADE");\nRectangle(1) = {0, 0, 0, 1, 1};\nRotate {{1, 0, 0}, {0, 0, 0}, 1} { Surface{1}; }\n',
         {"a": None}, "must lie in a plane of constant third coordinate"),
        (OPEN_CASCADE[:-1], {"a": "in", "b": "out"}, r"must end with a line break \(got Mesh.MeshSizeMax = 1;\)"),
        ("", {"a": None}, r"must end with a line break \(got an empty file\)"),
    ],
)  # fmt: skip
def test_scripts_that_do_not_fit(tmp_path, text, regions, message):
    with pytest.raises(InputError, match=message):
        mesh_section(geo(tmp_path, text, regions), 2)


def test_a_wrong_script_gives_gmshs_own_words(tmp_path, capfd):
    with pytest.raises(MeshingError, match=r"gmsh failed: .*part.geo', line 1.*syntax error"):
        mesh_section(geo(tmp_path, "Point(1) = {0, 0;\n", {"a": None}), 2)
    assert capfd.readouterr() == ("", "")


def test_a_missing_script_is_told(tmp_path):
    with pytest.raises(InputError, match=r"nowhere.geo cannot be read: No such file"):
        mesh_section(file_section(tmp_path / "nowhere.geo", {"a": None}), 2)


@pytest.mark.parametrize(
    "garbage", [b"\x00\x01\x02\n", bytes(range(256)) * 20 + b"\n", b"<?xml version='1.0'?>\n" * 40, b"\n<a>\n\n>>\n<\n"]
)
def test_file_given_up_does_not_spoil_the_next(tmp_path, garbage):
    """gmsh keeps what is left of a file it gave up and would find fault with the next one for it."""
    path = tmp_path / "part.geo"
    path.write_bytes(garbage)
    with pytest.raises(MeshingError, match="gmsh failed"):
        mesh_section(file_section(path, {"pin": "in", "plate": "out"}), 2)
    mesh = mesh_section(geo(tmp_path, BUILT_IN, {"pin": "in", "plate": "out"}), 2)
    assert set(mesh.part_names) == {"pin", "plate"}
