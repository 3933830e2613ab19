"""Bands of a filled contour."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.report.colour_scale import colour_scale


@settings(max_examples=60, deadline=None)
@given(st.floats(-1e3, 1e3), st.floats(-1e3, 1e3))
def test_signed_bands_hold_the_values_with_zero_in_the_middle_of_one(a, b):
    low, high = min(a, b), max(a, b)
    if max(abs(low), abs(high)) < 1e-3:
        return
    scale = colour_scale(np.array([low, high]), (low, high), True, max(abs(low), abs(high)))
    assert scale.extend == "neither"
    assert scale.limits[0] == -scale.limits[1]  # white is zero
    assert not np.isclose(scale.levels, 0).any()
    assert np.isclose(scale.ticks, 0).any()
    assert 2 <= len(scale.ticks) <= 20


@settings(max_examples=60, deadline=None)
@given(st.floats(1e-6, 1e6))
def test_magnitudes_start_at_zero(high):
    scale = colour_scale(np.array([0.0, high]), (0.0, high), False, high)
    assert scale.levels[0] == 0
    assert scale.levels[-1] >= high * (1 - 1e-9)  # round-off of the step
    assert scale.levels[-1] <= 1.5 * high  # at most one step beyond, and there are four or more
    assert scale.extend == "neither"


@pytest.mark.parametrize(
    ("values", "extend"),
    [([0.0, 5.0], "neither"), ([0.0, 50.0], "max"), ([-50.0, 5.0], "min"), ([-50.0, 50.0], "both")],
)
def test_values_beyond_the_bands_extend_the_bar(values, extend):
    assert colour_scale(np.array(values), (-1.0, 5.0), True, 5.0).extend == extend


@pytest.mark.parametrize(("size", "flat"), [(0.0, True), (1e-8, True), (1e-3, False)])
def test_round_off_is_flat(size, flat):
    assert colour_scale(np.array([-size, size]), (-size, size), True, 1.0).flat == flat


def test_maps():
    values = np.array([0.0, 1.0])
    assert colour_scale(values, (0.0, 1.0), True, 1.0).colours == "RdBu_r"
    assert colour_scale(values, (0.0, 1.0), False, 1.0).colours == "cividis"
