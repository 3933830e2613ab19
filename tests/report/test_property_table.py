"""The coupling of the shear flexibilities stands among the constants, with its guaranteed interval."""

import re

import pytest

from tests.pipeline.sections import HEAD, I_SHAPE, section
from xsec_fem import solve
from xsec_fem.report.blocks import plain_text
from xsec_fem.report.summary import summary

ANGLE = HEAD + 'shape = "angle"\ndepth = 150\nwidth = 90\nthickness = 10\nroot_radius = 12\n'


def row_of(text):
    lines = plain_text(summary(solve(section(text)), [])).splitlines()
    (row,) = [line for line in lines if line.split()[:1] == ["F_yz"]]
    return row


def test_coupling_of_an_angle_lies_in_its_interval():
    row = row_of(ANGLE)
    value, low, high = (float(number) for number in re.findall(r"-?\d\.\d+e[-+]?\d+", row))
    assert low <= value <= high
    assert "1/N" in row


def test_coupling_of_a_symmetric_profile_is_printed_as_zero():
    assert row_of(I_SHAPE).split()[1] == "0"


@pytest.mark.parametrize("text", [ANGLE, I_SHAPE])
def test_document_has_the_same_interval(text):
    document = solve(section(text)).to_dict()
    low, high = document["certificate"]["coupling"]
    # the FE value need not be one end here: mixed entries lie inside, but for round-off of the direct ones
    flexibility = document["properties"]["shear_flexibility"]
    slack = 1e-12 * flexibility[0][0]
    assert low - slack <= flexibility[0][1] <= high + slack
