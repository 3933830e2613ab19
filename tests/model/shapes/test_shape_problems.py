"""Every rule on the numbers of a shape: the key, the words and the remedy of its message."""

import math
import re

import pytest
from pydantic import ValidationError

from xsec_fem.model.shapes import SHAPES, Problem
from xsec_fem.model.shapes.base import at_most

I = {"depth": 300, "width": 150, "web": 7.1, "flange": 10.7}  # noqa: E741
TEE = {"depth": 120, "width": 80, "web": 8, "flange": 10}
CHANNEL = {"depth": 200, "width": 75, "web": 3, "flange": 2}
ANGLE = {"depth": 150, "width": 90, "thickness": 10}
BOX = {"depth": 60, "width": 120, "web": 3, "flange": 3}
SQUARE = [[0, 0], [10, 0], [10, 10], [0, 10]]
ELBOW = [[0, 0], [100, 0], [100, 60]]
SECTOR = {"radius": 50, "from_deg": 0, "to_deg": 90}


def problems_of(word, numbers):
    return SHAPES[word].model_validate(numbers).problems()


CASES = [
    ("rectangle", {"width": 140, "height": 40, "corner_radius": 21}, "corner_radius",
     "must fit on the right side: at most 20", "21", "Give 20 or less."),
    ("ring", {"diameter": 100, "thickness": 50}, "thickness", "must be less than half the diameter (50)", "50",
     'Give the thickness of the wall, or shape = "circle" for a solid bar.'),
    ("sector", SECTOR | {"to_deg": -10}, "to_deg", "must be more than from_deg (0)", "-10",
     "Angles run counter-clockwise from +y: swap the two, or add 360 to to_deg."),
    ("sector", SECTOR | {"from_deg": 10, "to_deg": 371}, "to_deg", "must be at most from_deg + 360 (370)", "371",
     "Give 370 or less."),
    ("sector", SECTOR | {"thickness": 50}, "thickness", "must be less than the radius (50)", "50",
     "Leave thickness out for a sector that reaches the centre."),
    ("sector", SECTOR | {"to_deg": 360, "thickness": 5}, "to_deg", "must leave a gap when thickness is given", "360",
     'Use shape = "ring" for a closed tube.'),
    ("polygon", {"points": SQUARE, "radius": 1, "radii": [1, 1, 1, 1]}, "radii", "must not be given beside radius", None,
     "Give either radius or radii, not both."),
    ("polygon", {"points": SQUARE, "radii": [1, 1]}, "radii", "must have one entry per point (4 points)", "2 radii",
     "Give 4 radii, 0 for a sharp corner."),
    ("polygon", {"points": [*SQUARE[:2], [10, 0], *SQUARE[2:]]}, "points[2]", "must differ from points[1]", "(10, 0)",
     "Leave one of the two out."),
    ("polygon", {"points": [*SQUARE, [0, 0]]}, "points[4]", "must not repeat the first point", "(0, 0)",
     "Leave it out: the outline closes by itself."),
    ("polygon", {"points": [[0, 0], [10, 10], [10, 0], [0, 10]]}, "points",
     "must be in order: the outline crosses itself at (5, 5)", None,
     "Give the points in order along the outline, each once."),
    ("polygon", {"points": SQUARE, "radius": 6}, "radius", "must fit on the side from (0, 0) to (10, 0): at most 5", "6",
     "Give 5 or less."),
    ("polygon", {"points": SQUARE, "radii": [4, 7, 2, 0]}, "radii[1]",
     "must fit on the side from (0, 0) to (10, 0): at most 6", "7", "Give 6 or less."),
    ("outline", {"start": [0, 0], "steps": [{"to": [10, 0]}, {"to": [10, 0]}]}, "steps[1].to",
     "must differ from where the step starts", "(10, 0)", "Leave the step out; draw a full circle as two arcs."),
    ("outline", {"start": [10, 0], "steps": [{"to": [0, 10], "centre": [0, 0], "through": [7, 7]}]}, "steps[0]",
     "must not have both centre and through", None, "Give one of the two."),
    ("outline", {"start": [10, 0], "steps": [{"to": [0, 11], "centre": [0, 0]}]}, "steps[0].centre",
     "must be equally far from both ends (distances 10 and 11)", "(0, 0)",
     "Move the centre, or give a point with `through` instead."),
    ("outline", {"start": [10, 0], "steps": [{"to": [-10, 0], "centre": [0, 0]}]}, "steps[0].centre",
     "leaves the side of a half circle open", "(0, 0)", "Give a point of the arc with `through` instead."),
    ("outline", {"start": [0, 0], "steps": [{"to": [10, 10], "through": [5, 5]}]}, "steps[0].through",
     "must not lie on the line from (0, 0) to (10, 10)", "(5, 5)", "Leave `through` out for a straight line."),
    ("outline", {"start": [0, 0], "steps": [{"to": [10, 0]}]}, "steps", "must enclose an area", None,
     "Give at least two more points, or an arc."),
    ("outline", {"start": [0, 0], "steps": [{"to": [10, 10]}, {"to": [10, 0]}, {"to": [0, 10]}]}, "steps",
     "must be in order: the outline crosses itself at (5, 5)", None,
     "Give the points in order along the outline, each once."),
    ("strip", {"points": ELBOW[:2], "thickness": 4, "closed": True}, "points",
     "must be at least 3 for a closed strip", "2 points", "Give more points, or leave closed out."),
    ("strip", {"points": [[0, 0], [0, 0], [5, 5]], "thickness": 1}, "points[1]", "must differ from points[0]", "(0, 0)",
     "Leave one of the two out."),
    ("strip", {"points": [*ELBOW, [0, 0]], "thickness": 4}, "points[3]", "must not repeat the first point", "(0, 0)",
     "Leave it out; closed = true joins the last point to the first."),
    ("strip", {"points": [[0, 0], [100, 0], [50, 0]], "thickness": 4}, "points[1]",
     "must not make the strip turn straight back", "(100, 0)",
     "Leave the point out, or shift it so that the strip has room to turn."),
    ("strip", {"points": ELBOW, "thickness": 4, "bend_radius": 60}, "bend_radius",
     "must fit on the piece from points[1] to points[2]: at most 58", "60", "Give 58 or less."),
    ("strip", {"points": [[0, 0], [100, 0], [100, 3], [0, 3]], "thickness": 4, "bend_radius": 2}, "thickness",
     "must fit on the piece from points[1] to points[2]: at most 2.99999", "4", "Give 2.99999 or less."),
    ("strip", {"points": [[0, 0], [100, 0], [100, 50], [50, 50], [50, -50]], "thickness": 4}, "points",
     "must be in order: the outline crosses itself at (48, -2)", None,
     "Give the points in order along the outline, each once."),
    ("plate", {"from": [1, 2], "to": [1, 2], "thickness": 4}, "to", "must differ from `from`", "(1, 2)",
     "Give the mid-line's other end."),
    ("i_shape", I | {"web": 150}, "web", "must be less than the width (150)", "150", "Give the thickness of the web."),
    ("i_shape", I | {"bottom_width": 7}, "web", "must be less than bottom_width (7)", "7.1",
     "Give the thickness of the web."),
    ("i_shape", I | {"flange": 150}, "flange", "must be less than half the depth (150)", "150",
     "Give the thickness of the flange, not its width."),
    ("i_shape", I | {"bottom_flange": 290}, "bottom_flange", "must be less than depth - flange (289.3)", "290",
     "Give the thickness of the flange, not its width."),
    ("i_shape", I | {"taper": 0.3}, "taper", "must leave some thickness at the flange tip: less than 0.29951", "0.3",
     "Give the slope as a ratio: 0.08 for 8 %."),
    ("i_shape", {"depth": 100, "width": 200, "web": 5, "flange": 49, "taper": 0.1}, "taper",
     "must leave some web between the flanges: less than 0.0205128", "0.1", "Give the slope as a ratio: 0.08 for 8 %."),
    ("i_shape", I | {"root_radius": 80}, "root_radius",
     "must fit on the inner face of the bottom flange: at most 71.45", "80", "Give 71.45 or less."),
    ("i_shape", I | {"toe_radius": 11}, "toe_radius", "must fit on the tip of the bottom flange: at most 10.7", "11",
     "Give 10.7 or less."),
    ("tee", TEE | {"web": 80}, "web", "must be less than the width (80)", "80", "Give the thickness of the web."),
    ("tee", TEE | {"flange": 120}, "flange", "must be less than the depth (120)", "120",
     "Give the thickness of the flange, not its width."),
    ("tee", TEE | {"root_radius": 40}, "root_radius", "must fit on the inner face of the flange: at most 36", "40",
     "Give 36 or less."),
    ("channel", CHANNEL | {"web": 75}, "web", "must be less than the width (75)", "75", "Give the thickness of the web."),
    ("channel", CHANNEL | {"web": 74, "lip": 20}, "web",
     "must be less than the width less the thickness of the lips (73)", "74", "Give the thickness of the web."),
    ("channel", CHANNEL | {"lip": 2}, "lip", "must be more than the flange's thickness (2)", "2",
     "Give its whole length from the flange's outer face, or leave lip out."),
    ("channel", CHANNEL | {"lip": 100}, "lip", "must be less than half the depth (100)", "100", "Give a shorter lip."),
    ("channel", CHANNEL | {"lip": 20, "taper": 0.01}, "taper", "must not be given beside lip", "0.01",
     "Leave it out, or draw the shape as an outline."),
    ("channel", CHANNEL | {"lip": 20, "toe_radius": 1}, "toe_radius", "must not be given beside lip", "1",
     "Leave it out, or draw the shape as an outline."),
    ("channel", CHANNEL | {"lip": 20, "root_radius": 19}, "root_radius",
     "must fit on the inner face of the lip: at most 18", "19", "Give 18 or less."),
    ("channel", CHANNEL | {"flange": 100}, "flange", "must be less than half the depth (100)", "100",
     "Give the thickness of the flange, not its width."),
    ("angle", ANGLE | {"thickness": 90}, "thickness", "must be less than the width (90)", "90",
     "Give the thickness of the legs."),
    ("angle", ANGLE | {"depth": 10}, "thickness", "must be less than the depth (10)", "10",
     "Give the thickness of the legs."),
    ("angle", ANGLE | {"root_radius": 76, "toe_radius": 5}, "root_radius",
     "must fit on the inner face of the horizontal leg: at most 75", "76", "Give 75 or less."),
    ("zed", CHANNEL | {"lip": 200}, "lip", "must be less than the depth (200)", "200", "Give a shorter lip."),
    ("zed", CHANNEL | {"web": 71, "lip": 20}, "web", "must be less than the width less the thickness of the lips (71)",
     "71", "Give the thickness of the web."),
    ("box", BOX | {"web": 40, "cells": 2}, "web", "must be less than width / 3, which is what 3 webs would fill (40)",
     "40", "Give the thickness of one web."),
    ("box", BOX | {"flange": 30}, "flange", "must be less than half the depth (30)", "30",
     "Give the thickness of the top and bottom wall."),
    ("box", BOX | {"inner_radius": 28}, "inner_radius", "must fit on the right side of the cell: at most 27", "28",
     "Give 27 or less."),
    ("box", BOX | {"outer_radius": 31}, "outer_radius", "must fit on the right side: at most 30", "31",
     "Give 30 or less."),
    ("box", BOX | {"outer_radius": 10.3}, "outer_radius",
     "must leave some wall at the corners (web 3, flange 3)", "10.3", "Usual is inner_radius + thickness."),
    ("file", {"path": "die.dwg"}, "path", "must end in one of .dxf, .geo, .msh, .vtu", "die.dwg",
     "Save the outline or the mesh in one of these."),
    ("file", {"path": "a.msh", "layer": "0"}, "layer", "must be left out unless the file is a .dxf", "0",
     "Give region instead."),
    ("file", {"path": "a.DXF", "region": 3}, "region", "must be left out when the file is a .dxf", "3",
     "Give layer instead."),
]  # fmt: skip


