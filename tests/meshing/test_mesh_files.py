"""Mesh files: what is written reads back the same, and every broken file gets a plain message."""

from __future__ import annotations

import builtins
import sys

import meshio
import numpy as np
import pytest

from tests.meshing.sections import circle, file_section, part_areas, polygon, rectangle, section
from xsec_fem.errors import InputError, MeshingError, MissingLibraryError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.file_mesh import read_regions
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.mesh_files import read_mesh_file, write_mesh_file
from xsec_fem.model.outline import Face

ORDERS = [1, 2, 3, 4, 5]
TWO_PARTS = section(
    {"block": rectangle(-30, -20, 30, 40), "bar \u00e9 <1>": Face(circle(10.0, (1.0, 2.0)))},
    {"bar \u00e9 <1>": "block"},
)
NODES = np.array([[0.0, 0.0, 0.0], [4.0, 0.0, 0.0], [4.0, 2.0, 0.0], [0.0, 2.0, 0.0]])
TRIANGLES = np.array([[0, 1, 2], [0, 2, 3]])


def sorted_triangles(mesh: Mesh):
    """Nodes of every triangle and its part, in an order that does not depend on numbers."""
    nodes = mesh.nodes[mesh.triangles]
    centre = np.round(nodes.mean(axis=1), 9)
    order = np.lexsort((centre[:, 1], centre[:, 0]))
    return nodes[order], mesh.part_of[order]


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("ending", [".msh", ".vtu", ".MSH"])
def test_round_trip(tmp_path, order, ending):
    mesh = mesh_section(TWO_PARTS, order)
    path = tmp_path / f"mesh{ending}"
    write_mesh_file(path, mesh)
    back = read_regions(file_section(path, {name: name for name in mesh.part_names}), order)
    assert (back.order, back.part_names, len(back.nodes)) == (order, mesh.part_names, len(mesh.nodes))
    (nodes, parts), (again, parts_again) = sorted_triangles(mesh), sorted_triangles(back)
    assert np.abs(nodes - again).max() < 1e-12 * 60  # 16 digits of numbers up to 60
    assert (parts == parts_again).all()
    shared = np.intersect1d(*(np.unique(back.triangles[back.part_of == k]) for k in (0, 1)))
    assert len(shared) >= 16 * order


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("ending", [".msh", ".vtu"])
def test_other_readers_find_the_same_triangles(tmp_path, order, ending):
    mesh = mesh_section(TWO_PARTS, order)
    path = tmp_path / f"mesh{ending}"
    write_mesh_file(path, mesh)
    raw = meshio.read(path)
    count = sum(len(block.data) for block in raw.cells)
    assert count == len(mesh.triangles)
    assert raw.cells[0].data.shape[1] == mesh.triangles.shape[1]
    assert np.abs(raw.points[:, :2] - mesh.nodes).max() < 1e-12 * 60
    if ending == ".vtu":
        assert (np.concatenate(raw.cell_data["region"]) == mesh.part_of).all()
        assert (np.concatenate(raw.cell_data["part block"]) == (mesh.part_of == 0)).all()


@pytest.mark.parametrize(("version", "binary"), [(2.2, 0), (2.2, 1), (4.0, 0), (4.1, 0), (4.1, 1)])
@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_files_of_gmsh_in_any_version(tmp_path, version, binary, order):
    path = tmp_path / "g.msh"
    _gmsh_disc(path, version, binary, order)
    mesh = read_regions(file_section(path, {"inner": "in", "outer": 12}, scale=10.0))
    assert mesh.order == (order if order > 1 else 4)
    # gmsh's own elevation, 0.4 wide elements on radius 1 and 2; order 1 loses 2 % of the area
    rel = {1: 3e-2, 2: 1e-4, 3: 1e-4, 4: 1e-6, 5: 1e-6}[order]
    assert part_areas(mesh) == pytest.approx({"inner": 100 * np.pi, "outer": 300 * np.pi}, rel=rel)
    assert len(np.unique(mesh.triangles)) == len(mesh.nodes)


def _gmsh_disc(path, version, binary, order, parametric=0, groups=True):
    from xsec_fem.meshing.gmsh_session import gmsh_session

    with gmsh_session() as gmsh:
        occ = gmsh.model.occ
        occ.fragment([(2, occ.addDisk(0, 0, 0, 2, 2))], [(2, occ.addDisk(0, 0, 0, 1, 1))])
        occ.synchronize()
        inner = min(gmsh.model.getEntities(2), key=lambda face: occ.getMass(*face))
        outer = next(face for face in gmsh.model.getEntities(2) if face != inner)
        if groups:
            gmsh.model.addPhysicalGroup(2, [inner[1]], 11, "in")
            gmsh.model.addPhysicalGroup(2, [outer[1]], 12)
            gmsh.model.addPhysicalGroup(1, [gmsh.model.getEntities(1)[0][1]], 11, "rim")
        gmsh.option.setNumber("Mesh.MeshSizeMax", 0.4)
        gmsh.model.mesh.generate(2)
        gmsh.model.mesh.setOrder(order)
        for key, value in {"MshFileVersion": version, "Binary": binary, "SaveParametric": parametric}.items():
            gmsh.option.setNumber(f"Mesh.{key}", value)
        gmsh.option.setNumber("Mesh.SaveAll", not groups)
        gmsh.write(str(path))
        gmsh.option.setNumber("Mesh.SaveAll", 0)


