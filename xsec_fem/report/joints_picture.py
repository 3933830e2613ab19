"""The joints of one case: where they are and how much flows through each, and the stress across the width of each."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np
import numpy.typing as npt

from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section
from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.report.joint_profiles import along, chained
from xsec_fem.report.numbers import number
from xsec_fem.report.panels import name_axes, panel_page, quiet_grid
from xsec_fem.report.section_canvas import Canvas, actions_line, fill_parts
from xsec_fem.report.sheet import INK, NOTE, SUBTITLE, Box
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
    for axes, (joint, colour, place) in zip(charts, ((j, _colour(k), k + 1) for k, j in enumerate(shown)), strict=True):
        _draw_chart(axes, result, joint, colour, place)
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


def _draw_chart(axes: Axes, result: Result, joint: JointResult, colour: str, place: int) -> None:
    units = result.section.units
    labels = _bond_labels(joint) if joint.profiles else []
    title = f"{place}  {joint.name}: {number(joint.flow, 4)} {units.flow}"
    axes.set_title(title, size=SUBTITLE, color=colour, loc="left", parse_math=False, pad=15.0 if labels else 6.0)
    quiet_grid(axes)
    if joint.kind == "fasteners":
        _draw_rows(axes, joint, colour)
        name_axes(axes, "", f"flow [{units.flow}]")
        return
    for k, profile in enumerate(joint.profiles):
        start = (joint.bonds[k].root_distance or 0.0) if joint.bonds else 0.0
        for number_, (places, across) in enumerate(chained(profile)):
            axes.plot(
                along(places) + start, across, color=colour, linewidth=1.3, linestyle=("-", "--", ":", "-.")[k % 4],
                label=labels[k] if labels and not number_ else None,
            )  # fmt: skip
    if joint.mean is not None and not joint.bonds:
        axes.axhline(joint.mean, color=INK, linewidth=0.8, linestyle="--")
        words = f"mean {number(joint.mean, 4)}, peak {number(joint.peak or 0.0, 4)} {units.stress}"
        axes.text(0.5, 0.45, words, size=NOTE, color=INK, ha="center", va="center", transform=axes.transAxes)
    _from_zero(axes)
    if labels:
        axes.legend(
            fontsize=NOTE - 1, frameon=False, loc="lower left", ncols=2, handlelength=1.6, bbox_to_anchor=(0.0, 1.05),
            borderaxespad=0.0, borderpad=0.0,
        )  # fmt: skip
    from_where = "from the root" if joint.bonds else "along the line"
    name_axes(axes, f"{from_where} [{units.length}]", f"τ across [{units.stress}]")


def _bond_labels(joint: JointResult) -> list[str]:
    return [bond.name + ("" if bond.share is None else f": {100 * bond.share:.1f} %") for bond in joint.bonds]


def _from_zero(axes: Axes) -> None:
    """Zero on the axis, so that how even a stress is can be seen."""
    from matplotlib.ticker import MaxNLocator

    low, high = axes.get_ylim()
    low, high = min(low, 0.0), max(high, 0.0)
    axes.set_ylim(low * 1.1, high * 1.1)
    axes.yaxis.set_major_locator(MaxNLocator(4))
    axes.xaxis.set_major_locator(MaxNLocator(5))


def _draw_rows(axes: Axes, joint: JointResult, colour: str) -> None:
    """One bar a row with its share."""
    from matplotlib.ticker import MaxNLocator

    places = np.arange(len(joint.bonds))
    flows = [bond.flow for bond in joint.bonds]
    axes.bar(places, flows, width=0.55, color=colour, alpha=0.75)
    axes.set_xticks(places, [bond.name for bond in joint.bonds])
    low, high = min(0.0, *flows), max(0.0, *flows)
    axes.set_ylim(low * 1.3, high * 1.3)
    axes.yaxis.set_major_locator(MaxNLocator(4))
    axes.set_xlim(-0.6, len(places) - 0.4)
    axes.axhline(0.0, color="#999999", linewidth=0.5)
    for x, bond in zip(places.tolist(), joint.bonds, strict=True):
        share = "" if bond.share is None else f" ({100 * bond.share:.1f} %)"
        axes.annotate(
            number(bond.flow, 4) + share, (x, bond.flow), (0, 2 if bond.flow >= 0 else -2), textcoords="offset points",
            size=NOTE - 1, ha="center", va="bottom" if bond.flow >= 0 else "top", color=INK,
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
