"""A small valid section file for the tests of the reader, and ways to change it."""

from pathlib import Path

import pytest

from xsec_fem.errors import InputError
from xsec_fem.model.reader import parse_section
from xsec_fem.model.section import Section

TWO_BOARDS = """title = "Two boards"
units = "N mm"

[materials.board]
E = 11600
nu = 0.35
G = 650

[[parts]]
name = "lower"
material = "board"
shape = "rectangle"
width = 140
height = 40
at = [0, 20]

[[parts]]
name = "upper"
material = "board"
shape = "rectangle"
width = 100
height = 60
at = [0, 70]

[[joints]]
name = "glue line"
between = ["lower", "upper"]
kind = "glue"
strength = 1.4

[[actions]]
name = "ULS"
Vz = 18000
load_point = "shear centre"
"""
MATERIAL = 'units = "N mm"\n[materials.steel]\nE = 210000\nnu = 0.3\n'


def part(name: str, shape: str, *more: str) -> str:
    """A [[parts]] table of steel; `shape` is "rectangle width=2 height=3"."""
    word, *numbers = shape.split()
    lines = [f'name = "{name}"', 'material = "steel"', f'shape = "{word}"', *numbers, *more]
    return "[[parts]]\n" + "\n".join(lines) + "\n"


def section_of(*tables: str, folder: Path = Path(".")) -> Section:
    """The section of a steel material and the given tables."""
    return parse_section(MATERIAL + "\n".join(tables), "a.toml", folder)


def fault_lines(text: str, folder: Path = Path(".")) -> list[str]:
    """The fault lines of a text that must not read."""
    with pytest.raises(InputError) as caught:
        parse_section(text, "a.toml", folder)
    return str(caught.value).split("\n")


def faults_of(*tables: str, folder: Path = Path(".")) -> list[str]:
    """The fault lines of a steel material and the given tables."""
    return fault_lines(MATERIAL + "\n".join(tables), folder)
