"""The chart of one joint: stress across its width, with the shares of its beads, or the flow of each row."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.report.joint_profiles import along, chained
from xsec_fem.report.numbers import number
from xsec_fem.report.panels import name_axes, quiet_grid
from xsec_fem.report.sheet import INK, NOTE, SUBTITLE
from xsec_fem.units import UnitSystem

if TYPE_CHECKING:
    from matplotlib.axes import Axes

_STYLES = ("-", "--", ":", "-.")


def draw_joint_chart(axes: Axes, joint: JointResult, units: UnitSystem, colour: str, place: int) -> None:
    """Draw the chart of a joint, its number in the drawing, name and flow above it [MPa, mm, N/mm]."""
    beads = bool(joint.profiles and joint.bonds)
    title = f"{place}  {joint.name}: {number(joint.flow, 4)} {units.flow}"
    axes.set_title(title, size=SUBTITLE, color=colour, loc="left", parse_math=False, pad=15.0 if beads else 6.0)
    quiet_grid(axes)
    if joint.kind == "fasteners":
        _draw_rows(axes, joint, colour)
        name_axes(axes, "", f"flow [{units.flow}]")
        return
    if beads:
        _draw_beads(axes, joint, colour)
    else:
        _draw_line(axes, joint, colour, units)
    _from_zero(axes)
    name_axes(axes, f"{'from the root' if beads else 'along the line'} [{units.length}]", f"τ across [{units.stress}]")


def _draw_line(axes: Axes, joint: JointResult, colour: str, units: UnitSystem) -> None:
    """The profile of a glue line, its mean and peak."""
    for profile in joint.profiles:
        for places, across in chained(profile):
            axes.plot(along(places), across, color=colour, linewidth=1.3)
    if joint.mean is None or joint.peak is None:
        return
    axes.axhline(joint.mean, color=INK, linewidth=0.8, linestyle="--")
    words = f"mean {number(joint.mean, 4)}, peak {number(joint.peak, 4)} {units.stress}"
    axes.text(0.5, 0.45, words, size=NOTE, color=INK, ha="center", va="center", transform=axes.transAxes)


def _draw_beads(axes: Axes, joint: JointResult, colour: str) -> None:
    """The profiles of all throats, and a key with the beads' shares."""
    for k, (profile, bond) in enumerate(zip(joint.profiles, joint.bonds, strict=True)):
        for places, across in chained(profile):
            start = bond.root_distance or 0.0
            axes.plot(along(places) + start, across, color=colour, linewidth=1.3, linestyle=_STYLES[k % len(_STYLES)])
    labels = [bond.name + ("" if bond.share is None else f": {100 * bond.share:.1f} %") for bond in joint.bonds]
    axes.legend(
        axes.lines, labels, fontsize=NOTE - 1, frameon=False, loc="lower left", ncols=2, handlelength=1.6,
        bbox_to_anchor=(0.0, 1.01), borderaxespad=0.0, borderpad=0.0,
    )  # fmt: skip


def _from_zero(axes: Axes) -> None:
    """Zero on the axis, so that how even a stress is can be seen."""
    from matplotlib.ticker import MaxNLocator

    low, high = axes.get_ylim()
    axes.set_ylim(min(low, 0.0) * 1.1, max(high, 0.0) * 1.1)
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
    if low < high:
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
