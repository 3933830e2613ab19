"""The legend beside a sketch: one entry a part, mark or load case, its text broken to fit."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

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
    from matplotlib.lines import Line2D

    left, bottom, across, height = sheet.plan.drawing
    page, figure = sheet.plan.size, sheet.figure
    left, top = left + across + 0.2, bottom + height
    for entry in entries:
        lines = _lines(entry, width)
        middle = (top - line_height(NOTE) / 2) / page[1]
        if entry.kind == "part":
            figure.text(
                (left + _INDENT / 2) / page[0], middle, entry.sample, size=NOTE, ha="center", va="center", color=INK,
                bbox={"boxstyle": "circle,pad=0.2", "facecolor": entry.colour, "edgecolor": INK, "linewidth": 0.6},
            )  # fmt: skip
        elif entry.kind == "line":
            ends = [(left + 0.05) / page[0], (left + _INDENT - 0.08) / page[0]]
            figure.add_artist(Line2D(ends, [middle, middle], linestyle=entry.sample, color=entry.colour, linewidth=1.8))
        elif entry.kind == "mark":
            face = "none" if entry.sample == "D" else entry.colour
            figure.add_artist(
                Line2D(
                    [(left + _INDENT / 2) / page[0]], [middle], marker=entry.sample, color=entry.colour,
                    markerfacecolor=face, markersize=6, markeredgewidth=1.5,
                )
            )  # fmt: skip
        for line in lines:
            height_on_page = (top - line_height(NOTE) / 2) / page[1]
            figure.text(
                (left + _INDENT) / page[0], height_on_page, line, size=NOTE, va="center", color=INK, parse_math=False
            )
            top -= line_height(NOTE)
        top -= _GAP


def _lines(entry: Entry, width: float) -> list[str]:
    return wrapped(entry.text, NOTE, width - _INDENT) or [""]
