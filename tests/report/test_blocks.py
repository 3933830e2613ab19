"""Blocks of a summary as plain text and on a terminal."""

from __future__ import annotations

import io
import subprocess
import sys

import pytest

from xsec_fem.report.blocks import Heading, Lines, Table, plain_text, print_blocks

BLOCKS = [
    Heading("Title", 1),
    Lines(("one sentence.",)),
    Heading("Values"),
    Table(("symbol", "value"), (("A", "28000"), ("Iyy", "9.3")), "lr"),
]
PLAIN = """\
Title
=====
  one sentence.

Values
  symbol  value
  A       28000
  Iyy       9.3
"""


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def test_plain_text():
    assert plain_text(BLOCKS) == PLAIN


def test_a_pipe_gets_plain_text():
    stream = io.StringIO()
    print_blocks(BLOCKS, stream)
    assert stream.getvalue() == PLAIN


def test_a_terminal_gets_rules_and_the_same_words(monkeypatch):
    monkeypatch.setenv("TERM", "xterm-256color")
    stream = Terminal()
    print_blocks(BLOCKS, stream)
    text = stream.getvalue()
    assert "─" in text
    for word in ("Title", "one sentence.", "symbol", "28000", "Iyy", "9.3"):
        assert word in text


def test_names_with_brackets_are_no_markup():
    stream = Terminal()
    print_blocks([Lines(("[bold]x[/bold]",)), Table(("[red]",), (("[/]",),), "l")], stream)
    assert "[bold]x[/bold]" in stream.getvalue()
    assert "[/]" in stream.getvalue()


def test_a_pipe_does_not_load_rich():
    code = (
        "import io, sys; from xsec_fem.report.blocks import *; print_blocks([Heading('x')], io.StringIO()); "
        "sys.exit('rich' in sys.modules)"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_a_row_of_the_wrong_length_is_refused():
    with pytest.raises(ValueError, match=r"a table of 2 columns got 1 cells: \('x',\)"):
        Table(("a", "b"), (("x",),), "ll")
