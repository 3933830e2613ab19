"""Section files to start from: commented, valid, one per shape, and one built up of two glued parts."""

from __future__ import annotations

import json

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.starter_examples import EXAMPLES, STARTER_NUMBERS, Entry, Value
from xsec_fem.model.wording import did_you_mean, value_text
from xsec_fem.units import UNIT_SYSTEMS

BUILT_UP = "built-up"
_REMARKS_AT = 30  # column where remarks line up behind short lines


def starter_text(shape: str, units: str = "N mm") -> str:
    """Return a commented section file for a shape word, or for "built-up": two boards with a glue joint.

    `units` is one of the four unit systems. Raises InputError for an unknown word, with the nearest known one.
    """
    if shape not in EXAMPLES and shape != BUILT_UP:
        remedy = did_you_mean(shape, [*EXAMPLES, BUILT_UP])
        raise InputError([Fault("", "shape", "is not a known starter", value_text(shape), remedy)])
    if units not in UNIT_SYSTEMS:
        remedy = did_you_mean(units, UNIT_SYSTEMS)
        raise InputError([Fault("", "units", "is not a known unit system", value_text(units), remedy)])
    numbers = STARTER_NUMBERS[units]
    body = _built_up(numbers) if shape == BUILT_UP else _single(shape, numbers)
    return "\n".join([*_head(shape, units), *body, *_tail(numbers), ""])


def _head(shape: str, units: str) -> list[str]:
    system = UNIT_SYSTEMS[units]
    return [
        "# A section file: `xsec-fem sketch FILE` checks and draws it, `xsec-fem solve FILE` solves it.",
        "# y is to the right, z is up; a line behind # is left out.",
        _line("title", f"My {shape.replace('_', ' ')}", "a name for the report"),
        _line(
            "units",
            units,
            f"lengths in {system.length}, forces in {system.force}, stresses in {system.stress}, "
            f"moments in {system.moment}",
        ),
        "",
    ]


def _single(shape: str, numbers: dict[str, float]) -> list[str]:
    part = [
        "[[parts]]",
        _line("name", "part 1", "a name of its own"),
        _line("material", "steel", "one of the materials above"),
        _line("shape", shape, ""),
        *(_entry(entry, numbers["length"]) for entry in EXAMPLES[shape]),
    ]
    return [*_steel(numbers), *part, *([] if shape == "file" else _placement()), ""]


def _placement() -> list[str]:
    return [
        _line("at", [0, 0], "where the anchor goes [y, z]"),
        "# " + _line("anchor", "bottom left", 'optional: a corner, a side, "centre", or "origin" of the coordinates'),
        "# " + _line("rotate", 90, "optional: turn about the anchor, degrees counter-clockwise"),
        "# " + _line("mirror", "y", 'optional: "y" swaps left and right, "z" top and bottom, before the turn'),
    ]


def _built_up(numbers: dict[str, float]) -> list[str]:
    flange = (Entry("width", 200, "size along y"), Entry("height", 50, "size along z"))
    web = (Entry("width", 60, "size along y"), Entry("height", 180, "size along z"))
    return [
        "[materials.board]",
        _line("E", numbers["board_E"], "Young's modulus along the beam"),
        _line("nu", 0.35, "Poisson's ratio"),
        _line("G", numbers["board_G"], "shear modulus"),
        _line("shear_strength", numbers["board_strength"], "optional: design value, gives utilisations"),
        "",
        *_board("flange", flange, [0, 205], numbers["length"]),
        *_board("web", web, [0, 90], numbers["length"]),
        "[[joints]]",
        _line("name", "glue line", "a name of its own"),
        _line("between", ["flange", "web"], "the parts on either side; their faces touch"),
        _line("kind", "glue", ""),
        _line("strength", numbers["glue"], "optional: design shear stress"),
        "",
    ]


def _board(name: str, sizes: tuple[Entry, ...], at: list[Value], factor: float) -> list[str]:
    return [
        "[[parts]]",
        _line("name", name, "a name of its own"),
        _line("material", "board", "one of the materials above"),
        _line("shape", "rectangle", ""),
        *(_entry(entry, factor) for entry in sizes),
        _entry(Entry("at", at, "where its centre goes [y, z]"), factor),
        "",
    ]


def _steel(numbers: dict[str, float]) -> list[str]:
    return [
        "[materials.steel]",
        _line("E", numbers["steel_E"], "Young's modulus"),
        _line("nu", 0.3, "Poisson's ratio; the shear modulus is E/(2(1+nu)) unless G = ... is given"),
        _line("shear_strength", numbers["steel_strength"], "optional: design value, gives utilisations"),
        "",
    ]


def _tail(numbers: dict[str, float]) -> list[str]:
    return [
        "[[actions]]",
        _line("name", "case 1", "a name of its own"),
        _line("Vz", numbers["Vz"], "shear force along z; also N, Vy, T, My, Mz"),
        _line("load_point", "shear centre", 'where it acts: "shear centre", "centroid" or a point [y, z]'),
        "",
        "[solve]",
        _line("accuracy", 0.01, "optional: relative energy error to reach"),
        "# " + _line("order", 4, "optional: polynomial degree of the triangles, 1 to 5"),
    ]


def _entry(entry: Entry, factor: float) -> str:
    value = _scaled(entry.value, factor) if entry.length else entry.value
    return ("# " if entry.optional else "") + _line(entry.key, value, entry.remark)


def _scaled(value: Value, factor: float) -> Value:
    if isinstance(value, list):
        return [_scaled(item, factor) for item in value]
    if isinstance(value, dict):
        return {key: _scaled(item, factor) for key, item in value.items()}
    return value * factor if isinstance(value, int | float) else value


def _line(key: str, value: Value, remark: str) -> str:
    text = f"{key} = {_toml(value)}"
    return f"{text:<{_REMARKS_AT}}# {remark}" if len(text) < _REMARKS_AT and remark else _long(text, remark)


def _long(text: str, remark: str) -> str:
    return f"{text}  # {remark}" if remark else text


def _toml(value: Value) -> str:
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        return json.dumps(value)
    if isinstance(value, list):
        return "[" + ", ".join(_toml(item) for item in value) + "]"
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{key} = {_toml(item)}" for key, item in value.items()) + " }"
    return f"{value:.9g}"
