"""Every caution: one section that raises it, with its numbers, and one that does not."""

from __future__ import annotations

import re
from functools import lru_cache

import pytest

from xsec_fem import solve
from xsec_fem.errors import SolveError
from xsec_fem.model.reader import parse_section
from xsec_fem.results import Result

HEAD = 'title = "t"\nunits = "N mm"\n[materials.m]\nE = 210000\nnu = 0.3\n[materials.s]\nE = 210000\nnu = 0.2\n'


def part(name: str, shape: str, material: str = "m") -> str:
    return f'[[parts]]\nname = "{name}"\nmaterial = "{material}"\n' + "\n".join(shape.split("; ")) + "\n"


def acting(name: str = "case", **values: object) -> str:
    keys = "\n".join(
        f'{key} = "{value}"' if isinstance(value, str) else f"{key} = {value}" for key, value in values.items()
    )
    return f'[[actions]]\nname = "{name}"\n{keys}\n'


SQUARE = part("block", 'shape = "rectangle"; width = 100; height = 100')
WIDE = part("deck", 'shape = "rectangle"; width = 400; height = 100')
CHANNEL = part("channel", 'shape = "channel"; depth = 200; width = 80; web = 8; flange = 10; root_radius = 8')
I_SHAPE = part("profile", 'shape = "i_shape"; depth = 360; width = 300; web = 12; flange = 20; root_radius = 24')
LYING = part(
    "profile", 'shape = "i_shape"; depth = 360; width = 300; web = 12; flange = 20; root_radius = 24; rotate = 90'
)
SHARP = part("angle", 'shape = "polygon"; points = [[0, 0], [80, 0], [80, 10], [10, 10], [10, 100], [0, 100]]')
PLATE = part("plate", 'shape = "rectangle"; width = 200; height = 10; anchor = "bottom"; at = [0, 180]')
TWO = part("below", 'shape = "rectangle"; width = 100; height = 40; anchor = "top"') + part(
    "above", 'shape = "rectangle"; width = 100; height = 40; anchor = "bottom"'
)
MIXED = TWO.replace('name = "above"\nmaterial = "m"', 'name = "above"\nmaterial = "s"')
DOWN = acting(Vz=300000, load_point="shear centre")
BOLTS = (
    '[[joints]]\nname = "bolts"\nbetween = ["below", "above"]\nkind = "fasteners"\nrows = [-25, 25]\ndiameter = 10\n'
    "capacity = {capacity}\n"
)
GIRDER = part("flange", 'shape = "rectangle"; width = 100; height = 12; anchor = "bottom"; at = [0, 0]') + part(
    "web", 'shape = "polygon"; points = [[{0}, -90], [{1}, -90], [5, 0], [-5, 0]]'
)
WELD = '[[joints]]\nname = "weld"\nbetween = ["flange", "web"]\nkind = "fillet weld"\nthroat = 4\n'
COARSE = "[solve]\naccuracy = 1e-9\norder = 1\n"


@lru_cache
def solved(text: str, certificate: bool = False) -> Result:
    """Without bounds, on the first mesh: no caution but those on accuracy looks at them."""
    return solve(parse_section(HEAD + text, "test.toml"), certificate)


RAISED = {
    "load point": (
        CHANNEL + acting(Vz=1000),
        r"case: the shear force has no load_point .* torque would be .* N mm .* MPa instead of",
    ),
    "singular corner": (SHARP + DOWN, r"Corner of 270 deg at \(10, 10\): .* r\^-0\.333\. Stresses are read 1 mm away"),
    "unequal nu": (MIXED + DOWN, r"The parts have different Poisson's ratios: the in-plane stresses"),
    "Poisson effect": (WIDE + DOWN, r"Wide body: .* adds \d+ % to the shear energy of Vz"),
    "restrained warping": (I_SHAPE + acting(T=1e6), r"case: the section is twisted, .* is \d+ mm, \d\.\d times"),
    "slender wall": (
        part("panel", 'shape = "plate"; from = [0, 0]; to = [0, 700]; thickness = 10') + DOWN,
        r"panel/wall: length/thickness = 70: shear buckling is outside",
    ),
    "fastener slip": (TWO + BOLTS.format(capacity=1e6) + DOWN, r"bolts: The row is taken as rigid; slip makes"),
    "close fasteners": (
        TWO + BOLTS.format(capacity=20000) + DOWN,
        r"bolts, case: Required spacing \d\S* mm is below 4 d: other joint, more rows, or glue\.",
    ),
    "unfused root": (GIRDER.format(-5, 5) + WELD + DOWN, r"weld: between the welds the faces are not fused"),
    "fillet angle": (GIRDER.format(80, 90) + WELD + DOWN, r"weld: the fusion faces form an angle of \d+ and \d+ deg"),
    "nominal shear": (
        I_SHAPE + DOWN,
        # by hand 300e3/(360 12) = 69.4 and 300e3/(320 12) = 78.1; the peak: tests/test_demos.py
        r"case: V/\(d t\) = 69\.4 MPa, V/\(hw t\) = 78\.1 MPa, elastic peak in profile/web 77\.3 MPa: say which one",
    ),
    "sum of magnitudes": (
        I_SHAPE + acting(Vz=300000, T=5e6, load_point="shear centre"),
        r"case: largest \|tau_V\| \+ \|tau_T\| would be \d+ MPa; the true combined largest is \d+ MPa",
    ),
}  # fmt: skip

