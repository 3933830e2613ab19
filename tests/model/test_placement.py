"""Where shapes go: anchor, mirror, turn, shift; coordinates checked exactly."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.model.two_boards import part, section_of
from xsec_fem.model.arcs import circle_loop
from xsec_fem.model.outline import Arc, EllipseArc, Face, Isometry, Line, Loop, polygon_loop
from xsec_fem.model.placement import anchor_point, moved_walls, placement, turned_grain
from xsec_fem.model.section import Wall

# an L with its heel at (1, 2), 4 wide and 3 high, one thick: no symmetry that could hide a wrong sign
L_POINTS = ((1, 2), (5, 2), (5, 3), (2, 3), (2, 5), (1, 5))
L_SHAPE = Face(polygon_loop(L_POINTS))
ANCHORS = {
    "centre": (3, 3.5), "left": (1, 3.5), "right": (5, 3.5), "top": (3, 5), "bottom": (3, 2), "top left": (1, 5),
    "top right": (5, 5), "bottom left": (1, 2), "bottom right": (5, 2), "origin": (0, 0),
}  # fmt: skip


@pytest.mark.parametrize(("anchor", "point"), ANCHORS.items())
def test_an_anchor_is_a_point_of_the_bounding_box_or_the_origin(anchor, point):
    assert anchor_point(L_SHAPE, anchor) == point


@pytest.mark.parametrize(("anchor", "point"), ANCHORS.items())
@pytest.mark.parametrize("rotate", [0, 90, 180, 270, -90, 30])
@pytest.mark.parametrize("mirror", [None, "y", "z"])
def test_the_anchor_goes_to_at_whatever_the_turn(anchor, point, rotate, mirror):
    move = placement(L_SHAPE, anchor, (10, 20), rotate, mirror)
    assert move(point) == pytest.approx((10, 20), abs=1e-14)
    assert move.keeps_orientation == (mirror is None)


@pytest.mark.parametrize(
    (
        "rotate",
        "mirror",
        "corner",
    ),  # where the L's corner (5, 2), 4 right of the heel, goes when the heel is at (10, 20)
    [
        (0, None, (14, 20)),
        (90, None, (10, 24)),
        (180, None, (6, 20)),
        (-90, None, (10, 16)),
        (0, "y", (6, 20)),
        (0, "z", (14, 20)),
        (90, "y", (10, 16)),  # mirrored to the left first, then turned: turning first would give (10, 24)
        (90, "z", (10, 24)),
    ],
)
def test_mirror_comes_before_the_turn(rotate, mirror, corner):
    move = placement(L_SHAPE, "bottom left", (10, 20), rotate, mirror)
    assert move((5, 2)) == corner
    top = move((1, 5))  # 3 above the heel
    assert math.dist(top, (10, 20)) == 3


@pytest.mark.parametrize(
    ("keys", "bounds"),
    [
        ((), (-3, -2, 3, 2)),
        (("at = [10, 0]",), (7, -2, 13, 2)),
        (("at = [10, 0]", 'anchor = "left"'), (10, -2, 16, 2)),
        (('anchor = "bottom right"',), (-6, 0, 0, 4)),
        (('anchor = "bottom left"', "rotate = 90"), (-4, 0, 0, 6)),
        (('anchor = "top"', "rotate = 180", "at = [0, 5]"), (-3, 5, 3, 9)),
        (('anchor = "bottom left"', 'mirror = "y"'), (-6, 0, 0, 4)),
        (('anchor = "bottom left"', 'mirror = "z"', "rotate = -90"), (-4, -6, 0, 0)),
    ],
)
def test_a_rectangle_6_by_4_in_the_file_goes_where_it_is_put(keys, bounds):
    face = section_of(part("a", "rectangle width=6 height=4", *keys)).parts[0].face
    assert face is not None
    assert face.bounds() == bounds


def test_the_default_anchor_is_the_shape_s_own():
    angle = section_of(part("a", "rectangle width=6 height=4")).parts[0].face
    plate = section_of(part("a", "plate from=[0,0] to=[10,0] thickness=2", "at = [1, 1]")).parts[0].face
    assert angle is not None
    assert plate is not None
    assert angle.bounds() == (-3, -2, 3, 2)
    assert plate.bounds() == (1, 0, 11, 2)


def test_holes_are_placed_in_the_section_s_axes_not_in_the_part_s():
    hole = '[[parts.holes]]\nshape = "rectangle"\nwidth = 2\nheight = 1\nat = [100, 3]\nanchor = "bottom left"\n'
    section = section_of(part("a", "rectangle width=10 height=20", "at = [100, 0]", "rotate = 180") + hole)
    face = section.parts[0].face
    assert face is not None
    np.testing.assert_array_equal(face.holes[0].polyline().min(axis=0), [100, 3])
    np.testing.assert_array_equal(face.holes[0].polyline().max(axis=0), [102, 4])


def test_walls_move_with_their_part():
    plate = section_of(part("a", "plate from=[0,0] to=[10,0] thickness=2", "at = [1, 1]", "rotate = 90")).parts[0]
    assert plate.walls[0].points == ((1, 1), (1, 11))
    wall = Wall("web", ((0, 0), (1, 0)), 2, closed=True)
    assert moved_walls((wall,), Isometry.mirror("y")) == (Wall("web", ((0, 0), (-1, 0)), 2, closed=True),)


def test_the_extent_of_an_arc_reaches_beyond_its_ends():
    half_angle = math.radians(50)
    start, end = (math.sin(-half_angle), math.cos(half_angle)), (math.sin(half_angle), math.cos(half_angle))
    cap = Loop((Arc(start, end, (0, 0), ccw=False), Line(end, start)))
    assert cap.bounds() == pytest.approx((start[0], start[1], end[0], 1), abs=1e-15)
    dent = Loop((Line(start, end), Arc(end, start, (0, 2 * start[1]), ccw=False)))  # hollow below, about a centre above
    assert dent.bounds()[1] == pytest.approx(2 * start[1] - 1, abs=1e-15)
    assert circle_loop(0.3).bounds() == (-0.3, -0.3, 0.3, 0.3)


@given(turn=st.floats(0, 360), ratio=st.floats(0.05, 1))
@settings(max_examples=50, deadline=None)
def test_the_extent_of_a_turned_ellipse_is_that_of_its_formula(turn, ratio):
    """Half width sqrt(a² cos² + b² sin²) (derived here: largest y of a turned ellipse)."""
    tips = [(1.0, 0.0), (0.0, ratio), (-1.0, 0.0), (0.0, -ratio)]
    arcs = tuple(EllipseArc(tips[k], tips[(k + 1) % 4], (0, 0), (1.0, 0.0), ratio, True) for k in range(4))
    c, s = math.cos(math.radians(turn)), math.sin(math.radians(turn))
    y, z = math.hypot(c, ratio * s), math.hypot(s, ratio * c)
    # 1e-9: a tip nearer to an arc's end than 1e-9 of its size is taken as that end, far less than that away across
    assert Loop(arcs).moved(Isometry.rotation(turn)).bounds() == pytest.approx((-y, -z, y, z), abs=1e-9)


@pytest.mark.parametrize(
    ("grain", "rotate", "mirror", "turned"),
    [(30, 0, None, 30), (30, 15, None, 45), (30, 0, "y", -30), (30, 0, "z", -30), (30, 90, "y", 60), (0, 20, None, 20)],
)
def test_the_grain_turns_with_its_part(grain, rotate, mirror, turned):
    assert turned_grain(grain, rotate, mirror) == turned


@given(grain=st.floats(-180, 180), rotate=st.floats(-180, 180), mirror=st.sampled_from([None, "y", "z"]))
@settings(max_examples=50, deadline=None)
def test_the_turned_grain_is_the_direction_that_the_placement_maps_it_to(grain, rotate, mirror):
    move = placement(L_SHAPE, "centre", (0, 0), rotate, mirror)
    a, b = math.radians(grain), math.radians(turned_grain(grain, rotate, mirror))
    y, z = move.vector((math.cos(a), math.sin(a)))
    assert abs(y * math.sin(b) - z * math.cos(b)) < 1e-12  # parallel, in either sense


def test_the_file_s_grain_is_given_in_section_axes_and_dropped_for_isotropic_parts():
    orthotropic = "[materials.wood]\nE = 11600\nGxy = 650\nGxz = 60\nnu_xy = 0.4\nnu_xz = 0.3\n"
    grained = part("a", "rectangle width=6 height=4", "grain_angle = 10", "rotate = 90")
    wood = section_of(orthotropic + grained.replace('"steel"', '"wood"'))
    assert wood.parts[0].grain_angle == 100
    steel = section_of(grained)
    assert steel.parts[0].grain_angle == 0
    code, message = steel.cautions[0]
    assert code == "grain angle"
    assert message == 'parts[0] "a": grain_angle has no effect, since material "steel" is isotropic.'
