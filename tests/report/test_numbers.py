"""Numbers as text."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xsec_fem.report.numbers import number, point


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.0, "0"), (-0.0, "0"), (1.0, "1"), (18000.0, "18000"), (0.97647198, "0.97647"), (-1079.18, "-1079.2"),
        (197528.6, "197529"), (2713199000.0, "2.7132e9"), (1e6, "1e6"), (0.00012345678, "1.2346e-4"), (0.1, "0.1"),
        (123456.7, "123457"), (99999.96, "100000"), (9.99999, "10"), (math.inf, "inf"), (math.nan, "nan"),
    ],
)  # fmt: skip
def test_number(value, text):
    assert number(value) == text


@pytest.mark.parametrize(("value", "text"), [(1e-5, "0"), (-1e-5, "0"), (1e-3, "0.001"), (2.0, "2")])
def test_noise_beside_a_scale_is_zero(value, text):
    assert number(value, scale=100.0) == text


@given(st.floats(1e-12, 1e15), st.booleans(), st.integers(2, 8))
def test_a_number_reads_back_to_its_digits(value, negative, digits):
    value = -value if negative else value
    # half a unit of the last digit shown, relative to a leading digit of 1
    assert float(number(value, digits)) == pytest.approx(value, rel=0.51 * 10.0 ** (1 - digits))


@given(st.floats(-1e9, 1e9))
def test_zero_has_no_sign(value):
    assert number(value) not in ("-0", "-0.0")


def test_point():
    assert point(70.00000001, 1e-9, 100.0) == "(70, 0)"
