"""xsec-fem starter: every starter is printed, read and drawn."""

from __future__ import annotations

import pytest

from xsec_fem.cli.main import main
from xsec_fem.cli.starter import shapes
from xsec_fem.model.reader import parse_section
from xsec_fem.model.starter import starter_text
from xsec_fem.units import UNIT_SYSTEMS


@pytest.mark.parametrize("shape", [shape for shape in shapes() if shape != "file"])
def test_a_starter_is_printed_and_reads(shape, capsys):
    assert main(["starter", shape]) == 0
    out, err = capsys.readouterr()
    assert (out, err) == (starter_text(shape), "")
    assert parse_section(out).parts


@pytest.mark.parametrize("units", UNIT_SYSTEMS)
def test_units(units, capsys):
    assert main(["starter", "rectangle", "--units", units]) == 0
    assert parse_section(capsys.readouterr().out).units.name == units


def test_without_a_word_it_lists_the_shapes(capsys):
    assert main(["starter"]) == 2
    out, err = capsys.readouterr()
    assert out.split() == shapes()
    assert err == "Name one of these shapes: xsec-fem starter SHAPE\n"


def test_an_unknown_word_gets_the_nearest_one_and_the_list(capsys):
    assert main(["starter", "rectangl"]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert 'Did you mean "rectangle"?' in err.splitlines()[0]
    assert err.splitlines()[1] == f"Shapes: {', '.join(shapes())}"


def test_unknown_units_do_not_bring_the_list_of_shapes(capsys):
    assert main(["starter", "rectangle", "--units", "N cm"]) == 2
    err = capsys.readouterr().err
    assert "units" in err
    assert "Shapes:" not in err


def test_a_file_is_written_once(here, capsys):
    assert main(["starter", "tee", "-o", "tee.toml"]) == 0
    assert capsys.readouterr() == ("", "tee.toml written; xsec-fem sketch tee.toml draws it\n")
    assert (here / "tee.toml").read_text() == starter_text("tee")
    assert main(["starter", "box", "-o", "tee.toml"]) == 2
    assert capsys.readouterr().err == "tee.toml exists already. Give another name with -o.\n"
    assert (here / "tee.toml").read_text() == starter_text("tee")


def test_a_folder_that_is_not_there(here, capsys):
    assert main(["starter", "tee", "-o", "no/tee.toml"]) == 2
    assert capsys.readouterr().err == "no/tee.toml cannot be written: no such file or directory.\n"
