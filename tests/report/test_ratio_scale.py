"""Bands of the ratio: the verdict's limits among them, white about 1, red above, blue below, darker farther away."""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.elementary.compare import Limits
from xsec_fem.report.ratio_scale import ratio_scale


@pytest.mark.parametrize(
    ("low", "high", "limits", "levels"),
    [
        (1.0, 1.0, Limits(), [0.8, 0.95, 1.05, 1.2]),
        (0.9, 1.4, Limits(), [0.8, 0.95, 1.05, 1.2, 1.5]),
        (0.3, 2.5, Limits(), [0.2, 1 / 3, 0.5, 1 / 1.5, 0.8, 0.95, 1.05, 1.2, 1.5, 2, 3]),
        (1.0, 80.0, Limits(), [0.8, 0.95, 1.05, 1.2, 1.5, 2, 3, 5, 10]),
        (1.0, 1.4, Limits(good=0.1, care=0.45), [0.55, 0.9, 1.1, 1.45]),
        (0.9, 1.9, Limits(good=0.1, care=0.45), [0.55, 0.9, 1.1, 1.45, 2.0]),
    ],
)
def test_levels(low, high, limits, levels):
    scale = ratio_scale(low, high, limits)
    assert scale.levels == pytest.approx(levels, rel=1e-12)
    assert len(scale.colours) == len(levels) + 1


@pytest.mark.parametrize("limits", [Limits(), Limits(good=0.02, care=0.1)])
def test_colours(limits):
    scale = ratio_scale(0.15, 7.0, limits)
    colours = np.array(scale.colours)[:, :3]
    white = int(np.searchsorted(scale.levels, 1.0))
    assert colours[white].tolist() == [1.0, 1.0, 1.0]
    red, blue = colours[white + 1 :], colours[:white]
    assert (red[:, 0] > red[:, 2]).all()
    assert (blue[:, 2] > blue[:, 0]).all()
    brightness = colours @ [0.3, 0.59, 0.11]  # of the eye (ITU-R BT.601)
    assert (np.diff(brightness[white:]) < 0).all()
    assert (np.diff(brightness[: white + 1]) > 0).all()
