"""Shear stress against the depth along V: mean and largest of the field, and the formula, beside the section's outline."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.sweep import Sweep
from xsec_fem.report.numbers import number
from xsec_fem.report.panels import name_axes, panel_page, quiet_grid
from xsec_fem.report.section_canvas import Canvas, actions_line, fill_parts
from xsec_fem.report.sheet import NOTE
from xsec_fem.report.wording import is_twisted
from xsec_fem.results import CaseResult, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

FloatArray = npt.NDArray[np.float64]

_CHART = 4.4  # width of the chart [in]
_HIGHEST, _LOWEST = 4.6, 2.8  # of both panels [in]
_WIDEST, _NARROWEST = 4.6, 1.3  # of the section's panel [in]
_LEFT, _BELOW, _GAP, _KEY = (
    0.85,
    0.55,
    0.35,
    0.5,
)  # room for labels, between the panels, and for the key above the chart
_MARGIN = 0.3  # beside the section, both sides together [in]
_ROOM = 0.04  # of the depth, above and below the section
_NO_ROOM = 0.25  # share of the chart's width that a number on the left of a point needs
_AXIS = 1e-9  # sine below which V lies along an axis
FORMULA, MEAN, LARGEST, ACROSS = "#111111", "#8fbbe0", "#b2182b", "#e08214"


@dataclass(frozen=True)
class _View:
    """The section turned so that V's line is upright: up (2,) unit vector, its name, places turned (n, 2)."""

    up: FloatArray
    name: str

    @classmethod
    def of(cls, direction: FloatArray) -> _View:
        """Along V or against it, so that up stays up (and right becomes up for a horizontal V)."""
        y, z = direction
        flip = z < -_AXIS or (abs(z) <= _AXIS and y < 0)
        name = "z" if abs(y) <= _AXIS else "y" if abs(z) <= _AXIS else "along V, d"
        return cls(-direction if flip else direction, name)

    def turned(self, places: FloatArray) -> FloatArray:
        """(n, 2): across V and along it [mm]."""
        return np.column_stack([places @ [self.up[1], -self.up[0]], places @ self.up])


@dataclass(frozen=True)
class _Outline:
    """How the section goes into its panel: height and width [in], limits across V and along it [mm], whether it is squeezed."""

    height: float
    width: float
    across: tuple[float, float]
    along: tuple[float, float]
    squeezed: bool

    @classmethod
    def of(cls, places: FloatArray) -> _Outline:
        """Both to one scale, as high as the width allows; a section wider than that is squeezed. places (n, 2) turned [mm]."""
        (left, low), (right, high) = places.min(axis=0).tolist(), places.max(axis=0).tolist()
        room = _ROOM * (high - low)
        depth, across = high - low + 2 * room, right - left
        height = min(_HIGHEST, max(_LOWEST, (_WIDEST - _MARGIN) / across * depth))
        natural = across * height / depth + _MARGIN
        width = min(max(natural, _NARROWEST), _WIDEST)
        squeezed = natural > _WIDEST * (1 + 1e-9)  # round-off when the height was chosen to fit
        half = (across * 1.06 if squeezed else width * depth / height) / 2
        middle = (left + right) / 2
        return cls(height, width, (middle - half, middle + half), (low - room, high + room), squeezed)


def depth_figure(result: Result, case: CaseResult, canvas: Canvas) -> Figure | None:
    """Return the chart of one case, 150 dpi, stresses and lengths in the file's units; None in a case without shear."""
    if case.comparison is None:
        return None
    units, sweep = result.section.units, case.comparison.sweep
    view = _View.of(sweep.crossings.normal)
    shape = _Outline.of(view.turned(canvas.mesh.places))
    headings = [
        result.section.title or "Section",
        f"{case.name}: shear stress on straight cuts perpendicular to V, against the depth [{units.stress}]",
        actions_line(result, case),
    ]
    right, top = _LEFT + shape.width + _GAP, _BELOW + shape.height
    panels = [
        (_LEFT, _BELOW, shape.width, shape.height),
        (right, _BELOW, _CHART, shape.height),
        (right, top, _CHART, _KEY),
    ]
    notes = _notes(view, shape.squeezed, is_twisted(result, case))
    figure, (outline, chart, key) = panel_page(panels, headings, notes)
    outline.set_xlim(shape.across)
    for axes in (outline, chart):
        axes.set_ylim(shape.along)
    _draw_outline(outline, canvas, view, case)
    name_axes(outline, f"{'y' if view.name == 'z' else 'across V'} [{units.length}]", f"{view.name} [{units.length}]")
    _draw_curves(chart, sweep, view)
    name_axes(chart, f"shear stress [{units.stress}]", "")
    chart.tick_params(labelleft=False)
    _draw_key(key, chart)
    return figure


