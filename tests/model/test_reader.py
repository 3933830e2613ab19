"""What a right file becomes, and that no table whatever raises anything but InputError."""

import hashlib
import tomllib
from collections.abc import Callable
from datetime import date, time
from pathlib import Path

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from tests.model.two_boards import TWO_BOARDS, faults_of, part, section_of
from xsec_fem.errors import InputError
from xsec_fem.model import schema
from xsec_fem.model.reader import parse_section, read_section, section_from_tables
from xsec_fem.model.section import Actions, Cut, Joint, Material, Probe, Section, SolveSettings
from xsec_fem.model.shapes import SHAPES
from xsec_fem.units import UNIT_SYSTEMS

FIVE_BOARDS = """
title = "Footbridge stringer, five boards"
units = "N mm"
[materials.board]
E = 11600
nu = 0.35
G = 650
shear_strength = 1.6
[[parts]]
name = "board 1"
material = "board"
shape = "rectangle"
width = 140
height = 40
at = [0, -80]
[[parts.holes]]
shape = "circle"
diameter = 12
at = [40, -80]
[[parts]]
name = "board 2"
material = "board"
shape = "rectangle"
width = 140
height = 40
at = [0, -40]
[[joints]]
name = "glue 1-2"
between = ["board 1", "board 2"]
kind = "glue"
strength = 1.4
[[cuts]]
name = "flange root"
from = [-70, -40]
to = [70, -40]
[[probes]]
name = "gauge 3"
at = [0, -40.5]
[[actions]]
name = "support, ULS"
Vz = 18000
load_point = "shear centre"
[[actions]]
Vy = 1
load_point = [1, 2]
[solve]
accuracy = 0.02
order = 3
nu_effect = false
mesh_file = "kept.msh"
"""


def test_every_table_becomes_its_object(tmp_path):
    path = tmp_path / "five_boards.toml"
    path.write_text(FIVE_BOARDS)
    section = read_section(path)
    assert section.title == "Footbridge stringer, five boards"
    assert section.units is UNIT_SYSTEMS["N mm"]
    assert section.materials == {"board": Material("board", 11600, 650, 650, 0.35, 0.35, 1.6)}
    assert [(p.name, p.material, p.shape) for p in section.parts] == [
        ("board 1", "board", "rectangle"),
        ("board 2", "board", "rectangle"),
    ]
    face = section.part("board 1").face
    assert face is not None
    assert face.bounds() == (-70, -100, 70, -60)
    assert len(face.holes) == 1
    assert section.joints == (Joint("glue 1-2", ("board 1",), ("board 2",), "glue", 1.4),)
    assert section.cuts == (Cut("flange root", (-70, -40), (70, -40)),)
    assert section.probes == (Probe("gauge 3", (0, -40.5)),)
    assert section.actions == (
        Actions("support, ULS", Vz=18000, load_point="shear centre"),
        Actions("case 2", Vy=1, load_point=(1, 2)),
    )
    assert section.solve == SolveSettings(0.02, 3, False, tmp_path / "kept.msh")
    assert section.path == path
    assert section.sha256 == hashlib.sha256(path.read_bytes()).hexdigest()
    assert section.cautions == ()


def test_defaults():
    section = section_of(part("a", "rectangle width=2 height=3"), "[[probes]]\nat = [0, 0]\n")
    assert section.title == "a"
    assert section.actions == ()
    assert section.probes == (Probe("probe 1", (0, 0)),)
    assert section.solve == SolveSettings()
    steel = section.materials["steel"]
    assert steel.Gxy == pytest.approx(210000 / 2.6, rel=1e-15)
    assert not steel.G_given
    assert steel.isotropic


def test_a_path_may_be_text(tmp_path, monkeypatch):
    (tmp_path / "a.toml").write_text(TWO_BOARDS)
    monkeypatch.chdir(tmp_path)
    assert read_section("a.toml").path == Path("a.toml")
    (tmp_path / "a.toml").write_text(TWO_BOARDS.replace("E = 11600", "E = 0"))
    with pytest.raises(InputError, match=r"^a\.toml: materials\.board: E must be > 0"):
        read_section("a.toml")


