"""What the first mesh must be: elements across every wall, along arcs and at corners, and not too many nodes."""

from __future__ import annotations

import math

import numpy as np
import pytest

from tests.meshing.sections import circle, i_section, polygon, rectangle, section, smallest_angle
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.model.outline import Face

SANDWICH = {
    "face 1": rectangle(0, 0, 100, 1.5),
    "epoxy 1": rectangle(0, 1.5, 100, 1.7),
    "core": rectangle(0, 1.7, 100, 61.7),
    "epoxy 2": rectangle(0, 61.7, 100, 61.9),
    "face 2": rectangle(0, 61.9, 100, 63.4),
}
GIRDER = {
    "top": rectangle(-150, 785, 150, 805), "web": rectangle(-5, 25, 5, 785), "bottom": rectangle(-200, 0, 200, 25),
}  # fmt: skip
CELLS = polygon(
    [(0, -14), (3, -14), (3, 0), (120, 0), (120, 60), (0, 60)],
    [(3, 3), (69, 3), (69, 57), (3, 57)], [(72, 3), (117, 3), (117, 57), (72, 57)],
)  # fmt: skip
ANGLE = polygon([(0, 0), (90, 0), (90, 10), (10, 10), (10, 150), (0, 150)])
LIPPED = polygon(
    [(0, 0), (75, 0), (75, 20), (73.5, 20), (73.5, 1.5), (1.5, 1.5), (1.5, 198.5), (73.5, 198.5), (73.5, 180), (75, 180),
     (75, 200), (0, 200)],
)  # fmt: skip


@pytest.mark.parametrize(
    ("faces", "low", "high"),
    [
        ({"r": rectangle(0, 0, 10, 20)}, 400, 1000),
        ({"r": rectangle(0, 0, 40, 10)}, 400, 1000),
        ({"I": i_section(300.0, 150.0, 10.7, 7.1, 15.0)}, 2500, 4000),
        (SANDWICH, 4000, 15000),
        (GIRDER, 2500, 15000),
        ({"extrusion": CELLS}, 2500, 15000),
        ({"angle": ANGLE}, 500, 15000),
        ({"lipped": LIPPED}, 2500, 15000),
        ({"tube": Face(circle(100.0), (circle(92.0),))}, 1000, 15000),
        ({"thin tube": Face(circle(100.0), (circle(99.5),))}, 1000, 15000),
    ],
)
def test_number_of_nodes_of_the_first_mesh(faces, low, high):
    mesh = mesh_section(section(faces), 4)
    assert low <= len(mesh.nodes) <= high


def crossed(mesh, start, end, count=100):
    """How many triangles a line across a wall meets; it is tilted a little so as not to run along edges."""
    across = np.subtract(end, start)
    points = np.linspace(start, end + 0.0123 * across[::-1], count + 2)[1:-1]
    corner = mesh.nodes[mesh.triangles[:, :3]]
    side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
    to = points[:, None] - corner[None, :, 0]
    det = side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]
    l1 = (to[..., 0] * side2[:, 1] - to[..., 1] * side2[:, 0]) / det
    l2 = (side1[:, 0] * to[..., 1] - side1[:, 1] * to[..., 0]) / det
    inside = (l1 > 1e-6) & (l2 > 1e-6) & (l1 + l2 < 1 - 1e-6)
    return int(inside.any(axis=0).sum())


WALLS = [
    # face, a line across the wall at many places given by a parameter in [0, 1]
    ({"I": i_section(300.0, 150.0, 10.7, 7.1, 15.0)}, lambda t: ((-3.55, -110 + 220 * t), (3.55, -110 + 220 * t))),
    ({"I": i_section(300.0, 150.0, 10.7, 7.1, 15.0)}, lambda t: ((25 + 49 * t, 139.3), (25 + 49 * t, 150))),
    ({"lipped": LIPPED}, lambda t: ((73.5, 3 + 16 * t), (75, 3 + 16 * t))),
    ({"lipped": LIPPED}, lambda t: ((0, 5 + 190 * t), (1.5, 5 + 190 * t))),
    ({"extrusion": CELLS}, lambda t: ((0, -13 + 12 * t), (3, -13 + 12 * t))),
    ({"extrusion": CELLS}, lambda t: ((69, 5 + 50 * t), (72, 5 + 50 * t))),
]


