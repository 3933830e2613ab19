"""What pictures of a solved section share: the mesh as drawn, the line of actions, details of thin walls, rings at corners."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
import numpy.typing as npt

from xsec_fem.report.drawing_mesh import DrawingMesh
from xsec_fem.report.marks import Mark
from xsec_fem.report.numbers import number
from xsec_fem.report.sheet import INK, SUBTITLE, Box, Sheet, paper_scale, show_window
from xsec_fem.report.wording import actions_text, load_point_text, section_size
from xsec_fem.results import CaseResult, Result

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.tri import Triangulation

FloatArray = npt.NDArray[np.float64]

SMALL_RING = 0.045  # smallest ring that can be seen [in]
_THIN = 0.12  # walls thinner than this on paper get a detail [in]
_DETAIL_WALLS = 5.0  # height of the detail in wall thicknesses


@dataclass(frozen=True)
class Canvas:
    """The mesh as drawn and its triangulation, shared by all pictures of a result."""

    mesh: DrawingMesh
    triangulation: Triangulation

    @classmethod
    def of(cls, mesh: DrawingMesh) -> Canvas:
        """Make the triangulation (K, 3) of a mesh to draw."""
        from matplotlib.tri import Triangulation

        return cls(mesh, Triangulation(mesh.places[:, 0], mesh.places[:, 1], mesh.triangles))


def actions_line(result: Result, case: CaseResult) -> str:
    """Return the actions with units, where they act, and the total torque when there is any."""
    units = result.section.units
    place = load_point_text(case.actions, units)
    size = abs(case.forces.Vy) + abs(case.forces.Vz)
    torque = number(case.T_total, scale=size * section_size(result))
    total = f"; total torque about the shear centre {torque} {units.moment}" if torque != "0" else ""
    return actions_text(case.actions, units) + (f" {place}" if place else "") + total


def detail_place(mark: Mark, result: Result, mesh: DrawingMesh) -> tuple[tuple[float, float], float] | None:
    """Return middle and height [mm] of the detail about the largest value; None where the walls can be seen well without."""
    wall = float(mesh.walls[result.mesh.part_names.index(mark.part)])
    return ((mark.y, mark.z), _DETAIL_WALLS * wall) if wall * paper_scale(mesh.box) < _THIN else None


def open_detail(sheet: Sheet, focus: tuple[tuple[float, float], float], unit: str) -> tuple[Axes, Box, float]:
    """Aim the detail, frame its window in the drawing, and return its axes, box and scale [in/mm]."""
    from matplotlib.patches import Rectangle

    detail = sheet.detail
    if detail is None or sheet.plan.detail is None:
        raise ValueError(f"the page has no detail: {sheet.plan}")
    box = show_window(detail, focus[0], focus[1], unit)
    scale = sheet.plan.detail[3] / focus[1]
    detail.set_title(
        f"Detail, {number(scale / sheet.plan.scale, 2)} times larger", size=SUBTITLE, color=INK, loc="left"
    )
    least = 0.12 / sheet.plan.scale  # a frame that can be seen
    size = (max(box[2] - box[0], least), max(box[3] - box[1], least))
    corner = (focus[0][0] - size[0] / 2, focus[0][1] - size[1] / 2)
    sheet.axes.add_patch(Rectangle(corner, *size, fill=False, edgecolor=INK, linewidth=0.8, linestyle="--", zorder=5))
    return detail, box, scale


def fill_parts(axes: Axes, loops: Sequence[FloatArray], colour: str, width: float = 0.5) -> None:
    """Fill the parts whose outlines are given, holes left empty: outer loops (n, 2) counter-clockwise, holes clockwise [mm]."""
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    path = Path.make_compound_path(*(Path(loop, closed=True) for loop in loops))
    axes.add_patch(PathPatch(path, facecolor=colour, edgecolor="#8a8a8a", linewidth=width, zorder=1))


def draw_rings(axes: Axes, box: Box, inches: float, result: Result) -> None:
    """Draw the rings within which stress is not read, round the corners inside a view; `inches` is its scale [in/mm]."""
    from matplotlib.patches import Circle

    for corner in result.corners:
        radius = max(corner.distance, SMALL_RING / inches)
        if box[0] < corner.y < box[2] and box[1] < corner.z < box[3]:
            ring = Circle((corner.y, corner.z), radius, fill=False, edgecolor="#c51b7d", linewidth=1.0, zorder=6)
            axes.add_patch(ring)