@pytest.mark.parametrize(
    ("word", "numbers", "key", "rule", "value", "remedy"),
    CASES,
    ids=[f"{c[0]}-{c[2]}-{k}" for k, c in enumerate(CASES)],
)
def test_message(word, numbers, key, rule, value, remedy):
    assert problems_of(word, numbers) == [Problem(key, rule, value, remedy)]


def test_arcs_that_run_into_another_side_are_refused():
    # the fillet of the re-entrant corner (50, 50) reaches over the spike whose tip stands in that corner
    points = [[0, 0], [100, 0], [100, 50], [50, 50], [50, 100], [0, 100]]
    assert problems_of("polygon", {"points": points, "radii": [0, 0, 0, 40, 0, 0]}) == []
    spike = [[0, 0], [100, 0], [100, 50], [50, 50], [50, 100], [90, 100], [56, 56], [96, 100], [96, 110], [0, 110]]
    assert problems_of("polygon", {"points": spike}) == []
    (found,) = problems_of("polygon", {"points": spike, "radii": [0, 0, 0, 40, 0, 0, 0, 0, 0, 0]})
    assert found.key == "radii"
    where = re.fullmatch(r"must be in order: the outline crosses itself at \((.+), (.+)\)", found.rule)
    # on the fillet, whose centre is (90, 90), as chords of 3 deg: up to r 3.4e-4 = 0.014 inside the arc
    assert math.dist((float(where[1]), float(where[2])), (90, 90)) == pytest.approx(40, abs=0.014)


