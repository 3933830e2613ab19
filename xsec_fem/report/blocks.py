"""What a summary is made of: headings, sentences and tables; and how they look as plain text or on a terminal."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import TextIO


@dataclass(frozen=True)
class Heading:
    """A title of the summary; `level` 1 for the whole, 2 for its chapters, 3 within a chapter."""

    text: str
    level: int = 2


@dataclass(frozen=True)
class Lines:
    """Sentences, one a line."""

    lines: tuple[str, ...]


@dataclass(frozen=True)
class Table:
    """Rows of text under a header; `align` has one letter a column, "l" or "r"."""

    header: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    align: str

    def __post_init__(self) -> None:
        for row in (*self.rows, self.header):
            if len(row) != len(self.align):
                raise ValueError(f"a table of {len(self.align)} columns got {len(row)} cells: {row}")


Block = Heading | Lines | Table


def plain_text(blocks: Iterable[Block]) -> str:
    """Return the blocks as aligned text without any colour, an empty line before each heading but the first."""
    lines: list[str] = []
    for block in blocks:
        if isinstance(block, Heading):
            indent = "  " if block.level == 3 else ""
            lines += [""] * bool(lines) + [indent + block.text] + (["=" * len(block.text)] if block.level == 1 else [])
        elif isinstance(block, Lines):
            lines += [f"  {line}" for line in block.lines]
        else:
            lines += [f"  {line}" for line in _table_lines(block)]
    return "\n".join(lines) + "\n"


def print_blocks(blocks: Sequence[Block], stream: TextIO) -> None:
    """Write the blocks to a stream: with bold headings and ruled tables on a terminal, as plain text otherwise."""
    if not stream.isatty():
        stream.write(plain_text(blocks))
        return
    from rich.console import Console
    from rich.padding import Padding
    from rich.text import Text

    console = Console(file=stream, highlight=False)
    for number, block in enumerate(blocks):
        if isinstance(block, Heading):
            if number:
                console.print()
            console.print(Text(block.text, style={1: "bold underline", 2: "bold", 3: "italic"}[block.level]))
        elif isinstance(block, Lines):
            for line in block.lines:
                console.print(Padding(Text(line), (0, 0, 0, 2)))
        else:
            console.print(_rich_table(block))


def _table_lines(table: Table) -> list[str]:
    widths = [max(len(row[k]) for row in (table.header, *table.rows)) for k in range(len(table.align))]
    lines = []
    for row in (table.header, *table.rows):
        cells = (
            cell.rjust(width) if side == "r" else cell.ljust(width)
            for cell, width, side in zip(row, widths, table.align, strict=True)
        )
        lines.append("  ".join(cells).rstrip())
    return lines


def _rich_table(table: Table) -> object:
    from rich.box import SIMPLE_HEAD
    from rich.table import Table as RichTable
    from rich.text import Text

    ruled = RichTable(box=SIMPLE_HEAD, pad_edge=False, show_edge=False, header_style="dim")
    for title, side in zip(table.header, table.align, strict=True):
        ruled.add_column(Text(title), justify="right" if side == "r" else "left", overflow="fold")
    for row in table.rows:
        ruled.add_row(*(Text(cell) for cell in row))
    return ruled