def test_an_orthotropic_material():
    text = TWO_BOARDS.replace("nu = 0.35\nG = 650", "Gxy = 650\nGxz = 60\nnu_xy = 0.4\nnu_xz = 0.55\nstrength = 24")
    assert parse_section(text).materials["board"] == Material("board", 11600, 650, 60, 0.4, 0.55, None, 24)


def test_regions_of_a_mesh_file(tmp_path):
    (tmp_path / "m.msh").write_text("")
    (tmp_path / "n.msh").write_text("")
    first = '[[parts]]\nname = "a"\nmaterial = "steel"\nshape = "file"\npath = "m.msh"\nregion = 1\nscale = 10\n'
    second = first.replace('"a"', '"b"').replace("region = 1", 'region = "two"')
    section = section_of(first, second, folder=tmp_path)
    regions = [part.mesh_region for part in section.parts]
    assert [(r.path, r.region, r.scale) for r in regions if r] == [
        (tmp_path / "m.msh", 1, 10),
        (tmp_path / "m.msh", "two", 10),
    ]
    assert faults_of(first, second.replace("m.msh", "n.msh"), folder=tmp_path) == [
        'a.toml: parts[1] "b": path must be the file of all parts, "m.msh" (got "n.msh"). Put all parts into one file.'
    ]
    assert faults_of(first, second.replace("= 10", "= 1"), folder=tmp_path) == [
        'a.toml: parts[1] "b": scale must be the same for all parts of the file, 10 (got 1).'
    ]
    moved = first + 'at = [1, 0]\nanchor = "centre"\n[[parts.holes]]\nshape = "circle"\ndiameter = 1\n'
    assert faults_of(moved, folder=tmp_path) == [
        'a.toml: parts[0] "a" cannot have "at", "anchor", "holes" with shape "file": the mesh stays where its file puts it. '
        "Leave it out, or move and cut the mesh in its own file."
    ]
    kept = '[solve]\nmesh_file = "m.msh"\n'
    assert faults_of(first, kept, folder=tmp_path) == [
        'a.toml: solve: mesh_file would write over the file that the parts come from (got "m.msh"). '
        "Give the name of a file to write, beside the section file."
    ]
    assert "is a folder, not a file" in faults_of(part("a", "circle diameter=2"), '[solve]\nmesh_file = "d.msh"\n',
                                                  folder=_with_folder(tmp_path, "d.msh"))[0]  # fmt: skip
    missing = first.replace("m.msh", "sub/m.msh")
    assert faults_of(missing, folder=tmp_path) == [
        'a.toml: parts[0] "a": path does not exist (got "sub/m.msh"). There is no .geo, .msh, .vtu file in that folder.'
    ]


def _with_folder(path: Path, name: str) -> Path:
    (path / name).mkdir()
    return path


def test_default_names_do_not_clash_with_given_ones():
    probes = '[[probes]]\nname = "probe 2"\nat = [0, 0]\n[[probes]]\nat = [0, 1]\n'
    assert faults_of(part("a", "circle diameter=4"), probes) == [
        'a.toml: probes[1] "probe 2" has the same name as probes[0]. Give each a name of its own.'
    ]


def test_a_material_that_no_part_uses_is_a_caution():
    section = section_of('[materials."old timber"]\nE = 9000\nnu = 0.3\nG = 500\n', part("a", "circle diameter=20"))
    assert section.cautions == (("unused material", 'materials."old timber" is not used by any part.'),)


@pytest.mark.parametrize("tables", [{}, {"units": "N mm"}, {"parts": []}, {"parts": [{}]}, {"parts": {}}])
def test_next_to_nothing_is_an_input_error(tables):
    with pytest.raises(InputError, match="needs at least one material"):
        section_from_tables(tables, "a.toml", Path("."))


# --- any table whatever: nothing but InputError ---------------------------------------------------------------------

