"""Joints as slits of the mesh: what comes apart, what stays, and that files keep both."""

import numpy as np
import pytest

from tests.model.test_joint_faults import FLANGE, WEB, joint, rows, weld
from tests.model.two_boards import part, section_of
from xsec_fem.errors import InputError, MeshingError
from xsec_fem.fem.edges import connected_bodies, edges_between, mesh_edges
from xsec_fem.fem.slits import facing_edges
from xsec_fem.meshing.file_mesh import read_regions
from xsec_fem.meshing.front import make_mesh
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.mesh_files import write_mesh_file
from xsec_fem.meshing.slit_joints import joint_vertices, open_joints
from xsec_fem.pipeline import solve
from xsec_fem.recovery.corners import find_corners

LOWER, UPPER = (
    part("lower", "rectangle width=100 height=20"),
    part("upper", "rectangle width=100 height=20", "at=[0, 20]"),
)
POST = part("post", "rectangle width=10 height=40", "at=[-55, 10]")


def lengths(mesh, pairs):
    edges = mesh_edges(mesh)
    ends = mesh.nodes[edges.corners[pairs[:, 0]]]
    return np.hypot(*(ends[:, 1] - ends[:, 0]).T)


def corners_of(mesh):
    return find_corners(mesh, mesh_edges(mesh), np.tile(np.eye(2), (len(mesh.part_names), 1, 1)))


def test_contact_comes_apart_all_along():
    section = section_of(LOWER, UPPER, POST, joint("contact", between='["lower", "upper"]'))
    mesh = make_mesh(section)
    edges = mesh_edges(mesh)
    pairs = facing_edges(mesh, edges)
    assert lengths(mesh, pairs).sum() == pytest.approx(100, rel=1e-12)
    assert not len(edges_between(mesh, edges, ("lower",), ("upper",)))
    # one end opens to the free side, the other stays single where the post holds both
    at = lambda y, z: int(np.isclose(mesh.nodes, [y, z], atol=1e-9).all(axis=1).sum())  # noqa: E731
    assert (at(50, 10), at(-50, 10)) == (2, 1)
    assert connected_bodies(mesh, edges).max() == 0


def test_slit_end_in_the_solid_has_the_exponent_of_a_crack():
    """A corner of w = 360 degrees: stress ~ r^(pi/w - 1) = r^-1/2 (method of M. L. Williams, J. Appl. Mech. 19, 1952)."""
    section = section_of(LOWER, UPPER, POST, joint("contact", between='["lower", "upper"]'))
    (corner,) = corners_of(make_mesh(section))
    assert (corner.y, corner.z) == pytest.approx((-50, 10))
    assert corner.angle_deg == pytest.approx(360)
    assert corner.exponent == pytest.approx(-0.5, abs=1e-12)


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_weld_is_a_slit_between_beads(order):
    section = section_of(FLANGE, WEB, weld("throat = 4"), f"[solve]\norder = {order}")
    mesh = make_mesh(section)
    edges = mesh_edges(mesh)
    assert mesh.part_names == ("flange", "web", "j bead 1", "j bead 2")
    assert lengths(mesh, facing_edges(mesh, edges)).sum() == pytest.approx(10, rel=1e-9)
    assert not len(edges_between(mesh, edges, ("flange",), ("web",)))
    tips = [corner for corner in corners_of(mesh) if corner.angle_deg > 359]
    assert sorted((corner.y, corner.z) for corner in tips) == [pytest.approx((-5, 100)), pytest.approx((5, 100))]
    # read within the bead: a tenth of the leg, from root to toe
    assert [corner.distance for corner in tips] == pytest.approx(2 * [0.4 * np.sqrt(2)], rel=1e-6)


