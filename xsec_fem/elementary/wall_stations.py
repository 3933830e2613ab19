"""Where walls are cut: points on the mid-lines of named walls, and thin places of parts that name none.

Named walls: evenly spaced stations, a thickness away from the ends (where walls meet) and from sharp bends. Other parts: evenly
spaced level and upright lines through the part; what they cross within it counts as a wall when it is thin, at most an eighth
of the part's extent, far thinner than what the other direction crosses at the same place, and met by several lines: not the tip of
a corner. Solid parts have no walls.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.line_crossings import Crossings, line_crossings
from xsec_fem.model.section import Section, Wall
from xsec_fem.recovery.solved_fields import SolvedFields

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

STATIONS = 21
_SHARP = np.radians(15.0)  # a mid-line that turns more at a point has a corner there; drawn arcs turn less per point
_THICKER = (
    1.5  # a cut longer than this times the wall's thickness, or off its middle by as much, lies in a root or a junction
)
_THIN = (
    1 / 8
)  # of the part's extent along it: what is thinner counts as a wall (thin-wall theory; common practice, no source)
_LONGER = 2.5  # what the other direction crosses over the thickness: a wall up to 20 deg off the axes has more
_FEWEST = 5  # stations that make a thin place a wall


@dataclass(frozen=True)
class WallCuts:
    """The cuts across one wall that share a direction.

    Attributes
    ----------
    crossings : lines along the cuts; their normal runs along the wall.
    spans : (n,) span that each station cuts.
    middle : (n, 2) its place on the mid-line [mm].
    order : (n,) rank of the station along the wall.
    """

    crossings: Crossings
    spans: IntArray
    middle: FloatArray
    order: IntArray


@dataclass(frozen=True)
class CutWall:
    """A wall and its cuts; `name` is "part/wall", thickness the nominal one [mm], None where it is measured."""

    name: str
    part: str
    thickness: float | None
    cuts: tuple[WallCuts, ...]


def cut_walls(solved: SolvedFields, section: Section, count: int = STATIONS) -> tuple[CutWall, ...]:
    """Return all walls that can be cut, in the order of the parts, arrays shaped as in WallCuts [mm]."""
    found = []
    for part in section.parts:
        if part.name not in solved.mesh.part_names:
            continue  # a part that lies wholly under embedded ones has no triangles
        if part.walls:
            found += [_named_wall(solved, part.name, wall, count) for wall in part.walls]
        else:
            found += _thin_places(solved, part.name, count)
    return tuple(wall for wall in found if wall.cuts)


def stations(wall: Wall, count: int) -> tuple[FloatArray, FloatArray]:
    """Return points on a wall's mid-line [mm] and unit directions along it [-], shape (n, 2) each, n <= count."""
    points = np.asarray(wall.points, float)
    points = np.vstack([points, points[:1]]) if wall.closed else points
    steps = np.diff(points, axis=0)
    lengths = np.linalg.norm(steps, axis=1)
    along = np.concatenate([[0.0], np.cumsum(lengths)])
    keep = wall.thickness
    if wall.closed:
        s = along[-1] * (np.arange(count) + 0.5) / count
    elif along[-1] > 2 * keep:
        s = np.linspace(keep, along[-1] - keep, count)
    else:
        return np.zeros((0, 2)), np.zeros((0, 2))
    s = s[_away_from_corners(s, along, steps / lengths[:, None], wall)]
    piece = np.clip(np.searchsorted(along, s, side="right") - 1, 0, len(steps) - 1)
    direction = steps[piece] / lengths[piece, None]
    return points[piece] + (s - along[piece])[:, None] * direction, direction


