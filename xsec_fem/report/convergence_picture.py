"""The evidence of a series of meshes: the guaranteed error against the number of nodes, and the interval that closes on IT."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.report.numbers import number
from xsec_fem.report.panels import name_axes, panel_page, quiet_grid
from xsec_fem.report.sheet import INK, NOTE
from xsec_fem.report.trust_blocks import at_most
from xsec_fem.results import ConvergenceRow, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

_SIZE = (3.3, 3.1)  # of both panels [in]
_LEFT, _BELOW, _GAP = 0.95, 0.55, 1.1
_BESIDE = 0.07  # distance of the slope triangle below the curve, as a share of the axis
_ERROR, _INTERVAL = "#08519c", "#b2182b"


def convergence_figure(result: Result) -> Figure | None:
    """Return both panels at 150 dpi, IT in the file's unit; None without a convergence table."""
    rows = result.convergence
    if not rows:
        return None
    units = result.section.units
    degrees = sorted({row.degree for row in rows})
    what = f"triangles of degree {degrees[0]}" if len(degrees) == 1 else "one mesh, degrees 1 to 5"
    headings = [
        result.section.title or "Section",
        f"Convergence: {len(rows)} meshes, {what}; each bound is guaranteed on its own mesh",
    ]
    panels = [(_LEFT, _BELOW, *_SIZE), (_LEFT + _SIZE[0] + _GAP, _BELOW, *_SIZE)]
    figure, (errors, constants) = panel_page(panels, headings, _notes(result))
    _draw_errors(errors, rows, result.section.solve.accuracy)
    _draw_intervals(constants, rows)
    name_axes(errors, "nodes [-]", "energy error at most [-]")
    name_axes(constants, "nodes [-]", f"IT [{units.power(4)}]")
    return figure


def _draw_errors(axes: Axes, rows: Sequence[ConvergenceRow], accuracy: float) -> None:
    nodes, error = np.array([row.nodes for row in rows]), np.array([row.energy_error for row in rows])
    axes.set_xscale("log")
    axes.set_yscale("log")
    _room(axes, nodes, [*error, accuracy])
    axes.plot(nodes, error, "o-", color=_ERROR, linewidth=1.3, markersize=4.5, zorder=4)
    axes.axhline(accuracy, color=INK, linewidth=0.8, linestyle=":")
    axes.annotate(
        f"asked for: {accuracy:g}", (1.0, accuracy), (-3, 3), xycoords=("axes fraction", "data"),
        textcoords="offset points", size=NOTE, ha="right", va="bottom", color=INK,
    )  # fmt: skip
    quiet_grid(axes)
    order = _whole_order(rows)
    if order is not None:
        _slope_triangle(axes, nodes, error, order)


def _room(axes: Axes, nodes: np.ndarray, values: Sequence[float]) -> None:
    """Limits of both logarithmic axes with some room; plain numbers on both."""
    from matplotlib.ticker import FixedLocator, FuncFormatter, LogLocator, NullFormatter, NullLocator

    axes.set_xlim(nodes.min() / 1.3, nodes.max() * 1.3)
    axes.yaxis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0)))
    axes.yaxis.set_major_formatter(FuncFormatter(lambda value, _: number(value, 2)))
    axes.yaxis.set_minor_formatter(NullFormatter())
    low, high = min(values), max(values)
    room = max((high / low) ** 0.12, 1.25)
    axes.set_ylim(low / room, high * room)
    _node_ticks(axes, nodes, FixedLocator, FuncFormatter, NullLocator)


def _node_ticks(axes: Axes, nodes: np.ndarray, fixed: type, formatter: type, none: type) -> None:
    """Ticks at the meshes themselves, those too close to the one before left out."""
    kept: list[float] = []
    for value in sorted(set(nodes.tolist()), reverse=True):
        if not kept or kept[-1] / value > (nodes.max() / nodes.min()) ** 0.17:
            kept.append(value)
    axes.xaxis.set_major_locator(fixed(kept))
    axes.xaxis.set_minor_locator(none())
    axes.xaxis.set_major_formatter(formatter(lambda value, _: f"{value:.0f}"))


def _whole_order(rows: Sequence[ConvergenceRow]) -> float | None:
    """-2 d log(error)/d log(nodes) over the whole series; None when it does not fall."""
    first, last = rows[0], rows[-1]
    if last.nodes <= first.nodes or last.energy_error >= first.energy_error or last.energy_error <= 0:
        return None
    return float(-2 * np.log(last.energy_error / first.energy_error) / np.log(last.nodes / first.nodes))


def _slope_triangle(axes: Axes, nodes: np.ndarray, error: np.ndarray, order: float) -> None:
    """A triangle with the slope of the series, below it, and its order."""
    x = nodes[0] * (nodes[-1] / nodes[0]) ** np.linspace(0.1, 0.4, 9)
    slope = (x / x[0]) ** (-order / 2)
    low, high = axes.get_ylim()
    curve = np.exp(np.interp(np.log(x), np.log(nodes), np.log(error)))
    top = float((curve / slope).min()) * (low / high) ** _BESIDE
    x0, x1, drop = float(x[0]), float(x[-1]), float(slope[-1])
    axes.plot([x0, x1, x0, x0], [top, top * drop, top * drop, top], color=INK, linewidth=0.8, zorder=3)
    axes.annotate(
        f"observed\norder {order:.1f}", (x0, top * drop), (0, -4), textcoords="offset points", size=NOTE, color=INK,
        va="top", zorder=3, bbox={"boxstyle": "square,pad=0.1", "facecolor": "white", "edgecolor": "none"},
    )  # fmt: skip


def _draw_intervals(axes: Axes, rows: Sequence[ConvergenceRow]) -> None:
    from matplotlib.ticker import FixedLocator, FuncFormatter, MaxNLocator, NullLocator

    nodes = np.array([row.nodes for row in rows])
    low, high = (np.array([row.IT_interval[side] for row in rows]) for side in (0, 1))
    axes.set_xscale("log")
    axes.set_xlim(nodes.min() / 1.3, nodes.max() * 1.3)
    axes.fill_between(nodes, low, high, color=_INTERVAL, alpha=0.15, linewidth=0)
    axes.vlines(nodes, low, high, color=_INTERVAL, linewidth=1.4)
    for ends in (low, high):
        axes.plot(nodes, ends, "_", color=_INTERVAL, markersize=9, markeredgewidth=1.4)
    axes.plot(nodes, [row.IT for row in rows], "o", color=_INTERVAL, markersize=4.5)
    _node_ticks(axes, nodes, FixedLocator, FuncFormatter, NullLocator)
    span = float((high - low).max())
    digits = max(4, int(np.ceil(np.log10(float(high.max()) / span))) + 2) if span > 0 else 6
    axes.yaxis.set_major_locator(MaxNLocator(5))
    axes.yaxis.set_major_formatter(FuncFormatter(lambda value, _: number(value, digits)))
    quiet_grid(axes)


def _notes(result: Result) -> list[str]:
    last = result.convergence[-1]
    notes = [
        "Left: the largest of the bounds for unit Vy, Vz and T. The order, -2 d log(error)/d log(nodes), tends to the triangles' "
        "degree where the field is smooth; corners lower it.",
        "Right: the exact IT lies inside every bar; all bars overlap and close on it.",
    ]
    certificate = result.certificate
    if certificate is not None and not certificate.strict:
        notes.append(f"Not strict: {certificate.reason}.")
    return [*notes, f"Last mesh: {last.nodes} nodes, energy error at most {at_most(last.energy_error)}."]
