"""The records as tables by group, for people and for machines."""

from __future__ import annotations

import json
from collections.abc import Iterable, Sequence
from dataclasses import asdict

from xsec_fem.report.blocks import Block, Heading, Lines, Table

from .case import Record

HEADER = ("", "section", "quantity", "reference", "ours", "guaranteed interval", "difference", "allowed", "source")
ALIGN = "lllrrlrrl"
MARKS = "Differences are shares of the reference, or in the quantity's unit where marked u."
_INTERVAL = HEADER.index("guaranteed interval")
_DIGITS = 9
_INTERVAL_DIGITS = 10


def by_group(records: Iterable[Record]) -> list[tuple[str, list[Record]]]:
    """Return the records by group, groups in the order of their first record."""
    order: dict[str, list[Record]] = {}
    for record in records:
        order.setdefault(record.group, []).append(record)
    return list(order.items())


def blocks(records: Sequence[Record], narrow: bool = False) -> list[Block]:
    """Return one table a group, the sources, the misses in words, and the summary line at the end.

    A narrow table leaves the guaranteed intervals out.
    """
    numbers = {source: number for number, source in enumerate(dict.fromkeys(record.source for record in records), 1)}
    shown = [column for column in range(len(HEADER)) if not (narrow and column == _INTERVAL)]
    content: list[Block] = []
    for group, members in by_group(records):
        rows = [(*row_cells(record), f"[{numbers[record.source]}] {record.provenance}") for record in members]
        cells = tuple(tuple(row[column] for column in shown) for row in rows)
        align = "".join(ALIGN[column] for column in shown)
        content += [Heading(heading(group)), Table(tuple(HEADER[column] for column in shown), cells, align)]
    content += [Heading("Sources"), Lines(tuple(f"[{number}] {source}" for source, number in numbers.items()))]
    misses = [f"{record.case_id}: {record.message}" for record in records if not record.ok]
    if misses:
        content += [Heading("Misses"), Lines(tuple(misses))]
    return [*content, Heading("Summary"), Lines((MARKS, summary_line(records)))]


def heading(group: str) -> str:
    """Return a group's name with a capital."""
    return group[:1].upper() + group[1:]


def row_cells(record: Record) -> tuple[str, ...]:
    """Return the cells of a record: verdict, section, quantity, reference, ours, interval, difference, allowed."""
    quantity = record.quantity if record.unit == "-" else f"{record.quantity} [{record.unit}]"
    low_high = record.interval
    interval = "" if low_high is None else f"[{low_high[0]:.{_INTERVAL_DIGITS}g}, {low_high[1]:.{_INTERVAL_DIGITS}g}]"
    if low_high is not None and not record.strict:
        interval += " *"
    return (
        "ok" if record.ok else "MISS",
        record.title,
        quantity,
        f"{record.reference:.{_DIGITS}g}",
        "none" if record.ours is None else f"{record.ours:.{_DIGITS}g}",
        interval,
        "" if record.difference is None else _size(record.difference, record),
        _size(record.allowed, record),
    )


def summary_line(records: Sequence[Record]) -> str:
    """Return the counts, and what the mark behind an interval says where there is one."""
    loose = any(record.interval is not None and not record.strict for record in records)
    return (
        f"{counts(records)}. Intervals marked * are not strict: polynomials stand for curved sides."
        if loose
        else f"{counts(records)}."
    )


def counts(records: Sequence[Record]) -> str:
    """Return how many checks and groups there are, how many hold, and how many references lie in strict intervals."""
    misses = sum(not record.ok for record in records)
    groups = len(by_group(records))
    inside = sum(record.inside_strict for record in records)
    counted = f"{_many(len(records), 'check')} in {_many(groups, 'group')}"
    text = f"{counted}: {len(records) - misses} within their tolerance, {misses} missed"
    if not inside:
        return text
    return f"{text}; {_many(inside, 'reference')} {'lies' if inside == 1 else 'lie'} in a strictly guaranteed interval of ours"


def _many(count: int, noun: str) -> str:
    return f"{count} {noun}" if count == 1 else f"{count} {noun}s"


def document(records: Sequence[Record]) -> str:
    """Return the records as JSON: schema, summary, one object a check; numbers bare."""
    checks = [{key: value for key, value in asdict(record).items() if value is not None} for record in records]
    misses = sum(not record.ok for record in records)
    head = {"schema": "xsec_fem validation 1", "checks": len(records), "missed": misses}
    return json.dumps({**head, "records": checks}, indent=1, ensure_ascii=False, allow_nan=False) + "\n"


def _size(value: float, record: Record) -> str:
    return f"{value / (record.scale or 1.0):.1e}{'' if record.relative else ' u'}"
