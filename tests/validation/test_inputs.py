"""Section files made from Python values, and numbers read from results."""

from __future__ import annotations

import tomllib

import pytest

from validation.reading import bounds, constant, from_centroid, shear_coefficient, shear_coefficient_bounds, stress
from validation.section_text import section_text, shear, toml, twist
from xsec_fem.model.reader import parse_section
from xsec_fem.pipeline import solve
from xsec_fem.results import Result

ANGLE = section_text(
    'an "angle"',
    [{"shape": "polygon", "points": [[0, 0], [8, 0], [8, 1], [1, 1], [1, 10], [0, 10]]}],
    nu=0.3,
    actions=[shear(Vz=1.0), twist()],
)


@pytest.fixture(scope="module")
def angle() -> Result:
    return solve(parse_section(ANGLE))


@pytest.mark.parametrize("value", [True, 3, 1e-12, 0.1, 'a "b" \\ c', [1.0, [2, 3]], {"a": 1, "b": [True]}])
def test_values_come_back(value: object) -> None:
    assert tomllib.loads(f"x = {toml(value)}")["x"] == value


def test_value_that_is_none() -> None:
    with pytest.raises(TypeError, match="cannot be written in a section file: None"):
        toml(None)


def test_section_text() -> None:
    tables = tomllib.loads(ANGLE)
    assert tables["title"] == 'an "angle"'
    assert tables["materials"] == {"m": {"E": 2.0, "nu": 0.3}}
    assert tables["parts"][0]["name"] == "part 1"
    assert tables["actions"][0] == {"name": "V", "Vy": 0.0, "Vz": 1.0, "load_point": "shear centre"}
    assert "solve" not in tables


def test_several_materials_and_settings() -> None:
    text = section_text("two", [{}, {"material": "b"}], materials={"a": {"E": 1}, "b": {"E": 2}}, solve={"order": 3})
    tables = tomllib.loads(text)
    assert [part["material"] for part in tables["parts"]] == ["a", "b"]
    assert tables["solve"] == {"order": 3}


def test_constants(angle: Result) -> None:
    assert constant("IT", 2.0)(angle) == 2 * angle.properties.IT
    assert shear_coefficient("Asz")(angle) == angle.properties.Asz / angle.properties.A
    assert from_centroid("ysc")(angle) == angle.properties.ysc - angle.properties.yc
    low, high = bounds("IT", -1.0)(angle)
    assert low <= -angle.properties.IT <= high
    low, high = shear_coefficient_bounds("Asy")(angle)
    assert low <= shear_coefficient("Asy")(angle) <= high


def test_names_that_are_not_there() -> None:
    with pytest.raises(AttributeError, match="no such property: 'J'"):
        constant("J")
    with pytest.raises(AttributeError, match="no guaranteed interval of 'A'"):
        bounds("A")


def test_stress_is_that_of_the_load_case(angle: Result) -> None:
    [value] = angle.at(0.5, 5.0, angle.section.actions[0])
    assert stress(0.5, 5.0, "tau_xz", Vz=1.0, scale=3.0)(angle) == pytest.approx(3 * value.tau_xz)


def test_trefftz_load_differs_by_a_torque(angle: Result) -> None:
    properties = angle.properties
    arm = properties.ysc_trefftz - properties.ysc
    expected = stress(0.5, 5.0, "tau_xz", Vz=1.0)(angle) + arm * stress(0.5, 5.0, "tau_xz", T=1.0)(angle)
    assert stress(0.5, 5.0, "tau_xz", Vz=1.0, trefftz=True)(angle) == pytest.approx(expected, rel=1e-9)


def test_point_of_no_part(angle: Result) -> None:
    with pytest.raises(ValueError, match=r"0 values at \(0.5, 5.0\), part 'b': one is wanted"):
        stress(0.5, 5.0, "tau_xz", part="b", Vz=1.0)(angle)


def test_result_without_bounds() -> None:
    bare = solve(parse_section(ANGLE), certificate=False)
    with pytest.raises(ValueError, match=r'an "angle": solved without bounds'):
        bounds("IT")(bare)