def test_penetration_and_strips_stay_bonded():
    section = section_of(FLANGE, WEB, weld("throat = 4", "penetration = 1.5"))
    mesh = make_mesh(section)
    edges = mesh_edges(mesh)
    bonded = edges_between(mesh, edges, ("flange",), ("web",))
    middle = mesh.nodes[edges.corners[bonded]].mean(axis=1)
    assert ((np.abs(middle[:, 0]) > 3.5) & (np.abs(middle[:, 0]) < 5)).all()
    assert lengths(mesh, facing_edges(mesh, edges)).sum() == pytest.approx(7, rel=1e-9)
    two = section_of(LOWER, UPPER, rows("rows=[-30, 20]", "diameter=12", "capacity=1", between='["lower", "upper"]'))
    mesh = make_mesh(two)
    assert lengths(mesh, facing_edges(mesh, mesh_edges(mesh))).sum() == pytest.approx(100 - 24, rel=1e-9)
    assert len(corners_of(mesh)) == 4


def test_a_strip_to_the_end_leaves_no_slit_there():
    section = section_of(LOWER, UPPER, rows("rows=[-40]", "diameter=20", "capacity=1", between='["lower", "upper"]'))
    mesh = make_mesh(section)
    pairs = facing_edges(mesh, mesh_edges(mesh))
    assert lengths(mesh, pairs).sum() == pytest.approx(80, rel=1e-9)
    assert len(corners_of(mesh)) == 1


@pytest.mark.parametrize("ending", ["msh", "vtu"])
def test_files_keep_slits_and_beads(tmp_path, ending):
    section = section_of(FLANGE, WEB, weld("throat = 4", "penetration = 1"), "[solve]\norder = 3")
    mesh = make_mesh(section)
    path = tmp_path / f"section.{ending}"
    write_mesh_file(path, mesh)
    regions = [
        part(name.replace(" ", "_"), "file", f'path = "{path.name}"', f'region = "{name}"') for name in mesh.part_names
    ]
    again = read_regions(section_of(*regions, folder=tmp_path), 3)
    assert len(again.nodes) == len(mesh.nodes)
    edges, before = mesh_edges(again), mesh_edges(mesh)
    assert len(edges.free) == len(before.free)
    assert len(facing_edges(again, edges)) == len(facing_edges(mesh, before))
    assert np.bincount(again.part_of).tolist() == np.bincount(mesh.part_of).tolist()


def test_contact_of_regions_of_a_file_is_opened_in_its_mesh(tmp_path):
    whole = make_mesh(section_of(LOWER, UPPER, POST, "[solve]\norder = 2"))
    write_mesh_file(tmp_path / "m.vtu", whole)
    regions = [part(name, "file", 'path = "m.vtu"', f'region = "{name}"') for name in whole.part_names]
    section = section_of(*regions, joint("contact", between='["lower", "upper"]'), folder=tmp_path)
    mesh = make_mesh(section)
    assert lengths(mesh, facing_edges(mesh, mesh_edges(mesh))).sum() == pytest.approx(100, rel=1e-9)


def test_opening_twice_changes_nothing():
    section = section_of(FLANGE, WEB, weld("throat = 4"))
    mesh = make_mesh(section)
    again = open_joints(section, mesh)
    assert np.array_equal(again.nodes, mesh.nodes)
    assert np.array_equal(again.triangles, mesh.triangles)


def test_a_mesh_without_nodes_at_the_strip_is_refused():
    section = section_of(LOWER, UPPER, rows("rows=[7]", "diameter=3", "capacity=1", between='["lower", "upper"]'))
    assert len(joint_vertices(section)) == 4
    coarse = mesh_section(section, 2, split_points=[])
    with pytest.raises(MeshingError, match=r"joint 'j': the mesh fills .* of the bonded strip of 3 from \("):
        open_joints(section, coarse)


def test_bodies_that_only_contact_held_are_named_with_it():
    section = section_of(LOWER, UPPER, joint("contact", between='["lower", "upper"]'))
    with pytest.raises(
        InputError,
        match=r"must form one body, but there are 2 .*: lower \| upper; held together only by .*'j' lets slide",
    ):
        solve(section, certificate=False)
