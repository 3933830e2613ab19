"""Where V S/(I t) is wrong: elasticity over elementary at every node, in bands at the verdict's limits."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.compare import Comparison, Limits, ratio_field
from xsec_fem.report.marks import Mark, draw_marks
from xsec_fem.report.numbers import number, point
from xsec_fem.report.ratio_scale import FARTHEST, RatioScale, ratio_scale
from xsec_fem.report.section_canvas import Canvas, actions_line, detail_place, draw_rings, open_detail
from xsec_fem.report.sheet import INK, NOTE, SUBTITLE, Box, Sheet, make_plan, make_sheet
from xsec_fem.report.stress_picture import RASTERISE_ABOVE
from xsec_fem.report.wording import is_twisted, section_size
from xsec_fem.results import CaseResult, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

FloatArray = npt.NDArray[np.float64]

_RINGS = 2  # triangles from the mask's edge inward in which the ratio is carried on: the edge runs through the first
_MASK, _HATCH = "#e6e6e6", "#b5b5b5"


@dataclass(frozen=True)
class _Map:
    """Ratio (S,) and |tau| over its largest (S,) at the nodes, and the bands."""

    ratio: FloatArray
    share: FloatArray
    scale: RatioScale
    small: float


def ratio_figure(result: Result, case: CaseResult, canvas: Canvas) -> Figure | None:
    """Return the map of one case, 150 dpi, lengths in the file's unit; None in a case without shear."""
    if case.comparison is None or case.verdict is None:
        return None
    units, comparison = result.section.units, case.comparison
    drawn = _map(comparison, canvas)
    marks = _marks(case)
    focus = detail_place(marks[0], result, canvas.mesh) if marks else None
    headings = [
        result.section.title or "Section",
        f"{case.name}: |τ| by elasticity over V S/(I t), ratio [-]; verdict: {case.verdict.grade}",
        actions_line(result, case),
    ]
    plan = make_plan(canvas.mesh.box, headings, _notes(result, case, marks), bar=True, detail=focus is not None)
    sheet = make_sheet(plan, units.length)
    views = [(sheet.axes, plan.limits, plan.scale)]
    if focus is not None and sheet.detail is not None:
        views.append(open_detail(sheet, focus, units.length))
    filled = [_draw(axes, box, inches, canvas, drawn, result) for axes, box, inches in views]
    for axes, box, inches in views:
        draw_marks(axes, [mark for mark in marks if mark.inside(box)], box, inches)
    _colour_bar(sheet, filled[0], drawn.scale)
    return sheet.figure


def _map(comparison: Comparison, canvas: Canvas) -> _Map:
    tau = comparison.solved.fields.combine(comparison.forces).tau
    clear = canvas.mesh.clear if canvas.mesh.clear.any() else np.ones(len(tau), bool)
    share, small = tau / tau[clear].max(), comparison.limits.small
    with np.errstate(invalid="ignore"):
        ratio = ratio_field(comparison.solved, comparison.forces, small=0.0)
    ratio = np.clip(np.nan_to_num(ratio, nan=1.0, posinf=FARTHEST), 1 / FARTHEST, FARTHEST)
    counted = ratio[clear & (share >= small)]
    low, high = (float(counted.min()), float(counted.max())) if len(counted) else (1.0, 1.0)
    scale = ratio_scale(low, high, comparison.limits)
    return _Map(_carried_on(ratio, share >= small, canvas.mesh.triangles), share, scale, small)


def _carried_on(ratio: FloatArray, known: npt.NDArray[np.bool_], triangles: npt.NDArray[np.int64]) -> FloatArray:
    """The ratio (S,) with nodes under the mask set to what their neighbours have, so that bands reach the mask undistorted.

    There both stresses go to zero and their ratio is round-off.
    """
    logs, known = np.where(known, np.log(ratio), 0.0), known.copy()
    for _ in range(_RINGS):
        sums, counts = logs[triangles].sum(axis=1), known[triangles].sum(axis=1)
        total = np.bincount(triangles.ravel(), np.repeat(sums, 3), len(ratio))
        count = np.bincount(triangles.ravel(), np.repeat(counts, 3), len(ratio))
        new = ~known & (count > 0)
        logs[new] = total[new] / count[new]
        known |= new
    result: FloatArray = np.exp(logs)
    return result


