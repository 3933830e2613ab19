"""Wrong section files and the whole text of what the reader says about each."""

import re
import tomllib
from pathlib import Path

import pytest

from tests.model.two_boards import TWO_BOARDS, fault_lines
from xsec_fem.errors import InputError
from xsec_fem.model.reader import parse_section, read_section

CASES = tomllib.loads((Path(__file__).parent / "wrong_files.toml").read_text(encoding="utf-8"))["case"]
# words of the schema library's own messages: none may ever reach the user
FOREIGN = re.compile(r"pydantic|Input should|Field required|validation error|type=|input_value|Extra inputs", re.I)


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "section.msh").write_text("a mesh")
    (tmp_path / "folder.msh").mkdir()
    return tmp_path


def test_the_file_that_the_cases_change_is_right():
    assert parse_section(TWO_BOARDS, "a.toml").cautions == ()


@pytest.mark.parametrize("case", CASES, ids=[case["new"].replace("\n", " ")[:50] for case in CASES])
def test_every_fault_says_place_rule_value_and_remedy(case, folder):
    assert TWO_BOARDS.count(case["old"]) == 1
    lines = fault_lines(TWO_BOARDS.replace(case["old"], case["new"]), folder)
    assert lines == case["lines"]
    assert not any(FOREIGN.search(line) for line in lines)


def test_the_table_of_cases_is_long_enough():
    assert len(CASES) >= 40
    assert len({case["new"] for case in CASES}) > 0.9 * len(CASES)


def test_all_faults_are_found_at_once():
    text = (
        TWO_BOARDS.replace("height = 40", "height = -40")
        .replace("nu = 0.35", "nu = 0.6")
        .replace("Vz = 18000", 'Vz = "much"')
        .replace('units = "N mm"', 'units = "mm N"')
        .replace('["lower", "upper"]', '["lower", "uper"]')
        .replace("load_point", "loadpoint")
    )
    lines = fault_lines(text + "\n[solve]\norder = 9\n[[probes]]\nat = [1]\n")
    places = [line.removeprefix("a.toml: ").partition(" must")[0].partition(" is not")[0] for line in lines]
    assert places == [
        "units",
        "materials.board: nu",
        'parts[0] "lower": height',
        'joints[0] "glue line": between[1]',
        "probes[0]: at",
        'actions[0] "ULS": Vz',
        'actions[0] "ULS": loadpoint',
        "solve: order",
    ]


def test_geometry_is_judged_beside_faults_of_the_schema():
    text = TWO_BOARDS.replace("nu = 0.35", "nu = 0.6").replace("at = [0, 70]", "at = [0, 65]")
    lines = fault_lines(text)
    assert len(lines) == 2
    assert lines[1].startswith('a.toml: parts "lower" and "upper" overlap by 500 mm² at (0, 37.5).')


@pytest.mark.parametrize(
    ("text", "line"),
    [
        (
            'units = "N mm"\n[[parts]]\nwidth = 14O\n',
            'a.toml: line 3, column 11 goes on after the value (got "width = 14O"). '
            "Put one key = value on each line, and a # before a remark.",
        ),
        (
            "units = N mm\n",
            'a.toml: line 1, column 9 has a value that is not a number, text, list, true or false (got "units = N mm"). '
            'Put text in "quotes".',
        ),
        (
            'title = "a\n',
            'a.toml: line 1, column 11 has a character that is not allowed here (got "title = \\"a"). '
            "Close quotes on the same line.",
        ),
        (
            "[materials.a]\nE = 1\n[materials.a]\n",
            'a.toml: line 3, column 13 declares a table a second time (got "[materials.a]"). '
            "Give every material a name of its own; parts are [[parts]].",
        ),
        (
            "units = 1\nunits = 2\n",
            'a.toml: line 2, column 10 gives a key a second time (got "units = 2"). Keep one of the two.',
        ),
        (
            "at = [1, 2\n",
            'a.toml: line 1, end of the file opens a list that is not closed (got "at = [1, 2"). Close it with ].',
        ),
        (
            "width 140\n",
            'a.toml: line 1, column 7 has no = after the key (got "width 140"). '
            'Write key = value, for example width = 140 or name = "web".',
        ),
        (
            'path = "c:\\users"\n',
            'a.toml: line 1, column 13 has a backslash in a text (got "path = \\"c:\\\\users\\""). '
            "Write paths with / or in 'single quotes'.",
        ),
        (
            "a = 2026-02-30\n",
            'a.toml: line 1, column 5 has a date that does not exist (got "a = 2026-02-30"). Put text in "quotes".',
        ),
        ("x = " + "[" * 4000, "a.toml nests lists or tables too deeply. Leave out the extra brackets."),
        ("x = " + "1" * 5000, "a.toml has a number with thousands of digits. Write it as 1e9."),
    ],
)
def test_toml_faults_have_line_column_and_remedy(text, line):
    assert fault_lines(text) == [line]


@pytest.mark.parametrize(
    ("content", "rule"),
    [
        (b"", "is empty. Start from `xsec-fem starter rectangle`."),
        (b" \n\t\n", "is empty. Start from"),
        (b"a = 1\n\x89PNG\r\n", ": line 2 is not UTF-8 text (got byte 0x89). Give a section file"),
        (b"PK\x03\x04\0\0", "is not a text file. Give a section file (TOML, saved as UTF-8)."),
        ('units = "N mm"'.encode("utf-16"), "is UTF-16 text. Save it as UTF-8."),
    ],
    ids=["empty", "blank", "image", "zip", "UTF-16"],
)
def test_what_is_no_text_is_said(tmp_path, content, rule):
    path = tmp_path / "beam.toml"
    path.write_bytes(content)
    with pytest.raises(InputError, match=re.escape(rule)) as caught:
        read_section(path)
    assert str(caught.value).startswith(str(path))
    assert len(caught.value.faults) == 1


def test_a_folder_a_missing_file_and_a_missing_folder(tmp_path):
    (tmp_path / "girder.toml").write_text("a")
    with pytest.raises(InputError, match=r"is a folder, not a section file\. Give a file in it: girder\.toml\."):
        read_section(tmp_path)
    with pytest.raises(InputError, match=r'girdr\.toml does not exist\. Did you mean "girder\.toml"\?'):
        read_section(tmp_path / "girdr.toml")
    with pytest.raises(InputError, match=r'does not exist\. There is no folder ".*" either\.'):
        read_section(tmp_path / "nowhere" / "girder.toml")
    (tmp_path / "void").mkdir()
    with pytest.raises(InputError, match=r"is a folder, not a section file\. Give a section file \(TOML\)\."):
        read_section(tmp_path / "void")
    with pytest.raises(InputError, match=r"does not exist\. Start from"):
        read_section(tmp_path / "void" / "a.toml")
    with pytest.raises(InputError, match=r"cannot be read: .*Check the path and its access\."):
        read_section("a\0b.toml")


def test_a_byte_order_mark_and_windows_line_ends_are_read(tmp_path):
    path = tmp_path / "beam.toml"
    path.write_bytes(b"\xef\xbb\xbf" + TWO_BOARDS.replace("\n", "\r\n").encode())
    assert read_section(path).title == "Two boards"
