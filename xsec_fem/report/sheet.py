"""One sheet of paper: headings, a drawing at equal scale with units on its axes, notes below, all measured before drawn.

      +---------------------------------------------+
      | title                                       |
      | subtitle lines                              |
      |   +--------------------+  +--------+  +--+  |
      |   | drawing            |  | detail |  |  |  |   detail and bar only when asked for; a detail goes below
      |   |                    |  +--------+  |  |  |   a drawing that is much wider than high
      |   +--------------------+              +--+  |
      | notes                                       |
      +---------------------------------------------+

Lengths on paper are in inches, of the section in the file's unit. Text of the user is never read as mathematics ("$").
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.report.lettering import line_height, wrapped

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

DPI = 150
Box = tuple[float, float, float, float]

TITLE, SUBTITLE, NOTE = 11.0, 9.0, 8.0  # sizes of letters [pt]
INK = "#222222"

_EDGE = 0.15  # margin round everything
_LEFT, _BELOW = 0.85, 0.55  # room for the tick labels and names of the axes
_BAR, _BAR_GAP, _BAR_TEXT = 0.2, 0.25, 0.95
_DETAIL, _DETAIL_GAP = 2.6, 0.75
_LARGEST = (7.2, 5.2)  # the drawing's largest width and height
_SMALLEST = (2.6, 2.2)
_NARROWEST_PAGE = 5.6
_WIDE = 2.2  # a drawing this many times wider than high has its detail below


@dataclass(frozen=True)
class Plan:
    """Where things go, before anything is drawn.

    Attributes
    ----------
    size : width and height of the page [in].
    drawing, detail, bar : (left, bottom, width, height) [in]; detail and bar None when not asked for.
    scale : inches a unit of length.
    limits : (y min, z min, y max, z max) shown in the drawing [mm].
    title, subtitles, notes : the wrapped lines.
    """

    size: tuple[float, float]
    drawing: Box
    detail: Box | None
    bar: Box | None
    scale: float
    limits: Box
    title: list[str]
    subtitles: list[str]
    notes: list[str]


@dataclass(frozen=True)
class Sheet:
    """A page with its axes, ready to draw on."""

    figure: Figure
    axes: Axes
    detail: Axes | None
    bar: Axes | None
    plan: Plan


def paper_scale(box: Box, padding: tuple[float, float] = (0.3, 0.3)) -> float:
    """Return the scale [in/mm] at which a section with that box (y min, z min, y max, z max) is drawn."""
    width, height = box[2] - box[0], box[3] - box[1]
    return min((_LARGEST[0] - 2 * padding[0]) / width, (_LARGEST[1] - 2 * padding[1]) / height)


def make_plan(
    box: Box,
    headings: Sequence[str],
    notes: Sequence[str],
    *,
    padding: tuple[float, float] = (0.3, 0.3),
    bar: bool = False,
    detail: bool = False,
    side: float = 0.0,
    least_height: float = 0.0,
) -> Plan:
    """Return the plan of a page for a section with that box [mm]: title, then subtitles, as `headings`.

    `padding` is the empty room at each side of the section, `side` that to the right of the drawing, for a legend;
    the drawing is at least `least_height` high [in].
    """
    scale = paper_scale(box, padding)
    sizes = [(box[2] - box[0]) * scale + 2 * padding[0], (box[3] - box[1]) * scale + 2 * padding[1]]
    width, height = (
        max(size, least) for size, least in zip(sizes, (_SMALLEST[0], max(_SMALLEST[1], least_height)), strict=True)
    )
    below = detail and width > _WIDE * height
    right = _BAR_GAP + _BAR + _BAR_TEXT if bar else 0.2
    if detail and not below:
        right += _DETAIL_GAP + _DETAIL
    page_width = max(_NARROWEST_PAGE, _EDGE + _LEFT + width + right + side + _EDGE)
    text_width = page_width - 2 * _EDGE
    title = wrapped(headings[0], TITLE, text_width, bold=True)
    subtitles = [line for text in headings[1:] for line in wrapped(text, SUBTITLE, text_width)]
    note_lines = [line for text in notes for line in wrapped(text, NOTE, text_width)]

    bottom = _EDGE + len(note_lines) * line_height(NOTE) + _BELOW
    lower = _DETAIL + _DETAIL_GAP if below else 0.0
    top = 0.1 + len(title) * line_height(TITLE) + len(subtitles) * line_height(SUBTITLE) + _EDGE
    page = (page_width, bottom + lower + height + top)
    drawing = (_EDGE + _LEFT, bottom + lower, width, height)
    detail_box = None
    if below:
        detail_box = (_EDGE + _LEFT, bottom, min(width, 1.6 * _DETAIL), _DETAIL)
    elif detail:
        detail_box = (
            drawing[0] + width + _DETAIL_GAP,
            drawing[1] + max(0.0, height - _DETAIL) / 2,
            _DETAIL,
            min(_DETAIL, height),
        )
    bar_left = (detail_box[0] + _DETAIL if detail_box and not below else drawing[0] + width) + _BAR_GAP
    bar_box = (bar_left, drawing[1], _BAR, height) if bar else None
    middle = ((box[0] + box[2]) / 2, (box[1] + box[3]) / 2)
    half = (width / scale / 2, height / scale / 2)
    limits = (middle[0] - half[0], middle[1] - half[1], middle[0] + half[0], middle[1] + half[1])
    return Plan(page, drawing, detail_box, bar_box, scale, limits, title, subtitles, note_lines)


def make_sheet(plan: Plan, length_unit: str) -> Sheet:
    """Return an empty page with the texts written and the axes in place, labelled "y [mm]" and "z [mm]"."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    figure = Figure(figsize=plan.size, dpi=DPI, facecolor="white")
    FigureCanvasAgg(figure)
    axes = figure.add_axes(_share(plan.drawing, plan.size))
    _set_view(axes, plan.limits, length_unit)
    detail = figure.add_axes(_share(plan.detail, plan.size)) if plan.detail else None
    bar = figure.add_axes(_share(plan.bar, plan.size)) if plan.bar else None
    write_texts(figure, plan.size, (plan.title, plan.subtitles, plan.notes))
    return Sheet(figure, axes, detail, bar, plan)


