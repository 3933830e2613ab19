"""Corners without limit: what they are, what is read beside them under each case, and what a radius does."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from xsec_fem.report.blocks import plain_text
from xsec_fem.report.corner_blocks import corner_blocks, corner_readings, intensity_unit, rounded_blocks
from xsec_fem.report.numbers import number
from xsec_fem.units import UNIT_SYSTEMS


def test_angle_and_exponent(solved):
    text = plain_text(corner_blocks(solved("sharp")))
    # 270 deg: exponent pi/(3 pi/2) - 1 = -1/3 (M. L. Williams, 1952); a tenth of the wall of 1
    assert re.search(r"^  \(1, 1\) +270 +-0\.333 +0\.1  angle$", text, re.MULTILINE)
    assert corner_blocks(solved("profile")) == []


def test_stress_at_the_stated_distance_and_intensity_with_its_unit(solved):
    result = solved("sharp")
    (reading,) = result.cases[0].corners
    text = plain_text(corner_readings(result, result.cases[0]))
    assert "|tau| there [MPa]" in text
    assert text.splitlines()[-1] == f"  (1, 1)                              0.1  {number(reading.tau):>17}  " + (
        f"{number(reading.intensity, 4) + ' MPa mm^0.333':>25}"
    )
    # |tau| = K r^(-1/3) within a few percent at a tenth of the wall: the smooth rest is of order (r/t)^(4/3) = 5 %
    assert reading.tau == pytest.approx(reading.intensity * 0.1 ** (-1 / 3), rel=0.15)


def test_readings_that_are_not_to_be_had_are_dashes(solved):
    result = solved("sharp")
    case = result.cases[0]
    blank = replace(case, corners=(replace(case.corners[0], tau=None, intensity=None),))
    assert plain_text(corner_readings(result, blank)).splitlines()[-1].split()[-2:] == ["-", "-"]
    assert corner_readings(result, replace(case, corners=())) == []


@pytest.mark.parametrize(
    ("system", "exponent", "unit"), [("N mm", -1 / 3, "MPa mm^0.333"), ("kip in", -0.5, "ksi in^0.500")]
)
def test_the_unit_of_the_intensity(system, exponent, unit):
    assert intensity_unit(exponent, UNIT_SYSTEMS[system]) == unit


def test_a_tried_radius_is_set_beside_the_sharp_corner(solved):
    result = solved("sharp")
    sharp, smooth = result.cases[0].tau_max, result.rounded.cases[0].tau_max
    text = plain_text(corner_blocks(result))
    assert "Tried: a root radius of 0.2 mm at every sharp corner" in text
    assert f"down and twisted: with a root radius of 0.2 mm: largest |tau| {number(smooth.value)} MPa at " in text
    assert f"instead of {number(sharp.value)} MPa with sharp corners, read 0.1 mm beside a corner" in text
    assert rounded_blocks(solved("boards")) == []
