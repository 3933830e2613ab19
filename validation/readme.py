"""README.md of this folder: what the validation is, and the table of all cases as they came out."""

from __future__ import annotations

import math
from collections.abc import Sequence
from pathlib import Path

from .case import Record
from .table import by_group, heading

README = Path(__file__).with_name("README.md")
_DIGITS = 6
_ROUND_OFF = 1e-10  # relative: differences below it change with the processor and are not told apart

_HEAD = """\
# Validation

Every reference here comes from outside the project: an exact solution, a series, a published table, or a numerical method that
has nothing in common with finite elements. `xsec-fem validate` solves all sections again and prints this table with all digits
and our guaranteed intervals; `xsec-fem validate torsion ellipse` only the cases with both words, `--quick` the short ones,
`--json` with the reason of each tolerance; `--pictures DIR` and `--html FILE` draw it. The exit code is 1 when a check is missed.

- `case.py` says what a case is, `families/` holds them (one file a family, listed in `families/__init__.py`), `closed_form/` the
  formulas, `runner.py` solves each section once, on all cores.
- Provenance: *computed* from its formula or by an independent method; *read* in a copy of the source; *common practice*, without
  a source; *from memory*, not looked up again.
- "Differs by" is rounded up to a power of ten, and like "allowed" a share of the reference, or (marked u) in the quantity's unit.
- [Where handbooks are wrong, or mean something else](disagreements.md); [second opinions](second_opinions.md) from two
  general-purpose libraries on six sections; `tests/mutation.py` seeds bugs and shows that the cases catch them.
- To add a case: append it to its family's `cases()`, give source, provenance, tolerance and the tolerance's reason, then write
  this file again with `xsec-fem validate --write-readme`; the tests compare it with a fresh run.

"""
COLUMNS = ("section", "quantity", "reference", "ours", "differs by", "allowed", "source", "provenance")


def readme(records: Sequence[Record]) -> str:
    """Return the text of README.md."""
    numbers = {source: number for number, source in enumerate(dict.fromkeys(record.source for record in records), 1)}
    lines = [f"{len(records)} checks in {len(by_group(records))} groups.", ""]
    for name, members in by_group(records):
        lines += [f"## {heading(name)}", "", _line(COLUMNS), _line(["---"] * len(COLUMNS))]
        lines += [_line(_cells(record, numbers[record.source])) for record in members]
        lines.append("")
    lines += ["## Sources", "", *(f"{number}. {_safe(source)}" for source, number in numbers.items())]
    return _HEAD + "\n".join(lines) + "\n"


def stale_lines(old: str, new: str) -> list[str]:
    """Return the lines of a fresh README that the old one does not have.

    Numbers of ours may differ by one in the last digit shown, and their differences by a power of ten: they come from another
    machine's round-off.
    """
    before, after = old.splitlines(), new.splitlines()
    if len(before) != len(after):
        return [f"{len(before)} lines where there are now {len(after)}"]
    return [line for line, former in zip(after, before, strict=True) if not _same(former, line)]


def _same(old: str, new: str) -> bool:
    if old == new:
        return True
    cells, former = new.split(" | "), old.split(" | ")
    if len(cells) != len(COLUMNS) or len(former) != len(COLUMNS):
        return False
    ours, differs = COLUMNS.index("ours"), COLUMNS.index("differs by")
    rest = [number for number in range(len(COLUMNS)) if number not in (ours, differs)]
    if any(cells[number] != former[number] for number in rest):
        return False
    return _close(former[ours], cells[ours], 1.5 * 10 ** (1 - _DIGITS), 0.0) and _close(
        former[differs], cells[differs], 9.5, 1e-300
    )


def _close(old: str, new: str, relative: float, least: float) -> bool:
    try:
        a, b = (float(text.removesuffix(" u").removeprefix("< ")) for text in (old, new))
    except ValueError:
        return False
    return abs(a - b) <= relative * max(min(abs(a), abs(b)), least)


def _cells(record: Record, source: int) -> list[str]:
    quantity = record.quantity if record.unit == "-" else f"{record.quantity} [{record.unit}]"
    unit = "" if record.relative else " u"
    return [
        record.title, quantity, _number(record.reference), _ours(record), f"{_decade(record)}{unit}",
        f"{_share(record.allowed, record):.1g}{unit}", f"[{source}](#sources)", record.provenance,
    ]  # fmt: skip


def _ours(record: Record) -> str:
    if record.ours is None:
        return "none"
    return "0" if record.reference == 0 and record.ok else _number(record.ours)


def _decade(record: Record) -> str:
    """The difference rounded up to a power of ten; everything within round-off is the same."""
    if record.difference is None:
        return "none"
    share = _share(record.difference, record)
    floor = _ROUND_OFF * (1.0 if record.relative else max(abs(record.reference), record.allowed))
    exponent = math.ceil(math.log10(max(share, floor)) - 1e-9)
    return f"{'< ' if share < floor else ''}1e{exponent:d}"


def _share(value: float, record: Record) -> float:
    return value / record.scale if record.scale else value


def _number(value: float) -> str:
    return f"{value:.{_DIGITS}g}"


def _line(cells: Sequence[str]) -> str:
    return f"| {' | '.join(_safe(cell) for cell in cells)} |"


def _safe(text: str) -> str:
    return text.replace("|", "\\|").replace("\n", " ")
