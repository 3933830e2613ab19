import math

import numpy as np
import pytest

from xsec_fem.model.outline import Arc, Line
from xsec_fem.model.rounding import (
    Corner,
    Misfit,
    half_turned,
    mirrored,
    misfits,
    rounded_loop,
    rounded_polyline,
    tangent_factor,
)

ELL = [(0, 0), (40, 0), (40, 20), (20, 20), (20, 60), (0, 60)]


def rounded(points, radius):
    return rounded_loop([Corner(p, radius, "radius") for p in points])


@pytest.mark.parametrize(
    ("after", "factor"), [((0, 1), 1), ((-1, 0), 0), ((1, 1), 1 + math.sqrt(2)), ((-1, 1), math.sqrt(2) - 1)]
)
def test_tangent_factor_is_the_cotangent_of_half_the_angle(after, factor):
    assert tangent_factor((1, 0), (0, 0), after) == pytest.approx(factor, rel=1e-15, abs=1e-15)


def test_tangent_factor_of_a_fold_is_infinite():
    assert tangent_factor((1, 0), (0, 0), (2, 0)) == math.inf


def test_corners_convex_and_re_entrant():
    loop = rounded(ELL, 4.0)
    # five convex corners lose (1 - pi/4) r^2 each, one re-entrant corner gains it
    assert loop.area == pytest.approx(1600 - 4 * (1 - math.pi / 4) * 16, rel=1e-14)
    arcs = [segment for segment in loop.segments if isinstance(segment, Arc)]
    assert [arc.ccw for arc in arcs] == [True, True, False, True, True, True]
    assert {arc.radius for arc in arcs} == {4.0}
    assert loop.bounds() == (0, 0, 40, 60)


@pytest.mark.parametrize(
    "points", [ELL, ELL[::-1], [(0, 0), (50, 5), (20, 10), (30, 70)], [(0, 0), (50, 0), (90, 4), (3, 80)]]
)
def test_every_arc_is_tangent_to_its_sides(points):
    loop = rounded(points, 1.0)
    n = len(loop.segments)
    for k in range(n):
        here, following = loop.segments[k], loop.segments[(k + 1) % n]
        assert here.end == following.start
        a, b = (x.at(np.array([s]))[1][0] for x, s in ((here, 1.0), (following, 0.0)))
        sine = (a[0] * b[1] - a[1] * b[0]) / (math.hypot(*a) * math.hypot(*b))
        assert abs(sine) < 1e-12  # coordinates near 100 on arcs of radius 1: 100 eps over the radius, times a few
        assert a @ b > 0


def test_a_radius_that_uses_up_a_side_leaves_it_out():
    square = [(0, 0), (10, 0), (10, 10), (0, 10)]
    assert [type(s) for s in rounded(square, 5.0).segments] == [Arc] * 4
    assert rounded(square, 5.0).area == pytest.approx(25 * math.pi, rel=1e-14)
    slot = rounded([(0, 0), (30, 0), (30, 0.3), (0, 0.3)], 0.15)
    assert [type(s) for s in slot.segments] == [Line, Arc, Arc, Line, Arc, Arc]


def test_an_acute_corner_is_cut_into_arcs_of_at_most_90():
    loop = rounded([(0, 0), (100, -20), (100, 20)], 2.0)
    assert all(abs(s.sweep) <= math.pi / 2 + 1e-12 for s in loop.segments if isinstance(s, Arc))
    assert sum(isinstance(s, Arc) for s in loop.segments) == 2 + 2 * 2


def test_a_straight_corner_stays_a_point():
    segments = rounded([(0, 0), (5, 0), (10, 0), (10, 10)], 1.0).segments
    assert [s.end for s in segments[:1]] == [(5, 0)]
    assert sum(isinstance(s, Line) for s in segments) == 4
    assert sum(isinstance(s, Arc) for s in segments) == 1 + 2 + 2  # turns of 90, 135 and 135 deg


def test_open_line_keeps_its_ends():
    segments = rounded_polyline([Corner(p, 2.0) for p in [(0, 0), (10, 0), (10, 10)]])
    assert [type(s) for s in segments] == [Line, Arc, Line]
    assert segments[0].start == (0, 0)
    assert segments[-1].end == (10, 10)
    assert sum(s.length for s in segments) == pytest.approx(16 + math.pi, rel=1e-14)


def test_misfit_of_one_radius_at_both_ends():
    (found,) = misfits(
        [Corner(p, 6.0, "radius", f"side {k}") for k, p in enumerate([(0, 0), (40, 0), (40, 10), (0, 10)])]
    )
    assert found == Misfit("radius", 6.0, 5.0, "side 1")


def test_misfit_names_the_one_that_is_too_large_alone():
    corners = [Corner((0, 0)), Corner((9, 0), 3.0, "toe"), Corner((9, 9), 10.0, "root"), Corner((0, 9))]
    assert [(m.key, m.limit) for m in misfits(corners)] == [("root", 9.0)]


def test_misfit_of_two_names_the_longer_and_subtracts_the_other():
    corners = [Corner((0, 0)), Corner((9, 0), 3.0, "toe"), Corner((9, 9), 8.0, "root"), Corner((0, 9))]
    assert [(m.key, m.limit) for m in misfits(corners)] == [("root", 6.0)]
    turned = [Corner((0, 0)), Corner((9, 0), 8.0, "toe"), Corner((9, 9), 3.0, "root"), Corner((0, 9))]
    assert [(m.key, m.limit) for m in misfits(turned)] == [("toe", 6.0)]


def test_halves_make_whole_outlines_with_their_sides_named():
    right = [Corner((2, -1), edge="right"), Corner((2, 1), edge="top")]
    whole = mirrored(right, "y")
    assert [c.point for c in whole] == [(2, -1), (2, 1), (-2, 1), (-2, -1)]
    assert [c.edge for c in whole][:3] == ["right", "top", "right"]
    assert [c.point for c in half_turned(right)] == [(2, -1), (2, 1), (-2, 1), (-2, -1)]


@pytest.mark.parametrize("height", [1 / 3, 0.1, 0.7])
def test_a_side_used_up_next_to_a_sharp_corner_ends_in_it_exactly(height):
    for shift in (0.0, 2 / 3, -1.0):  # so that corner and tangent point differ in their last digits
        points = [(0, shift), (9, shift), (9, shift + height), (0, shift + height)]
        corners = [Corner(p, height if k == 1 else 0.0, "toe") for k, p in enumerate(points)]
        for turned in (corners, corners[2:] + corners[:2], corners[::-1]):
            loop = rounded_loop(turned)
            assert [type(s) for s in loop.segments].count(Arc) == 1
            assert len(loop.segments) == 4
            assert (9, shift + height) in {s.start for s in loop.segments}
            assert abs(loop.area) == pytest.approx(9 * height - (1 - math.pi / 4) * height**2, rel=1e-13)


def test_a_radius_at_round_off_is_a_sharp_corner():
    assert all(isinstance(s, Line) for s in rounded(ELL, 1e-15).segments)
