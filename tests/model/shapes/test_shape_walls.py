"""Named walls: inside the shape, on its middle, joined to each other, and together about as large as the shape."""

import itertools
import math

import pytest
from shape_examples import EXAMPLES, IDS
from shapely.geometry import LineString, Polygon

from xsec_fem.model.shapes import SHAPES

SOLID = {"rectangle", "circle", "ellipse", "polygon", "outline"}
NAMES = {
    "ring": {"wall"},
    "strip": {"wall"},
    "plate": {"wall"},
    "i_shape": {"web", "top flange", "bottom flange"},
    "tee": {"web", "top flange"},
    "channel": {"web", "top flange", "bottom flange"},
    "angle": {"vertical leg", "horizontal leg"},
    "zed": {"web", "top flange", "bottom flange"},
}


def walls_of(word, numbers):
    return SHAPES[word].model_validate(numbers).walls()


@pytest.mark.parametrize(("word", "numbers"), EXAMPLES, ids=IDS)
def test_names(word, numbers):
    names = {wall.name for wall in walls_of(word, numbers)}
    if word in SOLID or (word == "sector" and "thickness" not in numbers):
        assert names == set()
    elif word == "box":
        webs = {f"web {k + 1}" for k in range(numbers.get("cells", 1) + 1)}
        assert names == {"top flange", "bottom flange"} | webs
    else:
        lips = {"top lip", "bottom lip"} if "lip" in numbers else set()
        assert names == NAMES.get(word, {"wall"}) | lips


@pytest.mark.parametrize(("word", "numbers"), EXAMPLES, ids=IDS)
def test_mid_lines_run_inside_the_shape(word, numbers):
    sharp = {key: value for key, value in numbers.items() if key != "toe_radius"}  # toes may cut a mid-line's end off
    face = SHAPES[word].model_validate(sharp).face()
    # chords of 1 deg lie r 4e-5 inside their arcs: 4e-3 of the largest radius here, 100
    region = Polygon(face.outer.polyline(1.0), [hole.polyline(1.0) for hole in face.holes]).buffer(4e-3)
    for wall in walls_of(word, numbers):
        points = [*wall.points, wall.points[0]] if wall.closed else wall.points
        assert region.contains(LineString(points)), wall.name


@pytest.mark.parametrize(("word", "numbers"), [e for e in EXAMPLES if e[0] in {"strip", "plate", "ring"}])
def test_a_single_wall_has_the_area_of_its_strip(word, numbers):
    (wall,) = walls_of(word, numbers)
    points = [*wall.points, wall.points[0]] if wall.closed else wall.points
    length = sum(math.dist(a, b) for a, b in itertools.pairwise(points))
    # chords of 5 deg are 3.2e-4 short; a fold (inner radius 0) is round outside only, its mid-line bent: exact
    area = SHAPES[word].model_validate(numbers).face().area
    assert length * wall.thickness == pytest.approx(area, rel=4e-4)


def test_box_webs_stand_between_the_cells():
    walls = {
        wall.name: wall for wall in walls_of("box", {"depth": 60, "width": 120, "web": 3, "flange": 4, "cells": 2})
    }
    assert [walls[f"web {k}"].points[0] for k in (1, 2, 3)] == [(-58.5, -28), (0, -28), (58.5, -28)]
    assert walls["top flange"].points == ((-58.5, 28), (58.5, 28))
    assert {walls["web 2"].thickness, walls["top flange"].thickness} == {3, 4}


def test_lipped_channel_walls_join_on_their_mid_lines():
    numbers = {"depth": 200, "width": 75, "web": 3, "flange": 2, "lip": 25}
    walls = {wall.name: wall.points for wall in walls_of("channel", numbers)}
    assert walls["web"] == ((-36, -99), (-36, 99))
    assert walls["top flange"] == ((-36, 99), (36.5, 99))
    assert walls["top lip"] == ((36.5, 99), (36.5, 75))
    assert walls["bottom lip"] == ((36.5, -99), (36.5, -75))
