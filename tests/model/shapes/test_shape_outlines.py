"""What holds for the outline of every shape: chained, simple, tangent where rounded, of the stated size."""

import math
import re

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shape_examples import EXAMPLES, IDS
from shapely.geometry import Polygon

from xsec_fem.model.outline import Arc, EllipseArc, Isometry, Line
from xsec_fem.model.shapes import SHAPES

SIZED = {"i_shape", "tee", "channel", "angle", "zed", "box"}
# elsewhere arcs may meet lines at an angle: by intent, or where a toe uses up the whole tip
SMOOTH = [
    (word, numbers)
    for word, numbers in EXAMPLES
    if word not in {"outline", "sector"} and numbers.get("toe_radius") != numbers.get("thickness", 0)
]
QUICK = settings(deadline=None, max_examples=60)


def shape_of(word, numbers):
    return SHAPES[word].model_validate(numbers)


def region(face, max_deg=3.0):
    return Polygon(face.outer.polyline(max_deg), [hole.polyline(max_deg) for hole in face.holes])


def check_loops(face):
    """Chained bit by bit, no empty segment, arcs of at most 180 deg and true to their centre, simple, holes inside."""
    for loop in face.loops:
        for here, following in zip(loop.segments, (*loop.segments[1:], loop.segments[0]), strict=True):
            assert here.end == following.start
            assert here.start != here.end
            if isinstance(here, Arc):
                assert abs(here.sweep) <= math.pi
                # a side may be overfilled by 1e-9 of its length before a radius is refused
                assert math.dist(here.end, here.centre) == pytest.approx(here.radius, rel=1e-7)
    assert region(face).is_valid
    assert face.area > 0


@pytest.mark.parametrize(("word", "numbers"), EXAMPLES, ids=IDS)
def test_loops_are_sound(word, numbers):
    check_loops(shape_of(word, numbers).face())


@pytest.mark.parametrize(("word", "numbers"), SMOOTH)
def test_arcs_and_lines_meet_smoothly_in_rounded_shapes(word, numbers):
    for loop in shape_of(word, numbers).face().loops:
        for here, following in zip(loop.segments, (*loop.segments[1:], loop.segments[0]), strict=True):
            if isinstance(here, Line) and isinstance(following, Line):
                continue
            a, b = (s.at(np.array([t]))[1][0] for s, t in ((here, 1.0), (following, 0.0)))
            sine = (a[0] * b[1] - a[1] * b[0]) / (math.hypot(*a) * math.hypot(*b))
            # a coordinate near 100 is good to 1e-14, seen from an arc of radius 1 or more: 1e-14 rad, times a few
            assert abs(sine) < 1e-12
            assert a @ b > 0


@pytest.mark.parametrize(("word", "numbers"), [example for example in EXAMPLES if example[0] in SIZED])
def test_bounds_are_depth_and_width(word, numbers):
    width = max(numbers["width"], numbers.get("bottom_width", 0))
    y0, z0, y1, z1 = shape_of(word, numbers).face().bounds()
    assert (y1 - y0, z1 - z0) == (width, numbers["depth"])
    if word != "angle":
        assert (y0, z0) == (-width / 2, -numbers["depth"] / 2)


def test_default_anchors():
    origin = {word for word, spec in SHAPES.items() if spec.default_anchor == "origin"}
    assert origin == {"polygon", "outline", "strip", "plate", "sector", "file"}
    assert {spec.default_anchor for word, spec in SHAPES.items() if word not in origin} == {"centre"}


def test_circles_are_four_quarters():
    for word, numbers in (("circle", {"diameter": 12}), ("ellipse", {"width": 50, "height": 30})):
        segments = shape_of(word, numbers).face().outer.segments
        assert len(segments) == 4
        assert {type(s) for s in segments} == {Arc if word == "circle" else EllipseArc}


def test_half_disc_has_one_straight_side():
    segments = shape_of("sector", {"radius": 50, "from_deg": 90, "to_deg": 270}).face().outer.segments
    assert [type(s) for s in segments] == [Arc, Arc, Line]


def test_lips_and_flanges_point_the_right_way():
    zed = region(shape_of("zed", {"depth": 200, "width": 140, "web": 2, "flange": 2.5, "lip": 20}).face())
    assert zed.contains(Polygon([(60, 98), (65, 98), (65, 99)]))  # top flange right
    assert not zed.intersects(Polygon([(-60, 98), (-65, 98), (-65, 99)]))
    assert zed.contains(Polygon([(68, 81), (69, 81), (69, 82)]))  # its lip hangs down
    channel = region(shape_of("channel", {"depth": 200, "width": 75, "web": 3, "flange": 2, "lip": 25}).face())
    assert channel.contains(Polygon([(-37, 0), (-35, 0), (-35, 1)]))  # web left
    assert channel.contains(Polygon([(36, 76), (37, 76), (37, 77)]))
    tee = region(shape_of("tee", {"depth": 120, "width": 80, "web": 8, "flange": 10}).face())
    assert tee.contains(Polygon([(-39, 51), (39, 51), (39, 59)]))  # flange on top


# --- random numbers -------------------------------------------------------------------------------------------------

SIZE = st.floats(1, 1000)
SHARE = st.floats(0.02, 0.98)
RADII = st.floats(0.01, 200)