def test_all_problems_of_a_shape_at_once():
    found = problems_of("box", BOX | {"web": 60, "flange": 30})
    assert [problem.key for problem in found] == ["web", "flange"]
    steps = [{"to": [0, 0]}, {"to": [5, 5], "through": [1, 1]}]
    found = problems_of("outline", {"start": [0, 0], "steps": steps})
    assert [problem.key for problem in found] == ["steps[0].to", "steps[1].through"]
    found = problems_of("i_shape", I | {"root_radius": 200, "toe_radius": 20})
    assert {problem.key for problem in found} == {"root_radius", "toe_radius"}


def test_a_centre_typed_with_four_digits_is_accepted():
    steps = [{"to": [10, 0]}, {"to": [7.071, 7.071], "centre": [0, 0]}]
    assert problems_of("outline", {"start": [0, 0], "steps": steps}) == []


@pytest.mark.parametrize(
    ("limit", "shown"), [(71.45, "71.45"), (20 / 3, "6.66666"), (1e-3, "0.001"), (123456.789, "123456"), (0.0, "0")]
)
def test_limits_are_rounded_down_so_that_typing_them_back_passes(limit, shown):
    assert at_most(limit) == shown


# --- types: what the schema itself refuses ---------------------------------------------------------------------------

BAD_NUMBERS = [
    (True, "float_type"),
    ("140", "float_type"),
    (None, "float_type"),
    ([140], "float_type"),
    (float("inf"), "finite_number"),
    (float("nan"), "finite_number"),
    (0, "greater_than"),
    (-40, "greater_than"),
]


