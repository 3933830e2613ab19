"""A filled contour of one shear stress of one load case, with its extremes and the corners where it has no limit."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.report.colour_scale import ColourScale, colour_scale
from xsec_fem.report.direction_arrows import direction_arrows
from xsec_fem.report.drawing_mesh import DrawingMesh
from xsec_fem.report.marks import Mark, draw_marks
from xsec_fem.report.numbers import number, point
from xsec_fem.report.section_canvas import SMALL_RING, Canvas, actions_line, detail_place, draw_rings, open_detail
from xsec_fem.report.sheet import INK, NOTE, SUBTITLE, Box, Sheet, make_plan, make_sheet, paper_scale
from xsec_fem.report.wording import section_size
from xsec_fem.results import CaseResult, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

RASTERISE_ABOVE = 5000  # triangles in a vector file; more are stored as an image inside it

_ARROW_SPACING = 0.26  # [in]
_WORTH_MARKING = 0.1  # the extreme of the other sign is marked when above this share of the larger


@dataclass(frozen=True)
class Quantity:
    """A field to draw: key as in results.json, symbol, words, and whether it has a sign."""

    key: str
    symbol: str
    words: str
    signed: bool


QUANTITIES = (
    Quantity("tau_xz", "τxz", "shear stress along z", True),
    Quantity("tau_xy", "τxy", "shear stress along y", True),
    Quantity("tau", "|τ|", "magnitude and direction of the shear stress", False),
)


def stress_figure(result: Result, case: CaseResult, quantity: Quantity, canvas: Canvas) -> Figure:
    """Return the picture of one quantity [MPa] of one case, 150 dpi; lengths in the file's unit."""
    units, mesh = result.section.units, canvas.mesh
    values = getattr(case.stress, quantity.key)
    marks = _extremes(case, quantity, mesh)
    scale = colour_scale(values, _shown(marks, quantity), quantity.signed, case.tau_max.value)
    if scale.flat:
        marks = []
    focus = detail_place(marks[0], result, mesh) if marks else None
    headings = [
        result.section.title or "Section",
        f"{case.name}: {quantity.symbol}, {quantity.words} [{units.stress}]",
        actions_line(result, case),
    ]
    notes = [*_mark_notes(marks, quantity, result), *_notes(result, canvas, scale, quantity)]
    plan = make_plan(mesh.box, headings, notes, bar=True, detail=focus is not None)
    sheet = make_sheet(plan, units.length)
    fill = _Fill(canvas, values, scale, case, quantity.key == "tau")
    views = [(sheet.axes, plan.limits, plan.scale)]
    if focus is not None and sheet.detail is not None:
        views.append(open_detail(sheet, focus, units.length))
    filled = [fill.draw(axes, box, inches, result) for axes, box, inches in views]
    for axes, box, inches in views:
        draw_marks(axes, [mark for mark in marks if mark.inside(box)], box, inches)
    _colour_bar(sheet, filled[0], scale, f"{quantity.symbol} [{units.stress}]")
    return sheet.figure


def _extremes(case: CaseResult, quantity: Quantity, mesh: DrawingMesh) -> list[Mark]:
    """Largest value first; for a signed field its other extreme too when it is worth it."""
    if not quantity.signed:
        top = case.tau_max
        return [Mark(top.value, top.y, top.z, top.part, top.beside_corner)]
    values, clear = getattr(case.stress, quantity.key), np.flatnonzero(mesh.clear)
    clear = clear if len(clear) else np.arange(len(values))
    ends = clear[[np.argmax(values[clear]), np.argmin(values[clear])]]
    names = case.stress.part_nodes.mesh.part_names
    places = mesh.places[ends].tolist()
    marks = [Mark(float(values[k]), y, z, names[mesh.part[k]]) for k, (y, z) in zip(ends, places, strict=True)]
    marks.sort(key=lambda mark: -abs(mark.value))
    return marks[: 2 if abs(marks[1].value) > _WORTH_MARKING * abs(marks[0].value) else 1]


def _shown(marks: list[Mark], quantity: Quantity) -> tuple[float, float]:
    values = [mark.value for mark in marks]
    return (min(values), max(values)) if quantity.signed else (0.0, max(values))


def _mark_notes(marks: list[Mark], quantity: Quantity, result: Result) -> list[str]:
    units, size = result.section.units, section_size(result)
    notes = []
    for mark in marks:
        name = "Largest" if not quantity.signed else ("Highest" if mark.value > 0 else "Lowest")
        place = f"at (y, z) = {point(mark.y, mark.z, size)} {units.length}"
        tail = " It is governed by the corner beside it." if mark.beside_corner else ""
        notes.append(f"{name} {quantity.symbol} = {number(mark.value)} {units.stress} {place} in {mark.part}.{tail}")
    return notes


