"""The legend beside a sketch: one entry a part, mark or load case, its text broken to fit."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from xsec_fem.report.lettering import line_height, wrapped
from xsec_fem.report.sheet import INK, NOTE, Sheet

_INDENT = 0.4  # room for the sample before the text [in]
_GAP = 0.05  # between entries [in]


@dataclass(frozen=True)
class Entry:
    """One entry: kind "part", "line", "mark" or "text"; `sample` is a number, a line style or a marker."""

    kind: str
    text: str
    sample: str = ""
    colour: str = INK


def legend_height(entries: Sequence[Entry], width: float) -> float:
    """Return the height of the legend in inches when its column has that width."""
    return sum(len(_lines(entry, width)) * line_height(NOTE) + _GAP for entry in entries)


def draw_legend(sheet: Sheet, entries: Sequence[Entry], width: float) -> None:
    """Write the legend to the right of the drawing, `width` inches wide, from its top down."""
    left, bottom, across, height = sheet.plan.drawing
    page = sheet.plan.size
    left, top = left + across + 0.2, bottom + height
    for entry in entries:
        middle = (top - line_height(NOTE) / 2) / page[1]
        _draw_sample(sheet, entry, left, middle)
        for line in _lines(entry, width):
            place = ((left + _INDENT) / page[0], (top - line_height(NOTE) / 2) / page[1])
            sheet.figure.text(*place, line, size=NOTE, va="center", color=INK, parse_math=False)
            top -= line_height(NOTE)
        top -= _GAP


def _draw_sample(sheet: Sheet, entry: Entry, left: float, middle: float) -> None:
    """The number, line or mark before a text; `left` in inches, `middle` as a share of the page's height."""
    from matplotlib.lines import Line2D

    width = sheet.plan.size[0]
    centre = (left + _INDENT / 2) / width
    style: dict[str, Any] = {"color": entry.colour}
    if entry.kind == "part":
        sheet.figure.text(
            centre, middle, entry.sample, size=NOTE, ha="center", va="center", color=INK,
            bbox={"boxstyle": "circle,pad=0.2", "facecolor": entry.colour, "edgecolor": INK, "linewidth": 0.6},
        )  # fmt: skip
    elif entry.kind == "line":
        style["linestyle"] = entry.sample
        ends = [(left + 0.05) / width, (left + _INDENT - 0.08) / width]
        sheet.figure.add_artist(Line2D(ends, [middle, middle], linewidth=1.8, **style))
    elif entry.kind == "mark":
        style |= {"markerfacecolor": "none" if entry.sample == "D" else entry.colour, "markeredgewidth": 1.5}
        sheet.figure.add_artist(Line2D([centre], [middle], marker=entry.sample, markersize=6, **style))


def _lines(entry: Entry, width: float) -> list[str]:
    return wrapped(entry.text, NOTE, width - _INDENT) or [""]