def test_parametric_nodes_that_meshio_refuses_are_read_by_gmsh(tmp_path):
    path = tmp_path / "g.msh"
    _gmsh_disc(path, 4.1, 0, 3, parametric=1)
    mesh = read_regions(file_section(path, {"inner": "in", "outer": 12}))
    assert part_areas(mesh) == pytest.approx({"inner": np.pi, "outer": 3 * np.pi}, rel=1e-4)


def test_a_file_without_groups_is_one_part(tmp_path):
    path = tmp_path / "g.msh"
    _gmsh_disc(path, 4.1, 0, 2, groups=False)
    assert part_areas(read_regions(file_section(path, {"all": None}))) == pytest.approx({"all": 4 * np.pi}, rel=1e-4)


@pytest.mark.parametrize(
    ("given", "own", "expected"), [(None, 1, 4), (None, 2, 2), (None, 5, 5), (3, 1, 3), (1, 2, 1), (2, 4, 2)]
)
def test_the_order_is_the_given_one_else_the_files_else_four(tmp_path, given, own, expected):
    path = tmp_path / "m.vtu"
    write_mesh_file(path, mesh_section(TWO_PARTS, own))
    wishes = {name: name for name in ("block", "bar \u00e9 <1>")}
    mesh = read_regions(file_section(path, wishes, order=given), given)
    assert mesh.order == expected
    assert mesh.source == f"m.vtu, order {own}" + (f" taken to {expected}" if expected != own else "")


def test_curved_sides_stay_curved_when_the_order_rises(tmp_path):
    path = tmp_path / "m.msh"
    drawn = mesh_section(TWO_PARTS, 2)
    write_mesh_file(path, drawn)
    wishes = {name: name for name in drawn.part_names}
    assert part_areas(read_regions(file_section(path, wishes), 5)) == pytest.approx(part_areas(drawn), rel=1e-12)


def written(path, cells, nodes=NODES, **more):
    meshio.Mesh(nodes, cells, **more).write(path, file_format="vtu")
    return path


def test_orphan_nodes_are_dropped_and_clockwise_triangles_turned(tmp_path):
    nodes = np.vstack([[[9.0, 9.0, 0.0]], NODES])
    path = written(tmp_path / "m.vtu", [("triangle", (TRIANGLES + 1)[:, ::-1])], nodes)
    mesh = read_regions(file_section(path, {"p": None}), 1)
    assert len(mesh.nodes) == 4
    assert part_areas(mesh) == pytest.approx({"p": 8.0}, rel=1e-14)


@pytest.mark.parametrize("kind", [np.int32, np.uint8, np.float64])
def test_regions_of_a_vtu_by_number(tmp_path, kind):
    data = {"region": [np.array([4, 0], kind)]}
    path = written(tmp_path / "m.vtu", [("triangle", TRIANGLES)], cell_data=data)
    assert part_areas(read_regions(file_section(path, {"a": 4, "b": 0}))) == pytest.approx(
        {"a": 4.0, "b": 4.0}, rel=1e-12
    )


def test_regions_of_a_vtu_by_name(tmp_path):
    data = {"part web": [np.array([1, 0])], "part top flange": [np.array([0, 1])], "tau": [np.array([0.3, 0.4])]}
    path = written(tmp_path / "m.vtu", [("triangle", TRIANGLES)], cell_data=data)
    mesh = read_regions(file_section(path, {"f": "top flange", "w": "web"}))
    assert mesh.part_of.tolist() == [1, 0]


def test_a_region_that_is_no_whole_number_is_refused(tmp_path):
    data = {"region": [np.array([1.0, 1.5])]}
    path = written(tmp_path / "m.vtu", [("triangle", TRIANGLES)], cell_data=data)
    with pytest.raises(InputError, match=r"cell array \"region\" must hold whole numbers \(got 1.5\)"):
        read_mesh_file(path)


QUAD = ("quad", np.array([[0, 1, 2, 3]]))


@pytest.mark.parametrize(
    ("cells", "message"),
    [
        ([QUAD], r"triangles of one order from 1 to 5 \(got quad with 4 nodes\)"),
        ([("triangle", TRIANGLES), QUAD], "got quad with 4 nodes, triangle with 3 nodes"),
        ([("line", np.array([[0, 1]]))], "has no triangles"),
        ([("tetra", np.array([[0, 1, 2, 3]]))], "got tetra with 4 nodes"),
        ([("triangle", np.array([[0, 1, 7]]))], r"nodes that do not exist \(got 0 to 7, 4 nodes\)"),
        ([("triangle", np.array([[0, 1, 1]]))], r"use a node twice \(got triangle 0: \[0, 1, 1\]\)"),
    ],
)
def test_cells_that_cannot_be_used(tmp_path, cells, message):
    path = written(tmp_path / "m.vtu", cells)
    with pytest.raises(InputError, match=message) as caught:
        read_mesh_file(path)
    assert str(caught.value).startswith(f"{path} ")
    assert "Write it again as a plain .msh or .vtu" in str(caught.value)


