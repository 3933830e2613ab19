"""Parts as closed polylines to draw, from the section file or from a mesh, and the lines along which they touch."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.part_nodes import PartNodes
from xsec_fem.model.section import Section
from xsec_fem.report.drawing_mesh import drawing_mesh

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

FloatArray = npt.NDArray[np.float64]

_ARC_STEP_DEG = 1.0  # chords of arcs: at a radius of 3 inches on paper they leave the arc by 1e-4 inches
_NEAR = 1e-4  # of the section's size: what counts as touching in a drawing; chords of arcs leave them by less


@dataclass(frozen=True)
class PartOutline:
    """A part as drawn: its name, material, number in the legend and closed polylines (n, 2) [mm], holes among them."""

    name: str
    material: str
    number: int
    loops: tuple[FloatArray, ...]
    embedded_in: str | None = None

    @cached_property
    def solid(self) -> BaseGeometry:
        """The polygon, holes taken out."""
        import shapely

        rings = [shapely.Polygon(loop) for loop in self.loops]
        solid: BaseGeometry = rings[0]
        for ring in rings[1:]:
            solid = solid.symmetric_difference(ring)
        return solid

    @cached_property
    def wall(self) -> float:
        """Mean thickness, twice the area over the perimeter [mm]."""
        return 2 * float(self.solid.area) / float(self.solid.length)


@dataclass(frozen=True)
class SharedLine:
    """Two parts that touch: the line (pieces of (n, 2) points) and its length [mm]."""

    parts: tuple[str, str]
    pieces: tuple[FloatArray, ...]
    length: float


def part_outlines(section: Section, mesh: Mesh | None = None) -> list[PartOutline]:
    """Return the parts to draw in the file's order; those from a mesh file need the mesh and are left out without it."""
    from_mesh = _loops_by_part(mesh) if mesh is not None else {}
    outlines = []
    for number, part in enumerate(section.parts, start=1):
        if part.face is not None:
            loops = tuple(loop.polyline(_ARC_STEP_DEG) for loop in part.face.loops)
        elif part.name in from_mesh:
            loops = tuple(from_mesh[part.name])
        else:
            continue
        outlines.append(PartOutline(part.name, part.material, number, loops, part.embedded_in))
    return outlines


def bounding_box(outlines: list[PartOutline]) -> tuple[float, float, float, float]:
    """Return (y min, z min, y max, z max) of all parts [mm]."""
    points = np.vstack([loop for outline in outlines for loop in outline.loops])
    (y0, z0), (y1, z1) = points.min(axis=0).tolist(), points.max(axis=0).tolist()
    return y0, z0, y1, z1


def shared_lines(outlines: list[PartOutline]) -> list[SharedLine]:
    """Return where parts touch along a line, in the order of the parts; an embedded part touches along its whole outline."""
    from shapely import STRtree

    box = bounding_box(outlines)
    near = _NEAR * max(box[2] - box[0], box[3] - box[1])
    tree = STRtree([outline.solid for outline in outlines])
    found = []
    for i, first in enumerate(outlines):
        for j in sorted(int(k) for k in tree.query(first.solid, predicate="dwithin", distance=near) if k > i):
            second = outlines[j]
            inner, outer = (first, second) if first.embedded_in == second.name else (second, first)
            line = inner.solid.boundary.intersection(outer.solid.buffer(near, join_style="mitre"))
            pieces = tuple(_pieces(line, 4 * near))
            if pieces:
                length = sum(float(np.hypot(*np.diff(piece, axis=0).T).sum()) for piece in pieces)
                found.append(SharedLine((first.name, second.name), pieces, length))
    return found


def _pieces(line: BaseGeometry, least: float) -> list[FloatArray]:
    """The polylines of a geometry longer than `least` [mm]: what is left of point contacts is dropped."""
    import shapely

    merged = shapely.line_merge(line)
    return [np.asarray(piece.coords) for piece in shapely.get_parts(merged) if piece.length > least]


def _loops_by_part(mesh: Mesh) -> dict[str, list[FloatArray]]:
    """The outlines of each part of a mesh, the largest loop first."""
    drawn = drawing_mesh(PartNodes.of(mesh))
    loops: dict[str, list[FloatArray]] = {}
    for outline in sorted(drawn.outlines, key=len, reverse=True):
        loops.setdefault(mesh.part_names[drawn.part[outline[0]]], []).append(drawn.places[outline[:-1]])
    return loops
