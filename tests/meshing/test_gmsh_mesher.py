"""Meshes of drawn sections: conforming, whole, on the exact curves, with the parts kept, the same every time."""

from __future__ import annotations

import math
import subprocess
import sys

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.meshing.sections import (
    boundary_length,
    circle,
    edge_uses,
    ellipse,
    i_section,
    part_areas,
    polygon,
    rectangle,
    section,
    smallest_angle,
    triangle_areas,
)  # fmt: skip
from xsec_fem.errors import MeshingError
from xsec_fem.meshing import gmsh_mesher
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.outline import Face

I_300 = i_section(300.0, 150.0, 10.7, 7.1, 15.0)
I_300_AREA = 2 * 150 * 10.7 + (300 - 2 * 10.7) * 7.1 + (4 - math.pi) * 15**2

T_PLATES = {"flange": rectangle(-150, 0, 150, 20), "web": rectangle(-5, -300, 5, 0)}
SIDE_BY_SIDE = {"left": rectangle(0, 0, 30, 40), "right": rectangle(30, -10, 50, 60)}
ROD_IN_HOLE = {
    "plate": Face(rectangle(-50, -50, 50, 50).outer, (circle(20.0, start=0.4),)),
    "rod": Face(circle(20.0, start=-1.1)),
}
PARTLY_SHARED = {
    "one": polygon([(0, 0), (10, 0), (10, 10), (0, 10)]),
    "two": polygon([(10, 4), (20, 0), (20, 16), (10, 14)]),
}
CASES = {
    "I": ({"I": I_300}, {}),
    "T": (T_PLATES, {}),
    "side by side": (SIDE_BY_SIDE, {}),
    "rod in a hole": (ROD_IN_HOLE, {}),
    "partly shared edge": (PARTLY_SHARED, {}),
    "bar in a block": ({"block": rectangle(0, 0, 200, 300), "bar": Face(circle(10.0, (50.0, 60.0)))}, {"bar": "block"}),
    "tube in a block": (
        {"block": rectangle(-40, -40, 40, 40), "tube": Face(circle(20.0), (circle(15.0),)), "core": Face(circle(15.0))},
        {"tube": "block", "core": "block"},
    ),
    "box": ({"box": polygon([(0, 0), (120, 0), (120, 60), (0, 60)], [(3, 3), (117, 3), (117, 57), (3, 57)])}, {}),
}


@pytest.mark.parametrize("order", [1, 4])
@pytest.mark.parametrize("name", CASES)
def test_every_inner_edge_has_two_triangles_and_the_rest_is_the_outline(name, order):
    faces, embedded = CASES[name]
    mesh = mesh_section(section(faces, embedded), order)
    uses = edge_uses(mesh)
    assert set(uses) == {1, 2}
    # Euler's formula for a connected plane mesh, nodes of the elevated edges included in the edges
    corners = np.unique(mesh.triangles[:, :3])
    holes = {"box": 1}.get(name, 0)
    assert len(corners) - len(uses) + len(mesh.triangles) == 1 - holes


@pytest.mark.parametrize(
    ("name", "areas"),
    [
        ("T", {"flange": 6000.0, "web": 3000.0}),
        ("side by side", {"left": 1200.0, "right": 1400.0}),
        ("partly shared edge", {"one": 100.0, "two": 130.0}),
        ("box", {"box": 120 * 60 - 114 * 54}),
    ],
)
def test_straight_sided_parts_have_their_exact_area(name, areas):
    faces, embedded = CASES[name]
    # sums of a few hundred products of numbers known to 2e-16
    assert part_areas(mesh_section(section(faces, embedded), 3)) == pytest.approx(areas, rel=1e-12)


def test_embedded_parts_displace_their_host():
    faces, embedded = CASES["tube in a block"]
    areas = part_areas(mesh_section(section(faces, embedded), 5))
    exact = {"block": 6400 - math.pi * 400, "tube": math.pi * 175, "core": math.pi * 225}
    # order 5, 16 elements a circle: the area between an arc of 22.5 degrees and its interpolant, about 1e-12
    assert areas == pytest.approx(exact, rel=1e-9)


def test_a_chain_of_embedded_parts_goes_to_the_innermost():
    faces = {"block": rectangle(-50, -50, 50, 50), "pad": rectangle(-20, -20, 20, 20), "pin": rectangle(-5, -5, 5, 5)}
    areas = part_areas(mesh_section(section(faces, {"pad": "block", "pin": "pad"}), 2))
    assert areas == pytest.approx({"block": 8400.0, "pad": 1500.0, "pin": 100.0}, rel=1e-12)


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
@pytest.mark.parametrize(
    ("radius", "centre"), [(50.0, (0.0, 0.0)), (0.003, (0.0, 0.0)), (2e4, (0.0, 0.0)), (50.0, (9e3, -4e3))]
)
def test_boundary_nodes_lie_on_the_circle(order, radius, centre):
    mesh = mesh_section(section({"disc": Face(circle(radius, centre))}), order)
    away = np.hypot(*(mesh.nodes - centre).T)
    boundary = np.sort(away)[-_boundary_nodes(mesh) :]
    # far from the origin a coordinate itself is only known to 1e-16 of the distance
    assert np.abs(boundary / radius - 1).max() < 1e-12 + 4e-16 * math.hypot(*centre) / radius


