"""The sketch of a section: parts, joints, cuts, probes, axes, overall dimensions; after solving its centres and loads."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section
from xsec_fem.report.numbers import point
from xsec_fem.report.part_labels import PartLabel, part_labels
from xsec_fem.report.part_outlines import PartOutline, SharedLine, bounding_box, part_outlines, shared_lines
from xsec_fem.report.sheet import INK, NOTE, Box, make_plan, make_sheet
from xsec_fem.report.sketch_legend import Entry, draw_legend, legend_height
from xsec_fem.report.sketch_marks import (
    axes_entries,
    draw_axes,
    draw_dimensions,
    draw_loads,
    draw_principal_axes,
    load_arrows,
)
from xsec_fem.report.wording import actions_text, load_point_text
from xsec_fem.results import Properties

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

LIGHT = (
    "#cfe2f3", "#fce5cd", "#d9ead3", "#ead1dc", "#fff2cc", "#d0e0e3", "#e6d5c3", "#dcd6f7", "#f4cccc", "#e2e2e2",
)  # fmt: skip
JOINT_COLOUR, CUT_COLOUR, PROBE_COLOUR = "#b30000", "#5b2c83", "#0b6623"

_PADDING = (0.85, 0.8)
_SIDE = 3.1  # width of the legend [in]
_FARTHEST = 1.0  # points farther from the section than this many times its size are left out of the picture
_MOST_PARTS = 40  # named in the legend; more only get their number


def sketch_figure(section: Section, mesh: Mesh | None = None, properties: Properties | None = None) -> Figure | None:
    """Return the sketch at 150 dpi, lengths in the file's unit; None when no part can be drawn without its mesh.

    With `properties` the centroid, the principal axes, the shear centre and the loads are drawn too.
    """
    outlines = part_outlines(section, mesh)
    if not outlines:
        return None
    box = bounding_box(outlines)
    arrows = load_arrows(section, properties)
    view, left_out = _view(box, [place for place, _, _ in arrows], properties)
    lines = _joint_lines(section, outlines)
    entries = _entries(section, outlines, properties, max(box[2] - box[0], box[3] - box[1]))
    headings, notes = [section.title or "Section", _subtitle(section)], _notes(section, outlines, properties)
    notes += ["The shear centre or a load point lies too far away to be shown."] if left_out else []
    plan = make_plan(view, headings, notes, padding=_PADDING, side=_SIDE, least_height=legend_height(entries, _SIDE))
    sheet = make_sheet(plan, section.units.length)
    _draw_parts(sheet.axes, outlines, plan.scale)
    _draw_lines(sheet.axes, section, lines)
    draw_dimensions(sheet.axes, box, plan.scale, section.units.length)
    taken = draw_axes(sheet.axes, box, plan.scale)
    if properties is not None:
        taken += draw_principal_axes(sheet.axes, properties, box, plan.scale)
    taken += draw_loads(sheet.axes, arrows, plan.scale)
    taken += [probe.at for probe in section.probes]
    for label in part_labels(outlines, plan.scale, box[2], taken):
        _draw_label(sheet.axes, label)
    draw_legend(sheet, entries, _SIDE)
    return sheet.figure


def _view(box: Box, places: list[Point], properties: Properties | None) -> tuple[Box, bool]:
    """The box to show: the section, its shear centre and load points; True when one is too far away to be shown [mm]."""
    wanted = places + ([(properties.ysc, properties.zsc)] if properties is not None else [])
    reach = _FARTHEST * max(box[2] - box[0], box[3] - box[1])
    near = [
        (y, z) for y, z in wanted if box[0] - reach <= y <= box[2] + reach and box[1] - reach <= z <= box[3] + reach
    ]
    y, z = [box[0], box[2], *(p[0] for p in near)], [box[1], box[3], *(p[1] for p in near)]
    return (min(y), min(z), max(y), max(z)), len(near) < len(wanted)


def _subtitle(section: Section) -> str:
    file = f"{section.path.name}; " if section.path else ""
    return f"{file}units {section.units.name}"


def _notes(section: Section, outlines: list[PartOutline], properties: Properties | None) -> list[str]:
    notes = ["y to the right, z up; x points at you."]
    if len(outlines) < len(section.parts):
        notes.append("Parts that come from a mesh file are not drawn here.")
    if properties is None and section.actions:
        notes.append("Centroid, shear centre and loads through them are known after solving.")
    return notes


def _joint_lines(section: Section, outlines: list[PartOutline]) -> list[SharedLine]:
    """The lines along which the sides of a declared joint touch."""
    if not section.joints:
        return []
    return [
        line
        for line in shared_lines(outlines)
        if any(
            (line.parts[0] in joint.first and line.parts[1] in joint.second)
            or (line.parts[1] in joint.first and line.parts[0] in joint.second)
            for joint in section.joints
        )
    ]


def _entries(section: Section, outlines: list[PartOutline], properties: Properties | None, size: float) -> list[Entry]:
    units = section.units
    shown = outlines[:_MOST_PARTS]
    entries = [
        Entry("part", f"{part.name} ({part.material})", str(part.number), LIGHT[(part.number - 1) % len(LIGHT)])
        for part in shown
    ]
    if len(outlines) > len(shown):
        entries.append(Entry("text", f"and {len(outlines) - len(shown)} more parts"))
    entries += axes_entries(properties, units, size)
    if section.joints:
        names = ", ".join(joint.name for joint in section.joints)
        entries.append(Entry("line", f"joint{'s' if len(section.joints) > 1 else ''}: {names}", "-", JOINT_COLOUR))
    entries += [Entry("line", f"cut {_letter(k)}: {cut.name}", "--", CUT_COLOUR) for k, cut in enumerate(section.cuts)]
    entries += [
        Entry("mark", f"probe p{k + 1}: {probe.name} {point(*probe.at, size)} {units.length}", "x", PROBE_COLOUR)
        for k, probe in enumerate(section.probes)
    ]
    entries += [
        Entry("text", f"{case.name}: {actions_text(case, units)} {load_point_text(case, units)}".strip())
        for case in section.actions
    ]
    return entries


def _letter(k: int) -> str:
    return chr(ord("a") + k % 26) + ("" if k < 26 else str(k // 26))


def _draw_parts(axes: Axes, outlines: list[PartOutline], scale: float) -> None:
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    inner = {outline.name for outline in outlines if outline.embedded_in}
    for outline in sorted(outlines, key=lambda outline: outline.name in inner):
        loops = [_turned(loop, k == 0) for k, loop in enumerate(outline.loops)]
        path = Path.make_compound_path(*(Path(np.vstack([loop, loop[:1]]), closed=True) for loop in loops))
        width = float(np.clip(0.12 * outline.wall * scale * 72, 0.2, 0.8))
        colour = LIGHT[(outline.number - 1) % len(LIGHT)]
        axes.add_patch(PathPatch(path, facecolor=colour, edgecolor=INK, linewidth=width, zorder=1))


def _turned(loop: np.ndarray, counter_clockwise: bool) -> np.ndarray:
    """The outer loop counter-clockwise and holes clockwise, so that holes stay empty."""
    y, z = loop.T
    area = float(np.dot(y, np.roll(z, -1)) - np.dot(z, np.roll(y, -1)))
    return loop if (area > 0) == counter_clockwise else loop[::-1]


def _draw_lines(axes: Axes, section: Section, joints: list[SharedLine]) -> None:
    for line in joints:
        for piece in line.pieces:
            axes.plot(*piece.T, color=JOINT_COLOUR, linewidth=2.2, solid_capstyle="butt", zorder=3)
    for k, cut in enumerate(section.cuts):
        axes.plot(*zip(cut.start, cut.end, strict=True), color=CUT_COLOUR, linewidth=1.4, linestyle="--", zorder=4)
        _tag(axes, _letter(k), cut.start, CUT_COLOUR)
    for k, probe in enumerate(section.probes):
        axes.plot(*probe.at, "x", color=PROBE_COLOUR, markersize=6, markeredgewidth=1.5, zorder=6)
        _tag(axes, f"p{k + 1}", probe.at, PROBE_COLOUR)


def _tag(axes: Axes, text: str, at: tuple[float, float], colour: str) -> None:
    axes.annotate(text, at, (4, 4), textcoords="offset points", size=NOTE, color=colour, weight="bold", zorder=7)


def _draw_label(axes: Axes, label: PartLabel) -> None:
    if label.anchor is not None:
        axes.plot(*zip(label.anchor, label.place, strict=True), color=INK, linewidth=0.5, zorder=7)
    axes.text(
        *label.place, str(label.number), size=NOTE, ha="center", va="center", color=INK, zorder=8,
        bbox={"boxstyle": "circle,pad=0.2", "facecolor": "white", "edgecolor": INK, "linewidth": 0.6},
    )  # fmt: skip
