"""The joints of one case: where they are and how much flows through each, and the stress across the width of each."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np
import numpy.typing as npt

from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section
from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.report.joint_charts import draw_joint_chart
from xsec_fem.report.joint_profiles import along, chained
from xsec_fem.report.panels import name_axes, panel_page
from xsec_fem.report.section_canvas import Canvas, actions_line, fill_parts
from xsec_fem.report.sheet import NOTE, Box
from xsec_fem.results import CaseResult, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

FloatArray = npt.NDArray[np.float64]

_MOST = 6  # joints with a chart of their own
_ROWS = 3  # charts above each other
_CHART = 2.7  # width of a chart [in]
_PITCH = (1.9, 2.5)  # smallest and largest distance from chart to chart upward [in]
_BETWEEN = 0.85  # of it, room for axis labels and titles [in]
_LEFT, _BELOW, _GAP = 0.85, 0.55, 0.75
_LARGEST = (4.6, 4.6)  # of the section's panel [in]
_OFFSET = 0.42  # height of the largest profile drawn on the section [in]
_LONG = 0.5  # joints longer than this on paper have their profile drawn on the section [in]
_APART = 0.24  # between the numbers of joints [in]
COLOURS = ("#b30000", "#08519c", "#1b7837", "#7b3294", "#b35806", "#00695c")
_OTHER = "#666666"


def joints_figure(result: Result, case: CaseResult, canvas: Canvas) -> Figure | None:
    """Return the picture of one case, 150 dpi, flows and stresses in the file's units; None without joints that carry."""
    shown = _shown(case)
    if not shown:
        return None
    units = result.section.units
    box, inches = canvas.mesh.box, _scale(canvas.mesh.box)
    columns = -(-len(shown) // _ROWS)
    rows = -(-len(shown) // columns)
    size = ((box[2] - box[0]) * inches + 0.9, (box[3] - box[1]) * inches + 0.9)
    pitch = min(max(_PITCH[0], (size[1] + _BETWEEN) / rows), _PITCH[1])
    height = max(size[1], rows * pitch - _BETWEEN)
    panels = [(_LEFT, _BELOW, size[0], height)]
    for k in range(len(shown)):
        left = _LEFT + size[0] + _GAP + (k // rows) * (_CHART + _GAP)
        panels.append((left, _BELOW + height + _BETWEEN - (k % rows + 1) * pitch, _CHART, pitch - _BETWEEN))
    headings = [
        result.section.title or "Section",
        f"{case.name}: flow through the joints [{units.flow}] and shear stress across them [{units.stress}]",
        actions_line(result, case),
    ]
    figure, (drawing, *charts) = panel_page(panels, headings, _notes(case, shown))
    _draw_section(drawing, canvas, box, (size[0] / inches, height / inches), units.length)
    _draw_joints(drawing, result.section, shown, inches, box)
    for k, (axes, joint) in enumerate(zip(charts, shown, strict=True)):
        draw_joint_chart(axes, joint, units, _colour(k), k + 1)
    return figure


def _shown(case: CaseResult) -> list[JointResult]:
    """The joints that carry, the most used first when there are too many, in the file's order."""
    carrying = [joint for joint in case.joints if joint.kind != "contact"]
    if len(carrying) <= _MOST:
        return carrying
    ranked = sorted(carrying, key=lambda joint: (-(joint.utilisation or 0.0), -abs(joint.flow)))[:_MOST]
    return [joint for joint in carrying if joint in ranked]


def _colour(k: int) -> str:
    return COLOURS[k % len(COLOURS)]


def _scale(box: Box) -> float:
    return min(_LARGEST[0] / (box[2] - box[0]), _LARGEST[1] / (box[3] - box[1]))


def _draw_section(axes: Axes, canvas: Canvas, box: Box, view: tuple[float, float], unit: str) -> None:
    """The outlines at equal scale, in the middle of the panel that shows `view` (width, height) [mm]."""
    from matplotlib.ticker import MaxNLocator

    fill_parts(axes, canvas.mesh.loops, "#eef1f4")
    y, z = (box[0] + box[2]) / 2, (box[1] + box[3]) / 2
    axes.set_xlim(y - view[0] / 2, y + view[0] / 2)
    axes.set_ylim(z - view[1] / 2, z + view[1] / 2)
    axes.set_aspect("equal", adjustable="box")
    axes.xaxis.set_major_locator(MaxNLocator(4, steps=[1, 2, 2.5, 5, 10]))
    axes.yaxis.set_major_locator(MaxNLocator(6, steps=[1, 2, 2.5, 5, 10]))
    name_axes(axes, f"y [{unit}]", f"z [{unit}]")


def _draw_joints(axes: Axes, section: Section, joints: Sequence[JointResult], inches: float, box: Box) -> None:
    """Each joint in its colour, with its profile where it is long enough, and its number and flow beside it."""
    most = max((float(np.abs(p.across).max()) for joint in joints for p in joint.profiles), default=0.0)
    taken: list[Point] = []
    for k, joint in enumerate(joints):
        lines = _lines_of(section, joint)
        for profile in joint.profiles:
            for places, across in chained(profile):
                if most and along(places)[-1] * inches > _LONG:
                    _draw_profile(axes, places, across * (_OFFSET / inches / most), _colour(k))
        for line in lines:
            axes.plot(*line.T, color=_colour(k), linewidth=2.2, solid_capstyle="butt", zorder=5)
            if np.hypot(*np.ptp(line, axis=0)) * inches < 0.12:
                axes.plot(*line.mean(axis=0), "o", color=_colour(k), markersize=5, zorder=5)
        _label(axes, k, np.vstack(lines), taken, inches, box)


def _lines_of(section: Section, joint: JointResult) -> list[FloatArray]:
    """Glue lines and throats, or the strips of rows [mm]."""
    if joint.kind == "fasteners":
        declared = next(one for one in section.joints if one.name == joint.name)
        return [np.array(bond.strip) for bond in declared.bonds if bond.strip is not None]
    return [places for profile in joint.profiles for places, _ in chained(profile)]


def _draw_profile(axes: Axes, places: FloatArray, height: FloatArray, colour: str) -> None:
    """The stress across, drawn as a height [mm] upright to the line, its first end to the last."""
    step = places[-1] - places[0]
    if not step.any():
        step = places[len(places) // 2] - places[0]
    normal = np.array([-step[1], step[0]]) / np.hypot(*step)
    normal = normal if normal[1] > 1e-9 or (abs(normal[1]) <= 1e-9 and normal[0] > 0) else -normal
    tops = places + np.abs(height)[:, None] * normal
    axes.fill(*np.vstack([places, tops[::-1]]).T, facecolor=colour, alpha=0.22, linewidth=0, zorder=3)
    axes.plot(*tops.T, color=colour, linewidth=1.0, zorder=4)


def _label(axes: Axes, k: int, points: FloatArray, taken: list[Point], inches: float, box: Box) -> None:
    """The joint's number to the right of its rightmost point, away from the other numbers."""
    right = points[np.argmax(points[:, 0])]
    y, z = max(float(right[0]), box[0]) + 0.2 / inches, float(right[1])
    while any(abs(z - other[1]) * inches < _APART and abs(y - other[0]) * inches < _APART for other in taken):
        z += _APART / inches
    taken.append((y, z))
    axes.text(
        y, z, str(k + 1), size=NOTE, color="white", weight="bold", ha="center", va="center", zorder=8,
        bbox={"boxstyle": "circle,pad=0.25", "facecolor": _colour(k), "edgecolor": "white", "linewidth": 0.6},
    )  # fmt: skip


def _notes(case: CaseResult, shown: Sequence[JointResult]) -> list[str]:
    notes = [
        "Flow: force per length along +x that the part named second exerts on the first; τ across counts the same way."
    ]
    if any(joint.kind == "glue" for joint in shown):
        notes.append(
            "Dashed at glue: mean over the width. On the section: the size of the stress across each line, drawn upright to it, "
            "to one scale."
        )
    if any(joint.kind == "fasteners" for joint in shown):
        notes.append(
            "Rows are strips that act without slip: their flow is exact by equilibrium, a stress beside a bolt is not told."
        )
    left_out = len(case.joints) - len(shown)
    if left_out:
        notes.append(
            f"{left_out} more in joints.csv: contact carries no shear, and of many joints the most used are drawn."
        )
    return notes
