"""Numbers that look like a slip."""

import pytest

from tests.model.two_boards import MATERIAL, part
from xsec_fem.model.reader import parse_section

BAR = part("bar", "rectangle width=60 height=80")


def cautions(units: str, E: float, extra: str = "", bar: str = BAR) -> dict[str, str]:
    text = (
        MATERIAL.replace("N mm", units)
        .replace("E = 210000", f"E = {E!r}")
        .replace("nu = 0.3\n", f"nu = 0.3\n{extra}\n")
    )
    return dict(parse_section(text + bar, "a.toml").cautions)


METRES = part("bar", "rectangle width=0.06 height=0.08")


@pytest.mark.parametrize(
    ("units", "E", "extra", "bar", "message"),
    [
        ("N mm", 210, "", BAR, "E = 210 MPa: GPa?"),
        ("N mm", 70, "", BAR, "E = 70 MPa: GPa?"),
        ("N mm", 70, "G = 25", BAR, None),  # a foam: E and G are independent
        ("N mm", 2.1e11, "", BAR, "E = 210000000000 MPa: Pa?"),
        ("N mm", 2.1e8, "", BAR, "E = 210000000 MPa: kPa?"),
        ("N mm", 0.5, "G = 0.2", BAR, "E = 0.5 MPa: is that so?"),
        ("N mm", 1.0, "", BAR, None),
        ("N mm", 1.2e6, "", BAR, None),
        ("N mm", 210000, "", BAR, None),
        ("kN m", 210e6, "", METRES, None),
        ("kN m", 210000, "", METRES, "E = 210000 kPa: MPa?"),
        ("kN m", 210, "", METRES, "E = 210 kPa: GPa?"),
        ("lbf in", 30e6, "", BAR, None),
        ("lbf in", 30000, "", BAR, "E = 30000 psi: ksi?"),
        ("kip in", 30000, "", BAR, None),
        ("kip in", 30e6, "", BAR, "E = 30000000 ksi: psi?"),
    ],
)
def test_a_modulus_in_another_unit(units, E, extra, bar, message):
    said = cautions(units, E, extra, bar).get("modulus")
    assert said == (None if message is None else f"materials.steel: {message}")


@pytest.mark.parametrize(
    ("units", "E", "bar", "message"),
    [
        ("N mm", 11600, BAR, 'G of "steel" is E/(2(1+nu)) = 4462 MPa; softwood is near 650. Give G.'),
        ("kN m", 11.6e6, METRES, 'G of "steel" is E/(2(1+nu)) = 4.462e+06 kPa; softwood is near 650000. Give G.'),
        ("lbf in", 1.7e6, BAR, 'G of "steel" is E/(2(1+nu)) = 6.538e+05 psi; softwood is near 94000. Give G.'),
        ("N mm", 4999, BAR, None),
        ("N mm", 20001, BAR, None),
    ],
)
def test_timber_needs_a_shear_modulus_of_its_own(units, E, bar, message):
    assert cautions(units, E, bar=bar).get("shear modulus") == message
    assert "shear modulus" not in cautions(units, E, "G = 1000", bar)


@pytest.mark.parametrize(
    ("units", "size", "message"),
    [
        ("N mm", (0.36, 0.30), "The section is 0.36 x 0.3 in mm: metres?"),
        ("N mm", (1, 0.2), None),
        ("N mm", (49000, 10), None),
        ("N mm", (51000, 10), "The section is 5.1e+04 x 10 in mm: metres?"),
        ("kN m", (300, 150), "The section is 300 x 150 in m: millimetres?"),
        ("kN m", (0.3, 0.15), None),
        ("lbf in", (0.03, 0.03), "The section is 0.03 x 0.03 in in: metres or millimetres?"),
        ("kip in", (12, 8), None),
    ],
)
def test_the_section_s_size(units, size, message):
    bar = part("bar", f"rectangle width={size[0]} height={size[1]}")
    E = {"N mm": 210000, "kN m": 210e6, "lbf in": 30e6, "kip in": 30000}[units]
    assert cautions(units, E, bar=bar).get("size") == message


def test_a_caution_is_said_once():
    text = MATERIAL + BAR + "[[cuts]]\nfrom = [0, 0]\nto = [1, 0]\n"
    section = parse_section(text, "a.toml")
    assert len(section.cautions) == len(set(section.cautions))
