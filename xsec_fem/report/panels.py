"""A page of several panels: headings on top, charts and drawings side by side at given places, notes below."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from xsec_fem.report.lettering import line_height, wrapped
from xsec_fem.report.numbers import number
from xsec_fem.report.sheet import DPI, INK, NOTE, SUBTITLE, TITLE, Box, write_texts

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.axis import Axis
    from matplotlib.figure import Figure

_EDGE = 0.15  # margin round everything [in]


def panel_page(panels: Sequence[Box], headings: Sequence[str], notes: Sequence[str]) -> tuple[Figure, list[Axes]]:
    """Return a page at 150 dpi with one axes a panel (left, bottom, width, height) [in].

    The panels' own corner (0, 0) goes above the notes and inside the margin: leave room for tick labels in their places.
    """
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    width = max(left + across for left, _, across, _ in panels) + 2 * _EDGE
    top = max(bottom + height for _, bottom, _, height in panels)
    title = wrapped(headings[0], TITLE, width - 2 * _EDGE, bold=True)
    subtitles = [line for text in headings[1:] for line in wrapped(text, SUBTITLE, width - 2 * _EDGE)]
    lines = [line for text in notes for line in wrapped(text, NOTE, width - 2 * _EDGE)]
    base = _EDGE + len(lines) * line_height(NOTE) + 0.08
    above = 0.1 + len(title) * line_height(TITLE) + len(subtitles) * line_height(SUBTITLE) + 2 * _EDGE
    size = (width, base + top + above)
    figure = Figure(figsize=size, dpi=DPI, facecolor="white")
    FigureCanvasAgg(figure)
    write_texts(figure, size, (title, subtitles, lines))
    axes = [
        figure.add_axes(((left + _EDGE) / width, (bottom + base) / size[1], across / width, height / size[1]))
        for left, bottom, across, height in panels
    ]
    for one in axes:
        plain_axes(one)
    return figure, axes


def plain_axes(axes: Axes) -> None:
    """Give axes the ticks and thin grey frame of all pictures."""
    from matplotlib.ticker import FuncFormatter

    for axis in (axes.xaxis, axes.yaxis):
        axis.set_major_formatter(FuncFormatter(lambda value, _, axis=axis: number(value, 5, _span(axis))))
    axes.tick_params(labelsize=NOTE, colors=INK, width=0.6, length=3, which="both")
    for spine in axes.spines.values():
        spine.set(linewidth=0.5, color="#999999")


def _span(axis: Axis) -> float:
    """What the axis shows, to tell zero from round-off."""
    low, high = axis.get_view_interval()
    return abs(float(high) - float(low))


def name_axes(axes: Axes, x: str, y: str) -> None:
    """Write the names of both axes, units in brackets."""
    axes.set_xlabel(x, size=SUBTITLE, color=INK)
    axes.set_ylabel(y, size=SUBTITLE, color=INK)


def quiet_grid(axes: Axes) -> None:
    """Draw a pale grid below everything."""
    axes.set_axisbelow(True)
    axes.grid(True, color="#e3e3e3", linewidth=0.5)