def check_random(word, numbers):
    """Either the numbers are refused, or the outline is sound; a limit in a remedy, typed back, is accepted."""
    numbers = {key: value for key, value in numbers.items() if value is not None}
    problems = shape_of(word, numbers).problems()
    if not problems:
        face = shape_of(word, numbers).face()
        check_loops(face)
        if word in SIZED:
            y0, z0, y1, z1 = face.bounds()
            assert (y1 - y0, z1 - z0) == pytest.approx((numbers["width"], numbers["depth"]), rel=1e-12)
        return face
    for problem in problems:
        limit = re.fullmatch(r"Give ([\d.e+-]+) or less\.", problem.remedy)
        if limit and problem.key in numbers and float(limit[1]) > 0:
            mended = shape_of(word, numbers | {problem.key: float(limit[1])}).problems()
            assert all(left.key != problem.key or left.rule != problem.rule for left in mended)
    return None


OPTIONAL = st.none() | RADII


@given(SIZE, SIZE, SHARE, st.floats(0.02, 0.45), OPTIONAL, OPTIONAL, st.none() | st.floats(0, 0.3))
@QUICK
def test_random_i_tee_channel(depth, width, web, flange, root, toe, taper):
    numbers = {"depth": depth, "width": width, "web": web * width, "flange": flange * depth}
    options = {"root_radius": root, "toe_radius": toe, "taper": taper}
    for word in ("i_shape", "tee", "channel"):
        assert check_random(word, numbers) is not None
        check_random(word, numbers | options)


@given(SIZE, SIZE, st.floats(0.02, 0.4), st.floats(0.02, 0.4), st.floats(0.05, 0.6), OPTIONAL)
@QUICK
def test_random_lips(depth, width, web, flange, lip, root):
    thin = min(depth, width)
    numbers = {"depth": depth, "width": width, "web": web * thin, "flange": flange * thin}
    for word in ("channel", "zed"):
        check_random(word, numbers | {"lip": lip * depth, "root_radius": root})


@given(SIZE, SIZE, SHARE, OPTIONAL, OPTIONAL)
@QUICK
def test_random_angle(depth, width, thickness, root, toe):
    numbers = {"depth": depth, "width": width, "thickness": thickness * min(depth, width)}
    assert check_random("angle", numbers) is not None
    check_random("angle", numbers | {"root_radius": root, "toe_radius": toe})


@given(SIZE, SIZE, st.floats(0.02, 0.4), st.floats(0.02, 0.4), OPTIONAL, OPTIONAL, st.integers(1, 4))
@QUICK
def test_random_box(depth, width, web, flange, outer, inner, cells):
    numbers = {"depth": depth, "width": width, "web": web * width, "flange": flange * depth}
    check_random("box", numbers | {"outer_radius": outer, "inner_radius": inner, "cells": cells})


@given(SIZE, st.floats(-400, 400), st.floats(0.5, 360), st.none() | SHARE)
@QUICK
def test_random_sector(radius, begin, opening, thickness):
    wall = None if thickness is None else thickness * radius
    face = check_random("sector", {"radius": radius, "from_deg": begin, "to_deg": begin + opening, "thickness": wall})
    assert face is not None or opening >= 360 - 1e-9


COORDINATE = st.integers(-100, 100).map(float)  # whole numbers, so that "on a side" means the same to both sides
POINTS = st.lists(st.tuples(COORDINATE, COORDINATE), min_size=3, max_size=7, unique=True)


@given(POINTS, OPTIONAL)
@QUICK
def test_random_polygon_is_refused_exactly_when_it_is_not_simple(points, radius):
    sharp = shape_of("polygon", {"points": points})
    assert bool(sharp.problems()) is not Polygon(points).is_valid
    check_random("polygon", {"points": points, "radius": radius})


@given(POINTS, st.floats(0.1, 8), st.none() | st.floats(0, 20), st.booleans())
@QUICK
def test_random_strip(points, thickness, bend, closed):
    face = check_random("strip", {"points": points, "thickness": thickness, "bend_radius": bend, "closed": closed})
    if face is not None:
        assert len(face.holes) == int(closed)


@given(SIZE, SIZE, SHARE, st.floats(0, 360), st.tuples(COORDINATE, COORDINATE))
@QUICK
def test_bounds_follow_any_rotation(width, height, share, degrees, shift):
    face = shape_of("rectangle", {"width": width, "height": height, "corner_radius": share * min(width, height) / 2})
    moved = face.face().moved(Isometry.rotation(degrees).then(Isometry.translation(shift)))
    y0, z0, y1, z1 = moved.bounds()
    r = share * min(width, height) / 2
    c, s = abs(math.cos(math.radians(degrees))), abs(math.sin(math.radians(degrees)))
    # a rounded rectangle is a smaller one with a disc of radius r rolled round it
    expected = ((width - 2 * r) * c + (height - 2 * r) * s + 2 * r, (width - 2 * r) * s + (height - 2 * r) * c + 2 * r)
    assert (y1 - y0, z1 - z0) == pytest.approx(expected, rel=1e-11)


def test_examples_cover_every_shape_with_a_face():
    assert {word for word, _ in EXAMPLES} == set(SHAPES) - {"file"}
