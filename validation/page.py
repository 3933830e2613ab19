"""The validation as one page: summary, pictures and table by group, with nothing to load from elsewhere."""

from __future__ import annotations

import base64
from collections.abc import Sequence
from html import escape
from pathlib import Path

from .case import Record
from .table import HEADER, MARKS, by_group, heading, row_cells, summary_line

_STYLE = """
body { font: 14px/1.45 system-ui, "DejaVu Sans", sans-serif; color: #222; margin: 2em auto; max-width: 1240px; padding: 0 1em; }
h1 { font-size: 1.5em; } h2 { font-size: 1.1em; margin: 2em 0 .4em; }
table { border-collapse: collapse; width: 100%; font-size: 12px; }
th { text-align: left; font-weight: 600; border-bottom: 1px solid #999; padding: .3em .6em; }
td { border-bottom: 1px solid #e3e3e3; padding: .25em .6em; vertical-align: top; }
td.n, th.n { text-align: right; font-variant-numeric: tabular-nums; white-space: nowrap; }
td.s { color: #555; } tr.miss td { background: #fbe3e1; } img { max-width: 100%; height: auto; margin: 1em 0; }
nav a { margin-right: 1em; white-space: nowrap; display: inline-block; } details { color: #555; font-size: 12px; }
@media print { nav { display: none; } h2 { break-after: avoid; } tr { break-inside: avoid; } body { margin: 0; } }
"""
_NUMBERS = range(3, 8)  # columns of figures


def page(records: Sequence[Record], pictures: Sequence[Path]) -> str:
    """Return the page as HTML, every text escaped and the pictures (PNG files) inside; OSError when one cannot be read."""
    groups = by_group(records)
    links = "".join(
        f'<a href="#g{number}">{escape(heading(name))} ({len(members)})</a>'
        for number, (name, members) in enumerate(groups, 1)
    )
    misses = "".join(
        f"<li>{escape(record.case_id)}: {escape(record.message)}</li>" for record in records if not record.ok
    )
    body = [
        "<h1>Validation</h1>",
        f"<p>{escape(summary_line(records))} {escape(MARKS)}</p>",
        f"<ul>{misses}</ul>" if misses else "",
        f"<nav>{links}</nav>",
        *(_picture(file) for file in pictures),
        *(_group(number, name, members) for number, (name, members) in enumerate(groups, 1)),
    ]
    return (
        '<!doctype html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n'
        '<meta name="viewport" content="width=device-width, initial-scale=1">\n'
        f"<title>Validation</title>\n<style>{_STYLE}</style>\n</head>\n<body>\n"
        + "\n".join(body)
        + "\n</body>\n</html>\n"
    )


def _picture(file: Path) -> str:
    data = base64.b64encode(file.read_bytes()).decode("ascii")
    return f'<img alt="{escape(file.stem)}" src="data:image/png;base64,{data}">'


def _group(number: int, name: str, members: Sequence[Record]) -> str:
    head = "".join(f"<th{_right(column)}>{escape(text)}</th>" for column, text in enumerate(HEADER))
    reasons = dict.fromkeys(record.reason for record in members)
    listed = "".join(f"<li>{escape(reason)}</li>" for reason in reasons)
    rows = "\n".join(_row(record) for record in members)
    return (
        f'<h2 id="g{number}">{escape(heading(name))}</h2>\n<table>\n<thead><tr>{head}</tr></thead>\n<tbody>\n{rows}\n</tbody>\n'
        f"</table>\n<details><summary>Why so much is allowed</summary><ul>{listed}</ul></details>"
    )


def _row(record: Record) -> str:
    cells = "".join(f"<td{_right(column)}>{escape(text)}</td>" for column, text in enumerate(row_cells(record)))
    source = f'<td class="s">{escape(f"{record.source} ({record.provenance})")}</td>'
    return f"<tr{'' if record.ok else ' class=miss'}>{cells}{source}</tr>"


def _right(column: int) -> str:
    return ' class="n"' if column in _NUMBERS else ""