def _notes(result: Result, canvas: Canvas, scale: ColourScale, quantity: Quantity) -> list[str]:
    notes = []
    if scale.flat:
        notes.append(f"{quantity.symbol} is zero everywhere, to round-off.")
    if result.corners:
        distances = [corner.distance for corner in result.corners]
        reach = number(max(distances), 3)
        within = (
            f"within {reach} {result.section.units.length}" if np.ptp(distances) < 1e-9 * max(distances) else "close"
        )
        small = max(distances) * paper_scale(canvas.mesh.box) < SMALL_RING
        note = f"Rings: corners where the stress has no limit; stress not read within the ring ({within} of the corner"
        note += "; the rings are drawn larger)." if small else ")."
        beyond = (
            " Values beyond the colour bar occur only there: its end is extended." if scale.extend != "neither" else ""
        )
        notes.append(note + beyond)
    tail = " Arrows show the direction of τ, not its size." if quantity.key == "tau" else ""
    notes.append("y to the right, z up; stresses on the face that looks at you (+x)." + tail)
    return notes


@dataclass(frozen=True)
class _Fill:
    """Draws the bands, outlines, rings and arrows of one field into any number of views."""

    canvas: Canvas
    values: np.ndarray[tuple[int], np.dtype[np.float64]]
    scale: ColourScale
    case: CaseResult
    arrows: bool

    def draw(self, axes: Axes, box: Box, inches: float, result: Result) -> object:
        """Fill one view and return what the colour bar needs; `box` [mm] is what it shows, `inches` its scale [in/mm]."""
        from matplotlib.collections import LineCollection
        from matplotlib.colors import Normalize

        triangulation, scale = self.canvas.triangulation, self.scale
        filled = axes.tricontourf(
            triangulation, self.values, levels=scale.levels, cmap=scale.colours, norm=Normalize(*scale.limits),
            extend=scale.extend,
        )  # fmt: skip
        wall = float(self.canvas.mesh.walls.min()) * inches * 72
        # the bands' edges are the contour lines; they also close the hairlines that anti-aliasing leaves between bands
        filled.set_edgecolor("face" if scale.flat else "#00000099")
        filled.set_linewidth(float(np.clip(0.012 * wall, 0.05, 0.35)))
        filled.set_rasterized(len(self.canvas.mesh.triangles) > RASTERISE_ABOVE)
        width = float(np.clip(0.12 * wall, 0.15, 0.8))
        axes.add_collection(LineCollection(self.canvas.mesh.loops, colors=INK, linewidths=width))
        draw_rings(axes, box, inches, result)
        if self.arrows:
            self._directions(axes, box, inches)
        return filled

    def _directions(self, axes: Axes, box: Box, inches: float) -> None:
        places, along = direction_arrows(self.case.stress, box, _ARROW_SPACING / inches, self.case.tau_max.value)
        if len(places):
            axes.quiver(
                *places.T, *along.T, angles="xy", pivot="mid", units="inches", scale_units="inches",
                scale=1.35 / _ARROW_SPACING, width=0.012, headwidth=4, headlength=4.5, headaxislength=4,
                facecolor="white", edgecolor="black", linewidth=0.3, zorder=4,
            )  # fmt: skip


def _colour_bar(sheet: Sheet, filled: object, scale: ColourScale, label: str) -> None:
    from matplotlib.ticker import FuncFormatter, NullLocator

    ticks = scale.ticks[:: max(1, int(np.ceil(len(scale.ticks) * 0.17 / _height_of(sheet))))]
    bar = sheet.figure.colorbar(filled, cax=sheet.bar, ticks=ticks, spacing="proportional")  # type: ignore[arg-type]
    bar.ax.yaxis.set_minor_locator(NullLocator())
    reference = float(np.abs(scale.levels).max())
    bar.ax.yaxis.set_major_formatter(FuncFormatter(lambda value, _: number(value, 4, reference)))
    bar.ax.tick_params(labelsize=NOTE, colors=INK, width=0.6, length=3)
    bar.set_label(label, size=SUBTITLE, color=INK)
    bar.outline.set_linewidth(0.5)


def _height_of(sheet: Sheet) -> float:
    return sheet.plan.bar[3] if sheet.plan.bar else 1.0