def _boundary_nodes(mesh):
    p = mesh.order
    sides = [[0, 1, *range(3, p + 2)], [1, 2, *range(p + 2, 2 * p + 1)], [2, 0, *range(2 * p + 1, 3 * p)]]
    rows = np.vstack([mesh.triangles[:, side] for side in sides])
    _, first, used = np.unique(np.sort(rows, axis=1), axis=0, return_index=True, return_counts=True)
    return len(np.unique(rows[first[used == 1]]))


@pytest.mark.parametrize(("order", "share"), [(1, 4.0), (2, 16.0), (3, 16.0), (4, 64.0), (5, 64.0)])
def test_area_of_a_disc_converges_with_the_order_of_the_geometry(order, share):
    def error(size: float) -> float:
        sizes = SizeField(np.zeros((1, 2)), np.array([size]))
        return abs(triangle_areas(mesh_section(section({"d": Face(circle(1.0))}), order, sizes)).sum() / math.pi - 1)

    # halving the size divides the area's error by 2^(p+1), one power more for even p; half of that is asked for,
    # because the meshes are not nested
    assert error(0.4) > 0.5 * share * error(0.2)


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_ellipse_nodes_and_area(order):
    mesh = mesh_section(section({"ellipse": Face(ellipse(20.0, 35.0))}), order)
    level = np.hypot(mesh.nodes[:, 0] / 20, mesh.nodes[:, 1] / 35)
    assert np.abs(np.sort(level)[-_boundary_nodes(mesh) :] - 1).max() < 1e-12
    # the worst of the orders, 2: 8 elements a quarter, chord angle 0.2: error about 0.2^4/100
    assert triangle_areas(mesh).sum() == pytest.approx(math.pi * 700, rel=2e-5)


def test_i_section_has_the_size_asked_for_and_its_exact_area():
    mesh = mesh_section(section({"I": I_300}), 4)
    assert 2500 <= len(mesh.nodes) <= 4000
    assert triangle_areas(mesh).sum() == pytest.approx(I_300_AREA, rel=1e-8)  # 4 elements of order 4 a quarter circle
    assert smallest_angle(mesh) > 20


def test_touching_curved_faces_share_their_nodes():
    mesh = mesh_section(section(ROD_IN_HOLE), 4)
    plate, rod = (np.unique(mesh.triangles[mesh.part_of == k]) for k in (0, 1))
    shared = np.intersect1d(plate, rod)
    assert len(shared) >= 4 * 16
    assert np.abs(np.hypot(*mesh.nodes[shared].T) - 20).max() < 1e-11


def test_t_junction_is_one_body_along_the_width_of_the_web():
    mesh = mesh_section(section(T_PLATES), 4)
    shared = np.intersect1d(*(np.unique(mesh.triangles[mesh.part_of == k]) for k in (0, 1)))
    assert mesh.nodes[shared, 1] == pytest.approx(0.0, abs=1e-12)
    assert (mesh.nodes[shared, 0].min(), mesh.nodes[shared, 0].max()) == (-5.0, 5.0)
    # outline of the T: 2 x 300 + 2 x 20 + 2 x 300 - 10 + 10 (web end) - 10 (under the flange)
    assert boundary_length(mesh) == pytest.approx(2 * 300 + 2 * 20 + 2 * 300, rel=1e-12)


def test_typed_corners_come_back_digit_for_digit():
    mesh = mesh_section(section({"p": polygon([(0.1, 0.2), (70.3, 0.7), (33.3, 99.9)])}), 4)
    nodes = {tuple(node) for node in mesh.nodes.tolist()}
    assert {(0.1, 0.2), (70.3, 0.7), (33.3, 99.9)} <= nodes


@pytest.mark.parametrize("gap", [4e-7, -4e-7])
def test_gaps_and_overlaps_of_rounded_digits_are_closed(gap):
    c, s = math.cos(0.7), math.sin(0.7)

    def turned(points):
        return polygon([(c * y - s * z, s * y + c * z) for y, z in points])

    flange = turned([(-50, 0), (50, 0), (50, 10), (-50, 10)])
    web = turned([(-5, -50), (5, -50), (5, -100 * gap), (-5, -100 * gap)])
    mesh = mesh_section(section({"flange": flange, "web": web}), 2)
    assert len(np.intersect1d(*(np.unique(mesh.triangles[mesh.part_of == k]) for k in (0, 1)))) >= 3


