"""The two pictures of the validation: how far off the checks of each group are, and how fast six constants converge."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.report.panels import name_axes, panel_page, quiet_grid
from xsec_fem.report.picture_files import picture_names, require_matplotlib, save
from xsec_fem.report.sheet import INK, NOTE

from .case import Record
from .convergence import Curve, Study
from .table import by_group, counts

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

FLOOR = 1e-16  # differences that are nought are drawn here
_ROW, _WIDE, _NAMES, _BELOW = (
    0.23,
    6.2,
    3.3,
    0.5,
)  # height of a group, width of the chart, room for names and ticks [in]
_DIFFERENCE, _ALLOWED, _MISS = "#08519c", "#8c8c8c", "#b2182b"
_DEGREES = {1: "#9ecae1", 2: "#4292c6", 3: "#08519c", 4: "#b2182b", 5: "#67000d"}
_PANEL = (2.75, 2.35)
_LEFT, _GAP_Y, _GAP_Z = 0.75, 0.7, 0.85


def write_pictures(
    folder: Path, records: Sequence[Record], studied: Sequence[tuple[Study, Sequence[Curve]]]
) -> list[Path]:
    """Write differences.png and convergence.png at 150 dpi into an existing folder; return the files.

    Raises MissingLibraryError without matplotlib, OSError when a file cannot be written.
    """
    require_matplotlib()
    drawn = {"differences": differences_figure(records), "convergence": convergence_figure(studied)}
    for stem, figure in drawn.items():
        save(figure, folder / stem, svg=False)
    return [file for stem in drawn for file in picture_names(folder / stem, svg=False)]


def differences_figure(records: Sequence[Record]) -> Figure:
    """Return the differences of all checks by group on a logarithmic axis, with what is allowed of each."""
    groups = by_group(records)
    headings = ["Validation: difference between reference and result, by group", counts(records)]
    notes = [
        "A dot is a check, the bar at its height what is allowed; both are shares of the reference, or in the unit where "
        "the reference is nought or a length. Dots at the left end are equal to the last digit.",
    ]
    height = _ROW * len(groups)
    figure, (axes,) = panel_page([(_NAMES, _BELOW, _WIDE, height)], headings, notes)
    _draw_groups(axes, groups)
    return figure


def _draw_groups(axes: Axes, groups: Sequence[tuple[str, list[Record]]]) -> None:
    axes.set_xscale("log")
    for row, (_, members) in enumerate(groups):
        solved = [record for record in members if record.difference is not None]
        spread = np.linspace(-0.28, 0.28, len(solved)) if len(solved) > 1 else np.zeros(len(solved))
        for offset, record in zip(spread, solved, strict=True):
            scale, level = record.scale or 1.0, row + offset
            difference = max((record.difference or 0.0) / scale, FLOOR)
            axes.plot([record.allowed / scale], [level], "|", color=_ALLOWED, markersize=4, markeredgewidth=0.9)
            axes.plot(
                [difference], [level], "o", color=_DIFFERENCE if record.ok else _MISS, markersize=2.6, markeredgewidth=0
            )
    for row in range(1, len(groups)):
        axes.axhline(row - 0.5, color="#e3e3e3", linewidth=0.5)
    axes.set_ylim(len(groups) - 0.5, -0.5)
    axes.set_xlim(FLOOR / 2, 1.0)
    axes.set_yticks(range(len(groups)), [f"{name} ({len(members)})" for name, members in groups], size=NOTE)
    axes.tick_params(axis="y", length=0)
    quiet_grid(axes)
    axes.grid(False, axis="y")
    name_axes(axes, "difference (dots) and allowed (bars)", "")


def convergence_figure(studied: Sequence[tuple[Study, Sequence[Curve]]]) -> Figure:
    """Return six panels: relative error against the size of the triangles for the degrees 1 to 5, with the observed orders."""
    across = 3
    rows = -(-len(studied) // across)
    panels = [
        (
            _LEFT + (number % across) * (_PANEL[0] + _GAP_Y),
            0.5 + (rows - 1 - number // across) * (_PANEL[1] + _GAP_Z),
            *_PANEL,
        )
        for number in range(len(studied))
    ]
    headings = [
        "Validation: convergence of six constants",
        "Relative error against the exact value, degrees 1 to 5, even meshes",
    ]
    notes = [
        "In brackets the order in the size h, fitted to the meshes whose error is above three times what the exact value is good "
        "for. Smooth sections: 2p on straight sides; on curved ones the sides' own error, p + 1 for odd p and p + 2 for even p, "
        "where that is less. Right angles limit the order to 4, a re-entrant corner of 270 degrees to 4/3, on even meshes; meshes "
        "graded to the corners do not suffer that.",
    ]
    figure, drawn = panel_page(panels, headings, notes)
    for axes, (study, curves) in zip(drawn, studied, strict=True):
        _draw_study(axes, study, curves)
    return figure


def _draw_study(axes: Axes, study: Study, curves: Sequence[Curve]) -> None:
    from matplotlib.ticker import FuncFormatter, LogLocator, NullLocator

    for curve in curves:
        order = "" if curve.slope is None else f" ({curve.slope:.1f})"
        axes.loglog(
            curve.h, np.maximum(curve.error, FLOOR), "o-", color=_DEGREES[curve.degree], linewidth=1.2, markersize=3.5,
            label=f"p = {curve.degree}{order}",
        )  # fmt: skip
    sizes = np.array(curves[0].h)
    axes.set_xlim(sizes.min() / 1.15, sizes.max() * 1.15)
    axes.set_xticks(sizes[[0, -1]])
    axes.xaxis.set_minor_locator(NullLocator())
    axes.xaxis.set_major_formatter(FuncFormatter(lambda value, _: f"{value:.2g}"))
    low, high = axes.get_ylim()
    axes.set_ylim(low * (low / high) ** 0.3, high)  # room for the legend
    axes.yaxis.set_major_locator(LogLocator(numticks=7))
    axes.yaxis.set_minor_locator(NullLocator())
    quiet_grid(axes)
    axes.set_title(f"{study.title}: {study.quantity}", size=NOTE, color=INK, loc="left")
    axes.legend(
        fontsize=6.8, frameon=False, loc="lower center", ncols=3, borderpad=0.1, handlelength=1.2, columnspacing=1.2
    )
    name_axes(axes, "size h of the triangles [mm]", "relative error")