def _away_from_corners(s: FloatArray, along: FloatArray, direction: FloatArray, wall: Wall) -> npt.NDArray[np.bool_]:
    """True for stations at least a thickness away from the mid-line's corners."""
    following = np.roll(direction, -1, axis=0) if wall.closed else direction[1:]
    before = direction if wall.closed else direction[:-1]
    turn = np.arccos(np.clip((before * following).sum(axis=1), -1.0, 1.0))
    corners = along[1 : len(turn) + 1][turn > _SHARP]
    gap = np.abs(s[:, None] - corners)
    gap = np.minimum(gap, along[-1] - gap) if wall.closed else gap
    result: npt.NDArray[np.bool_] = (gap >= wall.thickness).all(axis=1)
    return result


def _named_wall(solved: SolvedFields, part: str, wall: Wall, count: int) -> CutWall:
    middle, direction = stations(wall, count)
    cuts = []
    shared, group = np.unique(np.round(direction, 9), axis=0, return_inverse=True)
    for number in range(len(shared)):
        mine = np.flatnonzero(group.ravel() == number)
        normal = direction[mine[0]]
        levels = middle[mine] @ normal
        mine = mine[np.argsort(levels, kind="stable")]
        crossings = line_crossings(solved.curves, normal, middle[mine] @ normal)
        spans, which = _span_at(crossings, middle[mine], wall.thickness)
        if len(spans):
            cuts.append(WallCuts(crossings, spans, middle[mine[which]], mine[which]))
    return CutWall(f"{part}/{wall.name}", part, wall.thickness, tuple(cuts))


def _span_at(crossings: Crossings, middle: FloatArray, thickness: float) -> tuple[IntArray, IntArray]:
    """Spans that hold a line's middle point, (n,), and the line of each; roots and junctions are left out."""
    place = (middle @ crossings.tangent)[crossings.span_line]
    left, right = place - crossings.span_start, crossings.span_end - place
    # half a thickness on either side, and no more than half of the surplus on one
    most = thickness * _THICKER / 2
    good = (left > 0) & (right > 0) & (left <= most) & (right <= most)
    spans = np.flatnonzero(good)
    return spans, crossings.span_line[spans]


def _thin_places(solved: SolvedFields, part: str, count: int) -> list[CutWall]:
    """Level and upright cuts that cross nothing but a thin place of the part."""
    mesh = solved.mesh
    number = mesh.part_names.index(part)
    nodes = mesh.nodes[np.unique(mesh.triangles[mesh.part_of == number])]
    low, high = nodes.min(axis=0), nodes.max(axis=0)
    found = []
    for name, axis in (("upright cuts", 0), ("level cuts", 1)):
        normal = np.eye(2)[axis]
        levels = low[axis] + (high - low)[axis] * (np.arange(count) + 0.5) / count
        crossings = line_crossings(solved.curves, normal, levels)
        own = np.ones(len(crossings.span_line), bool)
        np.logical_and.at(own, crossings.span, mesh.part_of[crossings.triangle] == number)
        spans = np.flatnonzero(own & (crossings.span_length <= _THIN * (high - low)[axis]))
        ends = crossings.span_start[spans] + crossings.span_end[spans]
        middle = crossings.point(crossings.span_line[spans], ends / 2)
        thinner = _LONGER * crossings.span_length[spans] < _lengths_at(solved, np.eye(2)[1 - axis], middle)
        spans, middle = spans[thinner], middle[thinner]
        if len(spans) >= _FEWEST:
            cuts = WallCuts(crossings, spans, middle, crossings.span_line[spans])
            found.append(CutWall(f"{part}/{name}", part, None, (cuts,)))
    return found


def _lengths_at(solved: SolvedFields, normal: FloatArray, places: FloatArray) -> FloatArray:
    """Length (n,) of what a line with that normal crosses at each place (n, 2) [mm]."""
    heights = places @ normal
    order = np.argsort(heights, kind="stable")
    crossings = line_crossings(solved.curves, normal, heights[order])
    position = (places @ crossings.tangent)[order][crossings.span_line]
    holds = (crossings.span_start <= position) & (position <= crossings.span_end)
    result = np.zeros(len(places))
    result[order[crossings.span_line[holds]]] = crossings.span_length[holds]
    return result
