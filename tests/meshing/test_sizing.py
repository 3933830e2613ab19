"""Size fields: checked on entry, spread over the plane with a limited growth."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from xsec_fem.errors import MeshingError
from xsec_fem.meshing.sizing import SizeField, spread_sizes

BOX = np.zeros(2), np.ones(2)


@pytest.mark.parametrize(
    ("points", "sizes", "message"),
    [
        (np.zeros((2, 2)), np.ones(3), r"points of shape \(2, 2\), but sizes of shape \(3,\)"),
        (np.zeros((0, 2)), np.zeros(0), "at least one"),
        (np.zeros((1, 3)), np.ones(1), r"points of shape \(1, 3\)"),
        (np.zeros((2, 2)), np.array([1.0, 0.0]), r"positive numbers at finite points \(smallest size 0.0\)"),
        (np.zeros((2, 2)), np.array([1.0, -2.0]), "smallest size -2.0"),
        (np.zeros((1, 2)), np.array([np.nan]), "smallest size nan"),
        (np.full((1, 2), np.inf), np.ones(1), "finite points"),
    ],
)
def test_wrong_sizes_are_refused(points, sizes, message):
    with pytest.raises(MeshingError, match=message):
        SizeField(points, sizes)


def test_points_can_be_added():
    field = SizeField(np.zeros((1, 2)), np.ones(1)).with_points(np.ones((2, 2)), np.array([2.0, 3.0]))
    assert field.points.tolist() == [[0, 0], [1, 1], [1, 1]]
    assert field.sizes.tolist() == [1, 2, 3]


def test_one_small_size_grows_with_the_distance():
    axis = np.linspace(0, 1, 21)
    grid = np.stack(np.meshgrid(axis, axis), -1).reshape(-1, 2)
    spread = spread_sizes(SizeField(grid, np.where(grid.any(axis=1), 9.0, 0.01)), *BOX, growth=0.5)
    # along the axes and the diagonal the way over the edges is the straight one
    for y, z in ((0.5, 0.0), (0.0, 1.0)):
        k = np.flatnonzero((np.abs(spread.points - [y, z]) < 1e-12).all(axis=1))[0]
        assert spread.sizes[k] == pytest.approx(0.01 + 0.5 * np.hypot(y, z), rel=1e-12)


def test_points_that_coincide_keep_the_smallest_size():
    field = SizeField(np.array([[0.5, 0.5], [0.5, 0.5], [0.2, 0.2]]), np.array([0.3, 0.1, 0.3]))
    spread = spread_sizes(field, *BOX, growth=1.0)
    assert len(spread.points) == 2 + 4
    assert spread.sizes.min() == 0.1


@pytest.mark.parametrize("points", [[[0.3, 0.3]], [[0, 0], [1, 1]], [[0, 0], [0.5, 0], [1, 0]]])
def test_one_point_or_points_in_a_row_cover_the_section(points):
    spread = spread_sizes(SizeField(np.array(points, float), np.full(len(points), 0.1)), *BOX, growth=1.0)
    assert (spread.points.min(axis=0) <= 0).all()
    assert (spread.points.max(axis=0) >= 1).all()
    assert len(spread.corners) >= 2


@settings(deadline=None, max_examples=25)
@given(
    points=arrays(float, (12, 2), elements=st.floats(0, 1, width=16)),
    sizes=arrays(float, 12, elements=st.floats(0.01, 5)),
)
def test_no_edge_grows_faster_and_no_size_is_raised(points, sizes):
    growth = 0.7
    spread = spread_sizes(SizeField(points, sizes), *BOX, growth)
    a, b = spread.corners.ravel(), np.roll(spread.corners, -1, axis=1).ravel()
    distance = np.hypot(*(spread.points[a] - spread.points[b]).T)
    assert (np.abs(spread.sizes[a] - spread.sizes[b]) <= growth * distance + 1e-12).all()
    for point, size in zip(points, sizes, strict=True):
        found = (spread.points == point).all(axis=1)
        assert spread.sizes[found] <= size
    assert spread.sizes.min() == sizes.min()
