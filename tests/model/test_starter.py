"""Every starter file reads without faults, in every unit system, as it is and with its optional lines."""

import re

import pytest

from xsec_fem.errors import InputError
from xsec_fem.model.reader import parse_section
from xsec_fem.model.shapes import SHAPES
from xsec_fem.model.starter import starter_text
from xsec_fem.model.starter_examples import EXAMPLES, STARTER_NUMBERS
from xsec_fem.units import UNIT_SYSTEMS

WORDS = [*SHAPES, "built-up"]


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "section.msh").write_text("")
    return tmp_path


@pytest.mark.parametrize("units", UNIT_SYSTEMS)
@pytest.mark.parametrize("word", WORDS)
def test_a_starter_reads_without_faults_or_cautions(word, units, folder):
    section = parse_section(starter_text(word, units), "a.toml", folder)
    assert section.units.name == units
    assert section.cautions == ()
    assert section.actions[0].load_point == "shear centre"
    assert [part.shape for part in section.parts] == ([word] if word in SHAPES else ["rectangle", "rectangle"])


@pytest.mark.parametrize("word", WORDS)
def test_optional_lines_may_be_switched_on_together(word, folder):
    text = re.sub(r"^# (\w+ = )", r"\1", starter_text(word), flags=re.M)
    if word == "strip":
        text = text.replace("closed = false", "closed = true")
    assert parse_section(text, "a.toml", folder).solve.order == 4


@pytest.mark.parametrize("word", WORDS)
def test_every_line_that_sets_a_value_says_what_it_is(word):
    lines = [line for line in starter_text(word).splitlines() if re.match(r"(# )?\w+ = ", line)]
    plain = [line for line in lines if not re.search(r"\S +# \S", line.removeprefix("# "))]
    assert all(line.startswith(("shape =", "kind =")) for line in plain)
    assert len(lines) >= 10


def test_the_tables_of_examples_are_complete():
    assert list(EXAMPLES) == list(SHAPES)
    assert list(STARTER_NUMBERS) == list(UNIT_SYSTEMS)
    for word, entries in EXAMPLES.items():
        fields = {info.alias or key: info.is_required() for key, info in SHAPES[word].model_fields.items()}
        assert {entry.key for entry in entries} <= set(fields)
        assert {key for key, required in fields.items() if required} <= {e.key for e in entries if not e.optional}


def test_unknown_words_get_the_nearest_one():
    with pytest.raises(
        InputError, match=r'^shape is not a known starter \(got "i-shape"\)\. Did you mean "i_shape"\?$'
    ):
        starter_text("i-shape")
    with pytest.raises(InputError, match=r'"builtup"\)\. Did you mean "built-up"\?'):
        starter_text("builtup")
    with pytest.raises(InputError, match=r'^units is not a known unit system \(got "kNm"\)\. Did you mean "kN m"\?$'):
        starter_text("box", "kNm")