def _draw_key(axes: Axes, chart: Axes) -> None:
    axes.set_axis_off()
    axes.legend(
        *chart.get_legend_handles_labels(), ncols=2, loc="lower left", fontsize=NOTE, frameon=False, borderaxespad=0.0,
        bbox_to_anchor=(0.0, 0.08), handlelength=2.2, columnspacing=1.2,
    )  # fmt: skip


def _draw_outline(axes: Axes, canvas: Canvas, view: _View, case: CaseResult) -> None:
    """The parts, and an arrow along V."""
    fill_parts(axes, [view.turned(loop) for loop in canvas.mesh.loops], "#dfe5ea")
    forces = case.forces
    upward = float(view.up @ [forces.Vy, forces.Vz]) > 0
    low, high = axes.get_ylim()
    ends = [low + 0.38 * (high - low), low + 0.62 * (high - low)]
    x = float(np.mean(axes.get_xlim()))
    axes.annotate(
        "", (x, ends[1] if upward else ends[0]), (x, ends[0] if upward else ends[1]), zorder=6,
        arrowprops={"arrowstyle": "-|>", "color": "#08519c", "linewidth": 1.6, "mutation_scale": 12},
    )  # fmt: skip
    axes.annotate(
        "V", (x, sum(ends) / 2), (7, 0), textcoords="offset points", size=NOTE, color="#08519c", weight="bold",
        va="center", zorder=7, bbox={"boxstyle": "round,pad=0.15", "facecolor": "white", "edgecolor": "none", "alpha": 0.8},
    )  # fmt: skip


def _draw_curves(axes: Axes, sweep: Sweep, view: _View) -> None:
    """Four curves; the largest value of field and formula written beside them."""
    depth = sweep.levels * float(np.sign(view.up @ sweep.crossings.normal))
    largest, formula = sweep.largest, sweep.elementary
    axes.axvline(0.0, color="#999999", linewidth=0.5)
    axes.plot(sweep.mean, depth, color=MEAN, linewidth=4.0, solid_capstyle="butt", label="field, mean over the cut")
    axes.plot(formula, depth, color=FORMULA, linewidth=1.3, linestyle="--", label="V S/(I t)", zorder=4)
    axes.plot(sweep.largest_across, depth, color=ACROSS, linewidth=1.0, label="field, largest component along V")
    axes.plot(largest, depth, color=LARGEST, linewidth=1.3, label="field, largest |τ|")
    top = float(np.nanmax(largest))
    axes.set_xlim(min(0.0, float(np.nanmin(formula)), float(np.nanmin(sweep.mean))) - 0.02 * top, 1.22 * top)
    quiet_grid(axes)
    _write_extreme(axes, largest, depth, LARGEST, 6)
    _write_extreme(axes, formula, depth, FORMULA, -6)


def _write_extreme(axes: Axes, values: FloatArray, depth: FloatArray, colour: str, away: float) -> None:
    """A point at the value of largest size, the value `away` points to the right of it (left when negative and there is room)."""
    row = int(np.nanargmax(np.abs(values)))
    x, d = float(values[row]), float(depth[row])
    if away < 0 and x < _NO_ROOM * axes.get_xlim()[1]:
        away = -away
    axes.plot([x], [d], "o", color=colour, markersize=4, zorder=5)
    axes.annotate(
        number(x, 4), (x, d), (away, 0), textcoords="offset points", size=NOTE, color=colour, weight="bold", va="center",
        ha="left" if away > 0 else "right", zorder=6,
        bbox={"boxstyle": "round,pad=0.1", "facecolor": "white", "edgecolor": "none", "alpha": 0.8},
    )  # fmt: skip


def _notes(view: _View, squeezed: bool, twisted: bool) -> list[str]:
    turned = "" if view.name == "z" else " The section is turned so that V's line is upright."
    notes = [
        "Each cut runs through the whole section; mean and formula are counted along V and agree by equilibrium. Values within the "
        f"stated distance of corners without limit are left out.{turned}"
    ]
    if squeezed:
        notes.append("The section's width is drawn to another scale than its depth.")
    if twisted:
        notes.append("Torsion is left out of all curves.")
    return notes