@pytest.mark.parametrize(("value", "kind"), BAD_NUMBERS)
@pytest.mark.parametrize(("word", "key", "good"), [("rectangle", "height", {"width": 140}), ("i_shape", "depth", I)])
def test_numbers_are_positive_finite_numbers(word, key, good, value, kind):
    with pytest.raises(ValidationError) as caught:
        SHAPES[word].model_validate(good | {key: value})
    assert [(e["type"], e["loc"]) for e in caught.value.errors()] == [(kind, (key,))]


TYPE_FAULTS = [
    ("rectangle", {"width": 1, "height": 1, "corner_radius": -1}, "greater_than_equal", ("corner_radius",)),
    ("rectangle", {"width": 1}, "missing", ("height",)),
    ("rectangle", {"width": 1, "height": 1, "heigth": 1}, "extra_forbidden", ("heigth",)),
    ("polygon", {"points": [[0, 0], [1, 1]]}, "too_short", ("points",)),
    ("polygon", {"points": [[0, 0], [1, 1], [1]]}, "missing", ("points", 2, 1)),
    ("polygon", {"points": [[0, 0], [1, 1], [1, "2"]]}, "float_type", ("points", 2, 1)),
    ("outline", {"start": [0, 0], "steps": []}, "too_short", ("steps",)),
    ("outline", {"start": [0, 0], "steps": [{"to": [1, 1], "center": [0, 1]}]}, "extra_forbidden",
     ("steps", 0, "center")),
    ("plate", {"from": [0, 0], "thickness": 1}, "missing", ("to",)),
    ("plate", {"start": [0, 0], "to": [1, 1], "thickness": 1}, "missing", ("from",)),
    ("strip", {"points": ELBOW, "thickness": 1, "closed": 1}, "bool_type", ("closed",)),
    ("box", BOX | {"cells": 1.5}, "int_type", ("cells",)),
    ("box", BOX | {"cells": 0}, "greater_than_equal", ("cells",)),
    ("box", BOX | {"cells": True}, "int_type", ("cells",)),
    ("file", {"path": "a.msh", "scale": 0}, "greater_than", ("scale",)),
    ("file", {"path": ""}, "string_too_short", ("path",)),
]  # fmt: skip


@pytest.mark.parametrize(("word", "numbers", "kind", "place"), TYPE_FAULTS)
def test_types(word, numbers, kind, place):
    with pytest.raises(ValidationError) as caught:
        SHAPES[word].model_validate(numbers)
    assert (kind, place) in [(e["type"], e["loc"]) for e in caught.value.errors()]


def test_a_file_has_no_face_of_its_own():
    with pytest.raises(TypeError, match=r"the outline of shape 'file' is in 'a\.msh'"):
        SHAPES["file"].model_validate({"path": "a.msh", "region": "board"}).face()


def test_every_number_has_a_remedy():
    for word, spec in SHAPES.items():
        for name, info in spec.model_fields.items():
            assert info.description is not None, f"{word}.{name}"
            assert info.description.startswith("Give "), f"{word}.{name}"
            assert info.description.endswith("."), f"{word}.{name}"
