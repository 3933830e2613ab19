"""Wall thickness by rays: exact on plates and tubes, large at pointed corners, each loop either way round."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.meshing.sections import circle, ellipse, polygon, rectangle
from xsec_fem.meshing.wall_thickness import wall_samples
from xsec_fem.model.outline import polygon_loop


@pytest.mark.parametrize("reverse", [False, True])
def test_a_rectangle_is_as_thick_as_its_other_side(reverse):
    outer = rectangle(0, 0, 40, 3).outer
    walls = wall_samples(outer.reversed() if reverse else outer, [], 1.0)
    short = (walls.points[:, 0] == 0) | (walls.points[:, 0] == 40)
    assert walls.thickness == pytest.approx(np.where(short, 40, 3), rel=1e-12)
    assert short.sum() == 6
    assert (~short).sum() == 80
    assert np.isinf(walls.radius).all()


@pytest.mark.parametrize("reverse", [False, True])
def test_a_tube_is_as_thick_as_its_wall(reverse):
    hole = circle(46.0, start=0.5)
    walls = wall_samples(circle(50.0), [hole.reversed() if reverse else hole], 5.0)
    # chords of 7.5 degrees: the sagitta is 0.2 % of the radius, 0.1 mm on either side
    assert walls.thickness == pytest.approx(4.0, abs=0.2)
    assert set(np.round(walls.radius, 9)) == {46.0, 50.0}


def test_a_disc_is_as_thick_as_its_diameter():
    assert wall_samples(circle(5.0), [], 1.0).thickness == pytest.approx(10.0, rel=1e-2)


def test_a_pointed_corner_is_not_a_thin_wall():
    triangle = polygon_loop([(0, 0), (10, 0), (5, 5 * math.sqrt(3))])
    walls = wall_samples(triangle, [], 0.2)
    # distance s from the tip: the ray is s tan 60 long and meets the other side at 60 degrees: s tan 60 / cos² 60
    tip = np.hypot(*walls.points.T).argmin()
    s = np.hypot(*walls.points[tip])
    assert walls.thickness[tip] == pytest.approx(4 * math.sqrt(3) * s, rel=1e-9)


def test_the_smallest_radius_of_an_ellipse_counts():
    walls = wall_samples(ellipse(4.0, 2.0), [], 1.0)
    assert walls.radius == pytest.approx(2.0**2 / 4.0, rel=1e-12)
    assert wall_samples(ellipse(2.0, 4.0), [], 1.0).radius == pytest.approx(2.0**2 / 4.0, rel=1e-12)


def test_lip_of_a_channel_is_seen():
    face = polygon([(0, 0), (50, 0), (50, 12), (48, 12), (48, 2), (2, 2), (2, 80), (0, 80)])
    walls = wall_samples(face.outer, [], 2.0)
    assert walls.thickness.min() == pytest.approx(2.0, rel=1e-12)
    lip = (walls.points[:, 0] > 49) & (walls.points[:, 1] > 3) & (walls.points[:, 1] < 12)
    assert walls.thickness[lip] == pytest.approx(2.0, rel=1e-12)


@settings(deadline=None, max_examples=20)
@given(angle=st.floats(0, 6.3), scale=st.floats(1e-4, 1e6))
def test_thickness_does_not_depend_on_place_and_turns_with_scale(angle, scale):
    c, s = scale * math.cos(angle), scale * math.sin(angle)
    corners = [(0, 0), (7, 0), (7, 2), (0, 2)]
    walls = wall_samples(polygon_loop([(c * y - s * z, s * y + c * z) for y, z in corners]), [], scale)
    assert sorted(np.unique(np.round(walls.thickness / scale, 9))) == [2.0, 7.0]