@pytest.mark.parametrize(("faces", "line"), WALLS)
@pytest.mark.parametrize(("order", "least"), [(1, 2), (2, 2), (3, 1), (4, 1)])
def test_elements_across_a_wall(faces, line, order, least):
    mesh = mesh_section(section(faces), order)
    counts = [crossed(mesh, *line(t)) for t in np.linspace(0.01, 0.97, 11)]
    assert min(counts) >= least


@pytest.mark.parametrize(("order", "least"), [(1, 16), (2, 8), (3, 6), (4, 4), (5, 4)])
def test_elements_along_a_quarter_circle(order, least):
    mesh = mesh_section(section({"tube": Face(circle(100.0), (circle(10.0),))}), order)
    corner = np.unique(mesh.triangles[:, :3])
    on_hole = np.abs(np.hypot(*mesh.nodes[corner].T) - 10) < 1e-9
    assert on_hole.sum() >= 4 * least


def test_sharp_corners_have_small_elements_that_grow():
    mesh = mesh_section(section({"L": polygon([(0, 0), (8, 0), (8, 1), (1, 1), (1, 10), (0, 10)])}), 4)
    corner = mesh.nodes[mesh.triangles[:, :3]]
    longest = np.linalg.norm(corner - np.roll(corner, 1, axis=1), axis=2).max(axis=1)
    distance = np.hypot(*(corner.mean(axis=1) - 1).T)
    assert longest[distance.argmin()] < 2 / 32
    assert (longest < 0.1 + 2 * distance).all()  # growth 0.8 between points, twice that over an element
    assert longest.max() > 0.5
    assert smallest_angle(mesh) > 15


def test_long_triangles_only_in_layers():
    mesh = mesh_section(section(SANDWICH), 4)
    corner = mesh.nodes[mesh.triangles[:, :3]]
    longest = np.linalg.norm(corner - np.roll(corner, 1, axis=1), axis=2).max(axis=1)
    epoxy = np.isin(mesh.part_of, [1, 3])
    assert longest[epoxy].max() < 12 * 0.2  # ten times the thickness, and what the mesher adds
    assert [crossed(mesh, (y, 1.5), (y, 1.7)) for y in np.linspace(0.7, 99.2, 15)] >= [1] * 15


@pytest.mark.parametrize("scale", [1e-3, 1.0, 1e3])
def test_the_mesh_does_not_depend_on_the_unit(scale):
    def nodes(factor):
        return len(mesh_section(section({"t": polygon([(0, 0), (8 * factor, 0), (3 * factor, 5 * factor)])}), 4).nodes)

    # powers of two apart the meshes are the same; else the scaled outline differs by up to 2
    assert nodes(scale) == pytest.approx(nodes(1.0), rel=0.15)
    assert nodes(4.0) == nodes(1.0)


def test_a_short_step_between_two_parts_gets_small_elements():
    faces = {"left": rectangle(0, 0, 50, 40), "right": rectangle(50, 0.5, 100, 40.5)}
    mesh = mesh_section(section(faces), 4)
    corner = mesh.nodes[mesh.triangles[:, :3]]
    longest = np.linalg.norm(corner - np.roll(corner, 1, axis=1), axis=2).max(axis=1)
    near = np.hypot(*(corner.mean(axis=1) - [50, 0.25]).T) < 1
    assert longest[near].max() < 2.5
    assert smallest_angle(mesh) > 15


def test_a_hole_near_an_edge_sees_the_wall_between():
    face = Face(rectangle(0, 0, 100, 100).outer, (circle(10.0, (50.0, 11.0)),))
    mesh = mesh_section(section({"p": face}), 4)
    assert crossed(mesh, (50.01, 0.0), (50.01, 1.0)) >= 1
    assert mesh.worst_jacobian.min() > 0.2
    assert math.isclose(mesh.nodes[:, 1].min(), 0.0, abs_tol=1e-12)