def show_window(axes: Axes, centre: tuple[float, float], height: float, length_unit: str) -> Box:
    """Point axes at a window of that height [mm] about `centre`, at equal scale; return its (y0, z0, y1, z1)."""
    place = axes.get_position()
    page = axes.figure.get_size_inches()  # type: ignore[union-attr]
    half = (height / 2 * place.width * page[0] / (place.height * page[1]), height / 2)
    box = (centre[0] - half[0], centre[1] - half[1], centre[0] + half[0], centre[1] + half[1])
    _set_view(axes, box, length_unit)
    return box


def _share(box: Box, page: tuple[float, float]) -> Box:
    return box[0] / page[0], box[1] / page[1], box[2] / page[0], box[3] / page[1]


def _set_view(axes: Axes, box: Box, length_unit: str) -> None:
    from matplotlib.ticker import FuncFormatter, MaxNLocator

    axes.set_xlim(box[0], box[2])
    axes.set_ylim(box[1], box[3])
    axes.set_aspect("equal", adjustable="box")
    place, page = axes.get_position(), axes.figure.get_size_inches()  # type: ignore[union-attr]
    inches = (place.width * page[0], place.height * page[1])
    for axis, room, name in zip((axes.xaxis, axes.yaxis), inches, "yz", strict=True):
        axis.set_major_locator(MaxNLocator(max(2, min(7, int(room / 0.75))), steps=[1, 2, 2.5, 5, 10]))
        axis.set_label_text(f"{name} [{length_unit}]", size=SUBTITLE)
    span = min(box[2] - box[0], box[3] - box[1])
    decimals = max(0, int(np.ceil(1.5 - np.log10(span))))
    axes.xaxis.set_major_formatter(FuncFormatter(lambda value, _: _tick(value, decimals)))
    axes.yaxis.set_major_formatter(FuncFormatter(lambda value, _: _tick(value, decimals)))
    axes.tick_params(labelsize=NOTE, colors=INK, width=0.6, length=3)
    for spine in axes.spines.values():
        spine.set(linewidth=0.5, color="#999999")


def _tick(value: float, decimals: int) -> str:
    text = f"{value:.{decimals}f}"
    text = text.rstrip("0").rstrip(".") if "." in text else text
    return "0" if text == "-0" else text


def write_texts(
    figure: Figure, size: tuple[float, float], texts: tuple[Sequence[str], Sequence[str], Sequence[str]]
) -> None:
    """Write title and subtitles from the top of a page of that size [in] down, and notes above its lower edge."""
    left, height = _EDGE / size[0], size[1]
    title, subtitles, notes = texts
    top = height - 0.1
    for lines, letters, weight in ((title, TITLE, "bold"), (subtitles, SUBTITLE, "normal")):
        for line in lines:
            figure.text(left, top / height, line, size=letters, weight=weight, va="top", color=INK, parse_math=False)
            top -= line_height(letters)
    base = _EDGE + len(notes) * line_height(NOTE)
    for line in notes:
        figure.text(left, base / height, line, size=NOTE, va="top", color=INK, parse_math=False)
        base -= line_height(NOTE)