KEYS = sorted(
    {"title", "units", "materials", "parts", "joints", "cuts", "probes", "actions", "solve", "holes", "shape", "steel"}
    | {
        info.alias or key
        for model in (*vars(schema).values(), *SHAPES.values())
        if isinstance(model, type) and issubclass(model, schema.BaseModel)
        for key, info in model.model_fields.items()
    }
)
WORDS = [
    "N mm",
    "kN m",
    "steel",
    "a",
    "b",
    "glue",
    "contact",
    "centre",
    "top left",
    "y",
    "file",
    "m.msh",
    "\0",
    "",
    *SHAPES,
]
LEAVES = st.one_of(
    st.sampled_from(WORDS), st.integers(-3, 300), st.integers(), st.floats(), st.floats(0, 1e3), st.booleans(),
    st.text(max_size=5), st.just(date(2026, 12, 1)), st.just(time(1)), st.just(10**400), st.just(5e-324),
    st.lists(st.floats(-50, 50), min_size=2, max_size=2),
)  # fmt: skip
VALUES = st.recursive(
    LEAVES,
    lambda inner: (
        st.lists(inner, max_size=4) | st.dictionaries(st.sampled_from(KEYS) | st.text(max_size=5), inner, max_size=6)
    ),
    max_leaves=25,
)


@given(tables=st.dictionaries(st.sampled_from(KEYS) | st.text(max_size=5), VALUES, max_size=8))
@example(tables={"materials": {"": {"E": 1, "nu": 0.3}}, "parts": [[], 3]})
@settings(max_examples=100, deadline=None)
def test_random_tables_raise_input_errors_only(tables):
    with pytest.raises(InputError) as caught:
        section_from_tables(tables, "a.toml", Path("nowhere"))
    assert all(str(fault).isprintable() for fault in caught.value.faults)


def outcome(read: Callable[[], Section]) -> tuple[list[str], Section | None]:
    """The fault lines or the section: one of the two."""
    try:
        return [], read()
    except InputError as error:
        return [str(fault) for fault in error.faults], None


@st.composite
def nearly_right(draw):
    """A right frame with parts of random shapes, in which most keys are the shape's own and most values are numbers."""
    numbers = st.one_of(st.floats(0, 200), st.floats(-50, 50), st.floats(1e-12, 1e-6), st.floats(1e10, 1e11))
    pairs = st.lists(numbers, min_size=2, max_size=2)
    parts = []
    for name in draw(st.lists(st.sampled_from("abc"), min_size=1, max_size=3)):
        word = draw(st.sampled_from([word for word in SHAPES if word != "file"]))
        table = {"name": name, "material": "steel", "shape": word}
        for key, info in SHAPES[word].model_fields.items():
            if info.is_required() or draw(st.booleans()):
                values = {"points": st.lists(pairs, max_size=6), "start": pairs, "end": pairs, "closed": st.booleans(),
                          "steps": st.lists(st.fixed_dictionaries({"to": pairs}, optional={"through": pairs}), max_size=4),
                          "cells": st.integers(0, 5), "radii": st.lists(numbers, max_size=6)}  # fmt: skip
                table[info.alias or key] = draw(values.get(key, numbers))
        table |= draw(st.fixed_dictionaries({}, optional={"at": pairs, "rotate": numbers, "mirror": st.just("y")}))
        if draw(st.booleans()):
            table["holes"] = [{"shape": "circle", "diameter": draw(numbers), "at": draw(pairs)}]
        parts.append(table)
    joint = {"name": "j", "kind": "glue", "between": ["a", "b"]}
    return {
        "units": draw(st.sampled_from(list(UNIT_SYSTEMS))),
        "materials": {"steel": {"E": draw(numbers), "nu": 0.3}},
        "parts": parts,
        "joints": draw(st.lists(st.just(joint), max_size=1)),
        "probes": [{"at": draw(pairs)}],
    }


@given(tables=nearly_right())
@settings(max_examples=150, deadline=None)
def test_nearly_right_tables_give_a_section_or_an_input_error(tables):
    lines, section = outcome(lambda: section_from_tables(tables, "a.toml", Path("nowhere")))
    assert all(line.startswith("a.toml") and line.isprintable() for line in lines)
    assert section is None or len(section.parts) == len(tables["parts"])


@given(text=st.text(max_size=60) | st.sampled_from(TWO_BOARDS.splitlines()).flatmap(
    lambda line: st.integers(0, len(TWO_BOARDS)).map(lambda k: TWO_BOARDS[:k] + line + TWO_BOARDS[k:])))  # fmt: skip
@settings(max_examples=100, deadline=None)
def test_random_text_gives_a_section_or_an_input_error(text):
    lines, section = outcome(lambda: parse_section(text, "a.toml"))
    assert all(line.startswith("a.toml") and line.isprintable() for line in lines)
    assert section is None or tomllib.loads(text)