@pytest.mark.parametrize(
    ("nodes", "message"),
    [
        (NODES[:, [2, 0, 1]], r"plane of constant third coordinate \(got 0 to 2\)"),
        (np.column_stack([NODES[:, :2], [0, 0.1, 0, 0]]), r"\(got 0 to 0.1\)"),
        (np.where(NODES == 4, np.nan, NODES), "coordinates that are not numbers"),
    ],
)
def test_nodes_that_cannot_be_used(tmp_path, nodes, message):
    path = written(tmp_path / "m.vtu", [("triangle", TRIANGLES)], nodes)
    with pytest.raises(InputError, match=message):
        read_mesh_file(path)


def test_a_flat_triangle_is_named_with_its_place(tmp_path):
    nodes = NODES * [1, 0, 1]
    path = written(tmp_path / "m.vtu", [("triangle", TRIANGLES[:1])], nodes)
    with pytest.raises(MeshingError, match=r"triangle 0 of part 'p' at \(2.66667, 0\) is flat or folded"):
        read_regions(file_section(path, {"p": None}), 1)


GARBAGE = {
    "empty": b"",
    "text": b"hello, this is no mesh\n" * 3,
    "binary": bytes(range(256)) * 4,
    "cut": b"$MeshFormat\n4.1 0 8\n$EndMeshFormat\n$Nodes\n1 3 1 3\n2 1 0 3\n1\n2\n3\n0 0 0\n1 0",
    "no elements": b"$MeshFormat\n2.2 0 8\n$EndMeshFormat\n$Nodes\n1\n1 0 0 0\n$EndNodes\n",
    "wrong version": b"$MeshFormat\n9.9 0 8\n$EndMeshFormat\n",
    "xml": b'<?xml version="1.0"?><VTKFile type="PolyData"></VTKFile>',
    "half xml": b'<VTKFile type="UnstructuredGrid" version="1.0"><UnstructuredGrid><Piece',
    "no piece": b'<VTKFile type="UnstructuredGrid" version="1.0"><UnstructuredGrid/></VTKFile>',
}


@pytest.mark.parametrize("name", GARBAGE)
@pytest.mark.parametrize("ending", [".msh", ".vtu"])
def test_garbage_gets_a_plain_message_and_prints_nothing(tmp_path, capfd, name, ending):
    path = tmp_path / f"m{ending}"
    path.write_bytes(GARBAGE[name])
    with pytest.raises(InputError, match=r"(cannot be read as a mesh \(\S+|has no triangles)") as caught:
        read_mesh_file(path)
    assert "Traceback" not in str(caught.value)
    assert "\n" not in str(caught.value)
    assert capfd.readouterr() == ("", "")


def test_a_missing_file_is_told(tmp_path):
    with pytest.raises(InputError, match=r"nowhere\.vtu does not exist\. Check the path"):
        read_mesh_file(tmp_path / "nowhere.vtu")


@pytest.mark.parametrize("ending", [".obj", ".stl", ""])
def test_other_endings_are_refused(tmp_path, ending):
    with pytest.raises(InputError, match=rf"must end in .msh or .vtu \(got '{ending}'\)"):
        read_mesh_file(tmp_path / f"m{ending}")
    with pytest.raises(InputError, match=rf"mesh_file must end in .msh or .vtu \(got '{ending}'\)"):
        write_mesh_file(tmp_path / f"m{ending}", mesh_section(TWO_PARTS, 1))


@pytest.mark.parametrize("ending", [".msh", ".vtu"])
def test_a_place_that_cannot_be_written_is_told(tmp_path, ending):
    with pytest.raises(InputError, match=r"cannot be written: No such file or directory\. Choose another place"):
        write_mesh_file(tmp_path / "nowhere" / f"m{ending}", mesh_section(TWO_PARTS, 1))


def test_without_meshio_the_remedy_is_named(tmp_path, monkeypatch):
    original = builtins.__import__

    def fail(name, *args, **kwargs):
        if name == "meshio":
            raise ImportError("No module named 'meshio'")
        return original(name, *args, **kwargs)

    monkeypatch.setattr(builtins, "__import__", fail)
    monkeypatch.delitem(sys.modules, "meshio")
    with pytest.raises(
        MissingLibraryError, match=r"meshio cannot be loaded \(No module.*m.vtu needs it: run `xsec-fem doctor`"
    ):
        read_mesh_file(tmp_path / "m.vtu")


def test_a_hole_in_the_mesh_is_no_fault(tmp_path):
    face = polygon([(0, 0), (9, 0), (9, 9), (0, 9)], [(3, 3), (6, 3), (6, 6), (3, 6)])
    path = tmp_path / "m.msh"
    write_mesh_file(path, mesh_section(section({"frame": face}), 1))
    assert part_areas(read_regions(file_section(path, {"frame": "frame"}))) == pytest.approx({"frame": 72.0}, rel=1e-12)