def _marks(case: CaseResult) -> list[Mark]:
    """The verdict's worst place of either side, the unsafe one first."""
    if case.verdict is None:
        return []
    found = [finding for finding in (case.verdict.too_low, case.verdict.too_high) if finding and finding.elementary]
    return [Mark(finding.ratio, *finding.at, finding.name) for finding in found if finding.grade != "good"]


def _draw(axes: Axes, box: Box, inches: float, canvas: Canvas, drawn: _Map, result: Result) -> Any:
    """Fill one view: bands, the hatched mask, outlines, rings; return what the colour bar needs."""
    import matplotlib
    from matplotlib.collections import LineCollection

    filled = axes.tricontourf(
        canvas.triangulation, drawn.ratio, levels=drawn.scale.levels, colors=drawn.scale.colours, extend="both"
    )
    rasterised = len(canvas.mesh.triangles) > RASTERISE_ABOVE
    filled.set_edgecolor("face")
    filled.set_linewidth(0.2)
    filled.set_rasterized(rasterised)
    if (drawn.share < drawn.small).any():
        with matplotlib.rc_context({"hatch.color": _HATCH, "hatch.linewidth": 0.6}):
            mask = axes.tricontourf(
                canvas.triangulation, drawn.share, levels=[-1.0, drawn.small], colors=[_MASK], hatches=["////"]
            )
        mask.set_rasterized(rasterised)
    wall = float(canvas.mesh.walls.min()) * inches * 72
    width = float(np.clip(0.12 * wall, 0.15, 0.8))
    axes.add_collection(LineCollection(canvas.mesh.loops, colors=INK, linewidths=width))
    draw_rings(axes, box, inches, result)
    return filled


def _colour_bar(sheet: Sheet, filled: Any, scale: RatioScale) -> None:
    from matplotlib.ticker import FuncFormatter, NullLocator

    bar = sheet.figure.colorbar(filled, cax=sheet.bar, ticks=scale.levels, spacing="uniform")
    bar.ax.yaxis.set_minor_locator(NullLocator())
    bar.ax.yaxis.set_major_formatter(FuncFormatter(lambda value, _: number(value, 3)))
    bar.ax.tick_params(labelsize=NOTE, colors=INK, width=0.6, length=3)
    bar.set_label("ratio [-], steps on a log scale", size=SUBTITLE, color=INK)
    bar.outline.set_linewidth(0.5)


def _notes(result: Result, case: CaseResult, marks: list[Mark]) -> list[str]:
    units, size = result.section.units, section_size(result)
    limits = case.comparison.limits if case.comparison else Limits()
    findings = (case.verdict.too_low, case.verdict.too_high) if case.verdict and marks else ()
    notes = [
        f"{finding.side.capitalize()} most in {finding.name} at (y, z) = {point(*finding.at, size, 4)} {units.length}: "
        f"elasticity {number(finding.elasticity, 4)} {units.stress}, V S/(I t) {number(finding.elementary, 4)} {units.stress}."
        for finding in findings
        if finding and finding.grade != "good"
    ]
    notes.append(
        f"White: within {100 * limits.good:g} %. Red: the formula is too low (unsafe); blue: too high; palest within "
        f"{100 * limits.care:g} %. Hatched: |τ| below {100 * limits.small:g} % of its largest, where a ratio says nothing."
    )
    cut = "V S/(I t): of the straight cut through the whole section, perpendicular to V, through the point."
    notes.append(cut + (" Torsion is left out on both sides." if is_twisted(result, case) else ""))
    return notes
