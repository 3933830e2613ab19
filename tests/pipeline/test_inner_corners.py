"""Corners of parts inside a section of several materials are singular too, and are not reported as stresses."""

from dataclasses import replace

import numpy as np
import pytest

from tests.pipeline.sections import section
from xsec_fem import solve
from xsec_fem.theory.corner_exponent import Sector, closed_wedge_exponent

CORED = """
title = "soft core in a matrix"
units = "N mm"
[materials.matrix]
E = 2600
nu = 0.3
[materials.core]
E = 260
nu = 0.3
[[parts]]
name = "matrix"
material = "matrix"
shape = "rectangle"
width = 3
height = 3
[[parts]]
name = "core"
material = "core"
shape = "SHAPE"
SIZE
embedded_in = "matrix"
[[actions]]
name = "shear"
Vz = 1
load_point = "centroid"
"""


def cored(shape, size):
    return section(CORED.replace("SHAPE", shape).replace("SIZE", size))


def test_corners_of_a_core_are_listed():
    result = solve(cored("rectangle", "width = 1\nheight = 1"))
    assert len(result.corners) == 4
    expected = closed_wedge_exponent(
        [Sector(0, np.pi / 2, 100 * np.eye(2)), Sector(np.pi / 2, 2 * np.pi, 1000 * np.eye(2))]
    )
    for corner in result.corners:
        assert corner.inside
        assert corner.angle_deg == pytest.approx(360)
        assert set(corner.parts) == {"matrix", "core"}
        assert corner.exponent == pytest.approx(expected - 1, abs=1e-9)
        assert (abs(corner.y), abs(corner.z)) == pytest.approx((0.5, 0.5))
    assert all(reading.intensity > 0 for reading in result.cases[0].corners)


def test_largest_stress_does_not_grow_with_the_mesh():
    read = cored("rectangle", "width = 1\nheight = 1")
    values = [
        solve(replace(read, solve=replace(read.solve, accuracy=accuracy))).cases[0].tau_max.value
        for accuracy in (0.01, 0.001, 0.0001)
    ]
    # read at a fixed distance: what is left is the error of the field, below the accuracy of a few per mille there
    assert values == pytest.approx([values[-1]] * 3, rel=0.01)


def test_round_core_has_no_corner():
    assert solve(cored("circle", "diameter = 1")).corners == ()
