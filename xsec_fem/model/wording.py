"""How values, units, names and places are put into words in messages about the section file."""

from __future__ import annotations

import difflib
import json
import re
from collections.abc import Iterable
from datetime import date, datetime, time

from xsec_fem.model.outline import Point
from xsec_fem.units import UnitSystem

_LENGTHS = (
    "width", "height", "depth", "diameter", "thickness", "radius", "radii", "web", "flange", "lip", "corner_radius",
    "root_radius", "toe_radius", "bend_radius", "outer_radius", "inner_radius", "bottom_width", "bottom_flange", "at",
    "start", "to", "from", "centre", "through", "points", "load_point",
    "throat", "leg", "penetration", "rows", "spacing",
)  # fmt: skip
_STRESSES = ("E", "G", "Gxy", "Gxz", "strength", "shear_strength")
_FORCES = ("N", "Vy", "Vz", "capacity")
_MOMENTS = ("T", "My", "Mz")
_DEGREES = ("rotate", "grain_angle", "from_deg", "to_deg")
_LONGEST_VALUE = 60  # characters of a value worth repeating on one line


def unit_of(key: str, units: UnitSystem | None) -> str:
    """Return the unit of a key of the section file, "" when it has none or the file's units are not known."""
    if key in _DEGREES:
        return "deg"
    if units is None:
        return ""
    named = {_LENGTHS: units.length, _STRESSES: units.stress, _FORCES: units.force, _MOMENTS: units.moment}
    return next((unit for keys, unit in named.items() if key in keys), "")


def number_text(value: float) -> str:
    """Return a number as short as it can be said: 40, -1.5, 2.1e+11; whole numbers of any length are allowed."""
    try:
        text = f"{float(value):.12g}"
    except OverflowError:  # a whole number beyond the largest float
        return "a number beyond 1e308"
    return "0" if text == "-0" else text


def value_text(value: object) -> str:
    """Return any TOML value as one short line."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, int | float):
        return number_text(value)
    if isinstance(value, str):
        return quoted(value)
    if isinstance(value, datetime | date | time):
        return value.isoformat()
    if isinstance(value, list | tuple):
        return _shortened("[" + ", ".join(value_text(item) for item in value[:_LONGEST_VALUE]) + "]")
    if isinstance(value, dict):
        return "a table" if value else "an empty table"
    return f"a {type(value).__name__}"


def with_unit(value: object, key: str, units: UnitSystem | None) -> str:
    """Return a value as text, with the unit of its key when it is a number (or a list of numbers)."""
    unit = unit_of(key, units)
    return f"{value_text(value)} {unit}" if unit and _is_numeric(value) else value_text(value)


def text_with_unit(text: str | None, path: str, units: UnitSystem | None) -> str | None:
    """Return a value that is text already, with the unit of the last key of its path ("steps[2].to") when numeric."""
    unit = unit_of(path.rpartition(".")[2].partition("[")[0], units)
    numeric = text is not None and re.fullmatch(r"[-+.e\d]+|\([-+.e\d]+, [-+.e\d]+\)", text)
    return f"{text} {unit}" if unit and numeric else text


def did_you_mean(word: object, known: Iterable[str]) -> str:
    """Return 'Did you mean "height"?' for the nearest known word, else a list of the known ones."""
    words = list(known)
    if not words:
        return ""
    if isinstance(word, str):
        swapped = [name for name in words if sorted(name.casefold().split()) == sorted(word.casefold().split())]
        if swapped:
            return f"Did you mean {quoted(swapped[0])}?"
        folded = {name.casefold(): name for name in reversed(words)}
        # 0.55: "hieght", "heigth" and "left top" find their word, while words of another meaning find none
        near = difflib.get_close_matches(word.casefold()[:100], folded, n=1, cutoff=0.55)
        if near:
            return f"Did you mean {quoted(folded[near[0]])}?"
    return f"Known: {listed(words)}."


def quoted(name: str) -> str:
    """Return a name in double quotes, control characters escaped, cut when very long."""
    text = json.dumps(name, ensure_ascii=False)
    return _shortened("".join(c if c.isprintable() else c.encode("unicode_escape").decode() for c in text))


def key_text(key: str) -> str:
    """Return a key as TOML writes it: bare when it can be, else in quotes."""
    return key if re.fullmatch(r"[A-Za-z0-9_-]+", key) else quoted(key)


def listed(names: Iterable[str]) -> str:
    """Return names as '"a", "b", "c"'."""
    return ", ".join(quoted(name) for name in names)


def named(place: str, name: object) -> str:
    """Return 'parts[1] "board 2"', or the bare place when the name is not text."""
    return f"{place} {quoted(name)}" if isinstance(name, str) and name.strip() else place


def point_text(point: Point, size: float) -> str:
    """Return a point, shape (2,), as '(y, z)' rounded to six digits of the section's `size` [mm], so that round-off reads as 0."""
    return "(" + ", ".join(number_text(float(f"{_without_noise(value, size):.6g}")) for value in point) + ")"


def _without_noise(value: float, size: float) -> float:
    return 0.0 if abs(value) < 1e-7 * size else value


def _is_numeric(value: object) -> bool:
    if isinstance(value, list | tuple):
        return len(value) > 0 and all(_is_numeric(item) for item in value)
    return isinstance(value, int | float) and not isinstance(value, bool)


def _shortened(text: str) -> str:
    return text if len(text) <= _LONGEST_VALUE else text[: _LONGEST_VALUE - 5] + " ..." + text[-1]