NOT_RAISED = {
    "load point": [CHANNEL + acting(Vz=1000, load_point="centroid"), SQUARE + acting(Vz=1000), CHANNEL + acting(N=1000)],
    "singular corner": [I_SHAPE + DOWN],
    "unequal nu": [TWO + DOWN, MIXED + DOWN + "[solve]\nnu_effect = false\n"],
    "Poisson effect": [SQUARE + DOWN, WIDE + acting(Vy=1000, load_point="centroid"), WIDE + DOWN + "[solve]\nnu_effect = false\n"],
    "restrained warping": [I_SHAPE + DOWN, SQUARE + acting(T=1e6)],
    "slender wall": [I_SHAPE + DOWN],
    "fastener slip": [TWO + DOWN],
    "close fasteners": [TWO + BOLTS.format(capacity=1e6) + DOWN, TWO + BOLTS.format(capacity=1e3) + acting(N=1000)],
    "unfused root": [GIRDER.format(-5, 5) + DOWN],
    "fillet angle": [GIRDER.format(-5, 5) + WELD + DOWN],
    "nominal shear": [
        I_SHAPE + PLATE + DOWN, LYING + DOWN, I_SHAPE + acting(Vy=1e5, Vz=1e4, load_point="centroid"), SQUARE + DOWN,
        I_SHAPE + acting(T=1e6),
    ],
    "sum of magnitudes": [
        I_SHAPE + DOWN, I_SHAPE + acting(T=1e6), I_SHAPE + acting(Vz=300000, T=1e3, load_point="shear centre"),
        # a ring: shear and torsion are both largest at the same place, in the same direction
        part("ring", 'shape = "ring"; diameter = 100; thickness = 4') + acting(Vz=1e4, T=5e5, load_point="centroid"),
    ],
}  # fmt: skip


@pytest.mark.parametrize("code", RAISED)
def test_raised_once_with_its_numbers(code):
    text, message = RAISED[code]
    found = [caution.message for caution in solved(text).warnings if caution.code == code]
    assert len(found) == 1
    assert re.match(message, found[0])


@pytest.mark.parametrize(("code", "text"), [(code, text) for code, texts in NOT_RAISED.items() for text in texts])
def test_not_raised(code, text):
    assert code not in {caution.code for caution in solved(text).warnings}


def test_the_accuracy_that_was_not_reached_is_said(monkeypatch):
    with monkeypatch.context() as patch:
        patch.setattr("xsec_fem.pipeline.adaptive.NODE_BUDGET", 50)
        result = solve(parse_section(HEAD + SHARP + COARSE, "test.toml"))
    (caution,) = [caution for caution in result.warnings if caution.code == "accuracy"]
    assert re.match(
        r"The guaranteed energy error is 0\.\d+, above the 1e-09 asked for: the mesh already has \d+ nodes",
        caution.message,
    )
    for text, certificate in ((SHARP, True), (SHARP + COARSE, False)):
        assert "accuracy" not in {caution.code for caution in solved(text, certificate).warnings}


def test_no_certificate_is_said_with_the_reason(monkeypatch):
    def fail(*_):
        raise SolveError("made to fail")

    with monkeypatch.context() as patch:
        patch.setattr("xsec_fem.pipeline.solution.equilibrated_stresses", fail)
        result = solve(parse_section(HEAD + SQUARE, "test.toml"))
    (caution,) = [caution for caution in result.warnings if caution.code == "no certificate"]
    assert (
        "No guaranteed bounds could be computed on this mesh, and it was not refined: made to fail." in caution.message
    )
    assert "no certificate" not in {c.code for c in solved(SQUARE + DOWN, certificate=True).warnings}


def test_cases_that_say_the_same_share_a_sentence():
    both = acting("one", Vz=300000, load_point="shear centre") + acting("two", Vz=-300000, load_point="shear centre")
    (caution,) = [c for c in solved(I_SHAPE + both).warnings if c.code == "nominal shear"]
    assert caution.message.startswith("one, two: V/(d t)")


def test_the_sum_is_that_of_the_two_fields_alone():
    text = RAISED["sum of magnitudes"][0]
    (caution,) = [c for c in solved(text).warnings if c.code == "sum of magnitudes"]
    would, true = (float(value) for value in re.findall(r"(\d+) MPa", caution.message))
    alone = [
        solved(I_SHAPE + acting(**forces)) for forces in ({"Vz": 300000, "load_point": "shear centre"}, {"T": 5e6})
    ]
    assert would == pytest.approx(
        sum(result.cases[0].tau_max.value for result in alone), rel=0.01
    )  # three digits; between nodes
    assert true == pytest.approx(solved(text).cases[0].tau_max.value, rel=0.01)
