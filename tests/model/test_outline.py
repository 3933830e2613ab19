"""Segments, loops and faces: exact areas, lengths and bounds; isometries and reversal change nothing else."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.model.arcs import circle_loop
from xsec_fem.model.outline import Arc, EllipseArc, Face, Isometry, Line, Loop, polygon_loop

ROUND_OFF = 1e-13
MOVES = [
    Isometry.rotation(90).then(Isometry.translation((3, -7))),
    Isometry.rotation(33.3),
    Isometry.mirror("y"),
    Isometry.mirror("z").then(Isometry.rotation(-200)).then(Isometry.translation((1e3, 2e3))),
]


def half_ellipse(a=5.0, b=2.0, degrees=0.0):
    """Upper half of an ellipse, closed by its axis, turned by some degrees."""
    turn = Isometry.rotation(degrees)
    arc = EllipseArc((a, 0.0), (-a, 0.0), (0.0, 0.0), (a, 0.0), b / a, True)
    return Loop((arc, Line((-a, 0.0), (a, 0.0)))).moved(turn)


def test_areas_are_exact():
    assert polygon_loop([(0, 0), (4, 0), (4, 3)]).area == 6.0
    assert polygon_loop([(0, 0), (4, 3), (4, 0)]).area == -6.0
    assert circle_loop(3.0).area == pytest.approx(9 * math.pi, rel=ROUND_OFF)
    assert half_ellipse().area == pytest.approx(5 * math.pi, rel=ROUND_OFF)


def test_area_keeps_its_digits_far_from_the_origin():
    far = circle_loop(3.0).moved(Isometry.translation((1e6, -1e6)))
    # a coordinate of 1e6 holds 1e-10, so that a radius of 3 holds 4e-11 of itself and the area twice that
    assert far.area == pytest.approx(9 * math.pi, rel=2e-10)


def test_clockwise_arcs_cut_area_away():
    square = [Line((0, 0), (10, 0)), Line((10, 0), (10, 10)), Line((0, 10), (0, 0))]
    bite = Arc((10, 10), (0, 10), (5, 10), ccw=False)
    bulge = Arc((10, 10), (0, 10), (5, 10), ccw=True)
    for arc, sign in ((bite, -1), (bulge, 1)):
        # the arc that goes from right to left over the top counter-clockwise adds, clockwise through below it cuts
        loop = Loop((square[0], square[1], arc, square[2]))
        assert loop.area == pytest.approx(100 + sign * 12.5 * math.pi, rel=ROUND_OFF)
        assert loop.ccw


def test_lengths():
    assert polygon_loop([(0, 0), (4, 0), (4, 3)]).length == 12.0
    assert circle_loop(3.0).length == pytest.approx(6 * math.pi, rel=ROUND_OFF)
    # perimeter of the ellipse a = 5, b = 2: 23.0131125918 (Ramanujan's second formula, from memory, is good to
    # h^5 3/2^17 with h = (3/7)^2 = 0.184: 5e-9 relative)
    h = (3 / 7) ** 2
    ramanujan = math.pi * 7 * (1 + 3 * h / (10 + math.sqrt(4 - 3 * h)))
    assert half_ellipse().length - 10 == pytest.approx(ramanujan / 2, rel=1e-8)
    assert half_ellipse(2.0, 5.0).length - 4 == pytest.approx(ramanujan / 2, rel=1e-8)


@pytest.mark.parametrize("degrees", [0, 17, 45, 90, 123, 180, 271])
def test_bounds_of_a_turned_half_ellipse(degrees):
    y0, z0, y1, z1 = half_ellipse(degrees=degrees).bounds()
    fine = half_ellipse(degrees=degrees).polyline(0.01)
    # an inscribed polyline of step h misses an extreme by at most a h^2/8 = 5 (1.7e-4)^2/8 = 2e-8
    assert np.allclose([y0, z0], fine.min(axis=0), atol=3e-8)
    assert np.allclose([y1, z1], fine.max(axis=0), atol=3e-8)
    assert y0 <= fine[:, 0].min() + 1e-14
    assert y1 >= fine[:, 0].max() - 1e-14


@pytest.mark.parametrize("degrees", [0, 30, 45, 90, 211])
def test_bounds_of_a_turned_circle_do_not_turn(degrees):
    bounds = circle_loop(2.5).moved(Isometry.rotation(degrees)).bounds()
    assert np.allclose(bounds, (-2.5, -2.5, 2.5, 2.5), rtol=0, atol=1e-15 * 10)


def test_bounds_of_a_clockwise_arc_take_the_side_it_runs_on():
    over, under = (Arc((-1, 0), (1, 0), (0, 0), ccw=ccw) for ccw in (False, True))
    assert Loop((over, Line((1, 0), (-1, 0)))).bounds() == pytest.approx((-1, 0, 1, 1), abs=1e-15)
    assert Loop((under, Line((1, 0), (-1, 0)))).bounds() == pytest.approx((-1, -1, 1, 0), abs=1e-15)


def test_face_area_ignores_the_sense_of_its_loops():
    outer, hole = circle_loop(3.0), circle_loop(1.0)
    for a in (outer, outer.reversed()):
        for b in (hole, hole.reversed()):
            assert Face(a, (b,)).area == pytest.approx(8 * math.pi, rel=ROUND_OFF)
            assert Face(a, (b,)).bounds() == (-3, -3, 3, 3)


@pytest.mark.parametrize(
    "loop", [circle_loop(3.0), half_ellipse(), half_ellipse(degrees=40)], ids=["circle", "e", "e40"]
)
@pytest.mark.parametrize("move", MOVES)
def test_isometries_keep_area_up_to_sign_and_length(loop, move):
    moved = loop.moved(move)
    sign = 1 if move.keeps_orientation else -1
    assert moved.area == pytest.approx(sign * loop.area, rel=1e-11)  # shifts by 1e3 cost 3 of 15 digits, twice
    assert moved.length == pytest.approx(loop.length, rel=1e-11)


@pytest.mark.parametrize("loop", [circle_loop(3.0), half_ellipse(degrees=40), polygon_loop([(0, 0), (4, 0), (4, 3)])])
def test_reversed_twice_is_the_same_and_once_flips_the_area(loop):
    assert loop.reversed().reversed() == loop
    assert loop.reversed().area == pytest.approx(-loop.area, rel=ROUND_OFF)
    assert loop.reversed().bounds() == pytest.approx(loop.bounds(), abs=1e-14)


@given(
    begin=st.floats(0, 360),
    sweep=st.floats(1, 179),
    ccw=st.booleans(),
    ratio=st.floats(0.1, 1.0),
    turn=st.floats(0, 360),
)
@settings(deadline=None, max_examples=60)
def test_any_arc_runs_from_start_to_end_on_its_side(begin, sweep, ccw, ratio, turn):
    t0 = math.radians(begin)
    t1 = t0 + math.radians(sweep if ccw else -sweep)
    start, end = ((2 * math.cos(t), 2 * ratio * math.sin(t)) for t in (t0, t1))
    arc = EllipseArc(start, end, (0, 0), (2.0, 0.0), ratio, ccw).moved(Isometry.rotation(turn))
    points, slopes = arc.at(np.array([0.0, 0.5, 1.0]))
    assert np.allclose(points[0], arc.start, atol=1e-12)
    assert np.allclose(points[2], arc.end, atol=1e-12)
    # the tangent in the middle is parallel to the chord (a circle's property, kept by the affine map)
    chord = np.subtract(arc.end, arc.start)
    cross = slopes[1][0] * chord[1] - slopes[1][1] * chord[0]
    assert abs(cross) < 1e-11
    assert slopes[1] @ chord > 0
    polyline = arc.polyline(10.0)
    assert polyline[0] == arc.start
    assert len(polyline) == math.ceil(sweep / 10 - 1e-9) or abs(sweep / 10 - round(sweep / 10)) < 1e-9


def test_isometries_compose():
    first, second = Isometry.rotation(30).then(Isometry.translation((1, 2))), Isometry.mirror("y")
    assert first.then(second)((3, 4)) == pytest.approx(second(first((3, 4))))
    assert Isometry.rotation(-90)((1, 0)) == (0, -1)
