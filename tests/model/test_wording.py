"""Values, names and units as text."""

from datetime import date, datetime, time

import pytest

from xsec_fem.model import wording
from xsec_fem.model.wording import (
    did_you_mean,
    key_text,
    named,
    point_text,
    quoted,
    text_with_unit,
    value_text,
    with_unit,
)
from xsec_fem.units import UNIT_SYSTEMS

MM = UNIT_SYSTEMS["N mm"]


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (40, "40"), (-1.5, "-1.5"), (-0.0, "0"), (2.1e11, "210000000000"), (10**400, "a number beyond 1e308"),
        (True, "true"), (False, "false"), ("a\nb", '"a\\nb"'), ("\x7f", '"\\x7f"'), ("é", '"é"'), ([1, "a", [2]], '[1, "a", [2]]'),
        ({}, "an empty table"), ({"a": 1}, "a table"), (date(2026, 12, 1), "2026-12-01"), (time(1), "01:00:00"),
        (datetime(2026, 12, 1), "2026-12-01T00:00:00"), (None, "a NoneType"), (float("nan"), "nan"),
    ],
)  # fmt: skip
def test_any_value_is_one_short_line(value, text):
    assert value_text(value) == text


def test_long_values_are_cut():
    assert value_text("x" * 500) == '"' + "x" * 54 + ' ..."'
    assert value_text(list(range(10000))).endswith(" ...]")
    assert len(quoted("y" * 100)) == 60


@pytest.mark.parametrize(
    ("value", "key", "text"),
    [
        (40, "height", "40 mm"), (40, "E", "40 MPa"), (40, "Vz", "40 N"), (40, "T", "40 N mm"), (40, "rotate", "40 deg"),
        (40, "nu", "40"), ("40", "height", '"40"'), ([1, 2], "at", "[1, 2] mm"), ([1, "a"], "at", '[1, "a"]'),
        (True, "height", "true"), ([], "points", "[]"),
    ],
)  # fmt: skip
def test_numbers_get_the_unit_of_their_key(value, key, text):
    assert with_unit(value, key, MM) == text


def test_without_units_only_degrees_are_known():
    assert with_unit(40, "height", None) == "40"
    assert with_unit(40, "rotate", None) == "40 deg"
    assert wording.unit_of("E", UNIT_SYSTEMS["kip in"]) == "ksi"


@pytest.mark.parametrize(
    ("text", "path", "shown"),
    [("12", "steps[2].to", "12 mm"), ("(1, -2.5)", "points[1]", "(1, -2.5) mm"), ("2 points", "points", "2 points"),
     (None, "at", None), ("0.5", "taper", "0.5")],
)  # fmt: skip
def test_values_that_are_text_get_units_too(text, path, shown):
    assert text_with_unit(text, path, MM) == shown


@pytest.mark.parametrize(
    ("word", "answer"),
    [
        ("hieght", 'Did you mean "height"?'),
        ("HEIGHT", 'Did you mean "height"?'),
        ("left top", 'Did you mean "top left"?'),
        ("colour", 'Known: "height", "width", "top left".'),
        (3, 'Known: "height", "width", "top left".'),
        ("x" * 10000, 'Known: "height", "width", "top left".'),
    ],
)
def test_did_you_mean(word, answer):
    assert did_you_mean(word, ["height", "width", "top left"]) == answer
    assert did_you_mean(word, []) == ""


def test_names_keys_and_points():
    assert named("parts[1]", "board 2") == 'parts[1] "board 2"'
    assert named("parts[1]", " ") == named("parts[1]", 5) == "parts[1]"
    assert key_text("root_radius-2") == "root_radius-2"
    assert key_text("root radius") == '"root radius"'
    assert key_text("") == '""'
    assert point_text((1e-12, -99.99999999), 100) == "(0, -100)"
    assert point_text((1.23456789e-3, 2e-12), 1e-2) == "(0.00123457, 0)"
