"""The mesh as drawn: flat triangles that fill the section, outlines that go round the parts."""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.fem.part_nodes import PartNodes
from xsec_fem.fem.reference_triangle import lagrange_triangle
from xsec_fem.report.drawing_mesh import drawing_mesh, small_triangles


def signed_areas(points, triangles):
    a, b, c = (points[triangles[:, k]] for k in range(3))
    return ((b - a)[:, 0] * (c - a)[:, 1] - (b - a)[:, 1] * (c - a)[:, 0]) / 2


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_small_triangles_fill_the_reference_triangle(order):
    nodes = lagrange_triangle(order).nodes
    small = small_triangles(nodes, order)
    assert len(small) == order**2
    # equal parts of the area 1/2, counter-clockwise; round-off of a few sums
    np.testing.assert_allclose(signed_areas(nodes, small), 0.5 / order**2, rtol=1e-12)


@pytest.mark.parametrize("name", ["boards", "tee"])
def test_flat_triangles_have_the_area_of_a_straight_section(solved, name):
    result = solved(name)
    drawn = drawing_mesh(result.fields.part_nodes)
    areas = signed_areas(drawn.places, drawn.triangles)
    assert (areas > 0).all()
    assert areas.sum() == pytest.approx(result.properties.A, rel=1e-12)  # straight sides: the same area


def test_outlines_are_closed_and_as_long_as_the_sides(solved):
    drawn = drawing_mesh(solved("boards").fields.part_nodes)
    assert len(drawn.loops) == 2
    for loop in drawn.loops:
        assert tuple(loop[0]) == tuple(loop[-1])
        assert np.hypot(*np.diff(loop, axis=0).T).sum() == pytest.approx(280.0, rel=1e-12)  # 2 (100 + 40)


def test_a_tube_has_an_outer_and_an_inner_outline(solved):
    drawn = drawing_mesh(solved("tube").fields.part_nodes)
    radii = sorted(float(np.hypot(*loop.T).mean()) for loop in drawn.loops)
    assert radii == pytest.approx([0.098, 0.1], rel=1e-6)  # nodes on the arcs


def test_walls_are_twice_the_area_over_the_perimeter(solved):
    drawn = drawing_mesh(solved("boards").fields.part_nodes)
    np.testing.assert_allclose(drawn.walls, 2 * 4000 / 280, rtol=1e-12)


def test_box_and_clear(solved):
    result = solved("tee")
    drawn = drawing_mesh(result.fields.part_nodes, result.away_from_corners)
    assert drawn.box == pytest.approx((-60, 0, 60, 112))
    assert not drawn.clear.all()
    assert drawing_mesh(PartNodes.of(result.mesh)).clear.all()
