"""Marks of extremes on a picture: a point and its value beside it, kept inside the drawing."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from xsec_fem.report.lettering import text_width
from xsec_fem.report.numbers import number
from xsec_fem.report.sheet import NOTE, Box

if TYPE_CHECKING:
    from matplotlib.axes import Axes

_AWAY = 0.28  # distance of the label from its point [in]


@dataclass(frozen=True)
class Mark:
    """A value [MPa] at (y, z) [mm] in a part; `beside_corner` when a singular corner governs it."""

    value: float
    y: float
    z: float
    part: str
    beside_corner: bool = False

    def inside(self, box: Box) -> bool:
        """True when the place lies in a box (y0, z0, y1, z1) [mm]."""
        return box[0] <= self.y <= box[2] and box[1] <= self.z <= box[3]


def draw_marks(axes: Axes, marks: Sequence[Mark], box: Box, inches: float) -> None:
    """Draw each mark with its value; `box` [mm] is what the axes show, `inches` their scale [in/mm].

    A label goes toward the middle of the box, so that it is never cut off; a second one moves away from the first.
    """
    taken: list[tuple[float, float]] = []
    for mark in marks:
        label = number(mark.value, 4)
        half = text_width(label, NOTE, bold=True) / 2 + 0.05
        middle = ((box[0] + box[2]) / 2, (box[1] + box[3]) / 2)
        dy = (_AWAY + half) * (1 if mark.y <= middle[0] else -1)
        dz = _AWAY * (1 if mark.z <= middle[1] else -1)
        place = (mark.y + dy / inches, mark.z + dz / inches)
        if any(abs(place[0] - y) * inches < 2 * half and abs(place[1] - z) * inches < _AWAY for y, z in taken):
            place = (place[0], mark.z - dz / inches)
        taken.append(place)
        axes.annotate(
            label, (mark.y, mark.z), place, size=NOTE, weight="bold", ha="center", va="center", zorder=9,
            bbox={"boxstyle": "round,pad=0.2", "facecolor": "white", "edgecolor": "black", "linewidth": 0.5, "alpha": 0.9},
            arrowprops={"arrowstyle": "-", "color": "black", "linewidth": 0.6},
        )  # fmt: skip
        axes.plot([mark.y], [mark.z], "o", markersize=5, markerfacecolor="white", markeredgecolor="black", zorder=10)
        axes.plot([mark.y], [mark.z], "o", markersize=1.5, color="black", zorder=11)