def test_a_gap_of_a_thousandth_stays_open():
    faces = {"a": rectangle(0, 0, 10, 10), "b": rectangle(10.01, 0, 20, 10)}
    mesh = mesh_section(section(faces), 1)
    assert not len(np.intersect1d(*(np.unique(mesh.triangles[mesh.part_of == k]) for k in (0, 1))))


def test_split_points_become_nodes():
    points = [(12.3, 0.0), (3.0, 4.0)]
    mesh = mesh_section(section({"r": rectangle(0, 0, 40, 10)}), 2, split_points=points)
    assert {tuple(point) for point in mesh.nodes.tolist()} >= set(points)


SCRIPT = """
import sys, hashlib
from tests.meshing.test_gmsh_mesher import CASES, mesh_section, section
mesh = mesh_section(section(*CASES["rod in a hole"]), 4)
print(hashlib.sha256(mesh.nodes.tobytes() + mesh.triangles.tobytes() + mesh.part_of.tobytes()).hexdigest())
"""


def test_two_runs_give_the_same_bits():
    faces, embedded = CASES["rod in a hole"]
    first, second = (mesh_section(section(faces, embedded), 4) for _ in range(2))
    assert first.nodes.tobytes() == second.nodes.tobytes()
    assert first.triangles.tobytes() == second.triangles.tobytes()
    runs = [
        subprocess.run([sys.executable, "-c", SCRIPT], capture_output=True, text=True, check=True) for _ in range(2)
    ]
    assert runs[0].stdout == runs[1].stdout != ""


def test_folded_triangles_are_mended_by_a_finer_mesh(monkeypatch):
    coarse = SizeField(np.zeros((1, 2)), np.array([60.0]))
    ring = Face(circle(100.0), (circle(97.0),))
    with monkeypatch.context() as once:
        once.setattr(gmsh_mesher, "_RETRIES", 0)
        with pytest.raises(MeshingError, match="folded"):
            mesh_section(section({"ring": ring}), 4, coarse)
    mesh = mesh_section(section({"ring": ring}), 4, coarse)
    assert mesh.worst_jacobian.min() > 0
    assert triangle_areas(mesh).sum() == pytest.approx(math.pi * (100**2 - 97**2), rel=1e-3)  # elements of 30 degrees


def test_a_cusp_cannot_be_meshed_and_says_where():
    # the disc touches the side of the block from inside: between them the host has an angle of zero
    faces = {"block": rectangle(0, 0, 100, 100), "disc": Face(circle(10.0, (50.0, 10.0)))}
    with pytest.raises(MeshingError, match=r"part 'block' at \(\d+\.?\d*, [\d.e-]+\) is flat or folded"):
        mesh_section(section(faces, {"disc": "block"}), 4)


def test_two_separate_parts_are_meshed_both():
    mesh = mesh_section(section({"a": rectangle(0, 0, 1, 1), "b": rectangle(3, 0, 4, 1)}), 2)
    assert part_areas(mesh) == pytest.approx({"a": 1.0, "b": 1.0}, rel=1e-12)


def test_sizes_given_by_the_caller_are_followed():
    square = section({"s": rectangle(0, 0, 1, 1)})
    points = np.array([[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]])
    coarse = mesh_section(square, 1, SizeField(points, np.full(4, 0.2)))
    fine = mesh_section(square, 1, SizeField(points, np.full(4, 0.1)))
    graded = mesh_section(square, 1, SizeField(points, np.array([0.001, 0.3, 0.3, 0.3])))
    assert len(fine.triangles) == pytest.approx(4 * len(coarse.triangles), rel=0.3)  # equilateral: area/(0.43 h²)
    sides = np.hypot(*(graded.nodes - 0).T)
    assert np.sort(sides)[1] < 0.002


@settings(deadline=None, max_examples=15)
@given(
    width=st.floats(0.01, 1e4), ratio=st.floats(0.02, 50), angle=st.floats(0, 6.3), order=st.integers(1, 5),
    shift=st.floats(-1e4, 1e4),
)  # fmt: skip
def test_any_turned_rectangle_keeps_its_area(width, ratio, angle, order, shift):
    c, s = math.cos(angle), math.sin(angle)
    corners = [(0, 0), (width, 0), (width, width * ratio), (0, width * ratio)]
    face = polygon([(c * y - s * z + shift, s * y + c * z - shift) for y, z in corners])
    mesh = mesh_section(section({"r": face}), order)
    # a coordinate is known to 1e-16 of its distance from the origin, an area to that over the smaller side
    known = 1e-12 + 1e-14 * abs(shift) / min(width, width * ratio)
    assert triangle_areas(mesh).sum() == pytest.approx(width**2 * ratio, rel=known)
