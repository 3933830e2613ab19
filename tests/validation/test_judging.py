"""When a case holds and when it is missed; what is told of it."""

from __future__ import annotations

import math

import pytest

from tests.validation.samples import SQUARE, sample
from validation.case import Source, Tolerance, failed, judge
from xsec_fem.model.reader import parse_section
from xsec_fem.pipeline import solve
from xsec_fem.results import Result

IT = 0.140577014955


@pytest.fixture(scope="module")
def square() -> Result:
    return solve(parse_section(SQUARE))


def test_case_that_holds(square: Result) -> None:
    record = judge(sample(), square)
    assert record.ok
    assert record.message == ""
    assert record.difference == pytest.approx(abs(square.properties.IT - IT))
    assert record.allowed == pytest.approx(1e-5 * IT)
    assert record.strict
    assert record.inside_strict
    assert record.source == "A. Author, A Book, 1999, table 1"


def test_difference_above_the_tolerance(square: Result) -> None:
    record = judge(sample(reference=IT * 1.001, interval=None), square)
    assert not record.ok
    assert record.message.startswith("differs by 0.000141, allowed are 1.41e-06")


def test_reference_outside_the_guaranteed_interval(square: Result) -> None:
    """Within a wide tolerance, but proved wrong."""
    record = judge(sample(reference=IT * 1.001, tolerance=Tolerance(0.1, "wide")), square)
    assert not record.ok
    assert "lies outside the guaranteed interval" in record.message
    assert not record.inside_strict


def test_rounded_reference_beside_the_interval(square: Result) -> None:
    assert judge(sample(reference=0.1406, tolerance=Tolerance(1e-3, "four digits"), reference_error=4e-4), square).ok


def test_interval_that_is_not_strict_is_shown_only() -> None:
    circle = 'title = "c"\nunits = "N mm"\n[materials.m]\nE = 1\nnu = 0\n[[parts]]\nname = "a"\nmaterial = "m"\n'
    result = solve(parse_section(circle + 'shape = "circle"\ndiameter = 2\n'))
    record = judge(sample(reference=math.pi / 2 * 1.0000001), result)
    assert record.ok
    assert record.interval is not None
    assert not record.strict


def test_not_a_number_is_a_miss(square: Result) -> None:
    record = judge(sample(extract=lambda result: math.nan, interval=None), square)
    assert not record.ok


def test_reference_from_a_function(square: Result) -> None:
    assert judge(sample(reference=lambda: IT), square).reference == IT


def test_case_that_failed() -> None:
    record = failed(sample(), "no mesh")
    assert not record.ok
    assert record.ours is None
    assert record.difference is None
    assert record.message == "no mesh"


@pytest.mark.parametrize("value", [0.0, -1e-6, math.nan, math.inf])
def test_tolerance_that_is_none(value: float) -> None:
    with pytest.raises(ValueError, match=f"finite number > 0 .got {value}"):
        Tolerance(value, "reason")


def test_tolerance_without_a_reason() -> None:
    with pytest.raises(ValueError, match=r"needs a reason \(got '  '\)"):
        Tolerance(1e-3, "  ")


def test_absolute_tolerance() -> None:
    assert Tolerance(1e-3, "rounded", relative=False).allowed(500.0) == 1e-3
    assert Tolerance(1e-3, "rounded").allowed(-500.0) == 0.5


def test_source_leaves_out_what_it_has_not() -> None:
    assert str(Source("A", "B", "", "p. 3")) == "A, B, p. 3"
