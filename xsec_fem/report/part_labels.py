"""Where the numbers of the parts go: inside a part when there is room, else next to it with a short line, else in a column."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.report.part_outlines import PartOutline

FloatArray = npt.NDArray[np.float64]

_ROOM = 0.12  # a number needs this distance to the part's outline [in]
_ENOUGH = 0.25  # more distance than this is no better [in]
_APART = 0.21  # distance between numbers beside the section [in]
_BESIDE = 0.42  # distance of the column of numbers from the section [in]
_GRID = 31
_LEADER = 0.3  # length of a line from a thin part to its number [in]
_ANCHORS = 25  # places tried along the outline of a thin part


@dataclass(frozen=True)
class PartLabel:
    """The number of a part at `place`; `anchor` is the end of its line on the part, None when it stands inside [mm]."""

    number: int
    place: tuple[float, float]
    anchor: tuple[float, float] | None


def part_labels(
    outlines: Sequence[PartOutline], scale: float, right: float, taken: Sequence[tuple[float, float]]
) -> list[PartLabel]:
    """Return one label a part. `scale` [in/mm]; `right`: y of the section's right side [mm]; `taken`: places to stay away from."""
    labels, thin, crowded = [], [], []
    used = list(taken)
    for outline in outlines:
        place = _place_inside(outline, scale, used)
        if place is None:
            thin.append(outline)
        else:
            used.append(place)
            labels.append(PartLabel(outline.number, place, None))
    for outline in thin:
        label = _next_to(outline, outlines, scale, used)
        if label is None:
            crowded.append(outline)
        else:
            used.append(label.place)
            labels.append(label)
    return labels + _beside(crowded, scale, right)


def _next_to(
    outline: PartOutline, all_parts: Sequence[PartOutline], scale: float, used: Sequence[tuple[float, float]]
) -> PartLabel | None:
    """A number outside of every part, a short line away from the outline; None where there is no room for it."""
    import shapely

    edge = outline.solid.boundary
    anchors = shapely.get_coordinates(edge.interpolate((np.arange(_ANCHORS) + 0.5) / _ANCHORS, normalized=True))
    turns = np.arange(8) * np.pi / 4
    steps = _LEADER / scale * np.stack([np.cos(turns), np.sin(turns)], axis=1)
    places = (anchors[:, None] + steps).reshape(-1, 2)
    points = shapely.points(places)
    room = np.min([shapely.distance(other.solid, points) for other in all_parts], axis=0) * scale
    away = np.full(len(places), 1.0)
    for place in used:
        away = np.minimum(away, np.hypot(*(places - place).T) * scale)
    good = (room >= _ROOM) & (away >= _APART)
    if not good.any():
        return None
    best = int(np.argmax(np.where(good, np.minimum(room, _ENOUGH) + np.minimum(away, 2 * _ENOUGH), -1.0)))
    (y, z), (ya, za) = places[best].tolist(), anchors[best // len(turns)].tolist()
    return PartLabel(outline.number, (y, z), (ya, za))


def _place_inside(
    outline: PartOutline, scale: float, used: Sequence[tuple[float, float]]
) -> tuple[float, float] | None:
    """The point with most room inside the part and away from what is drawn there already; None without room."""
    import shapely

    y0, z0, y1, z1 = outline.solid.bounds
    grid = np.stack(np.meshgrid(np.linspace(y0, y1, _GRID), np.linspace(z0, z1, _GRID)), axis=-1).reshape(-1, 2)
    points = shapely.points(grid)
    inside = shapely.contains(outline.solid, points)
    room = shapely.distance(outline.solid.boundary, points) * scale
    good = inside & (room >= _ROOM)
    if not good.any():
        return None
    away = np.full(len(grid), 1.0)
    for place in used:
        away = np.minimum(away, np.hypot(*(grid - place).T) * scale)
    score = np.where(good, np.minimum(room, _ENOUGH) + np.minimum(away, 3 * _ENOUGH), -1.0)
    y, z = grid[int(np.argmax(score))].tolist()
    return y, z


def _beside(thin: Sequence[PartOutline], scale: float, right: float) -> list[PartLabel]:
    """A column of numbers to the right, in the order of height, each as near to its part as the others let it."""
    anchors = sorted(((_right_end(outline), outline.number) for outline in thin), key=lambda item: item[0][1])
    if not anchors:
        return []
    heights = spread([anchor[1] for anchor, _ in anchors], _APART / scale)
    column = right + _BESIDE / scale
    return [PartLabel(n, (column, height), anchor) for (anchor, n), height in zip(anchors, heights, strict=True)]


def _right_end(outline: PartOutline) -> tuple[float, float]:
    """The middle of the part's right end, on its outline [mm]."""
    points = np.vstack(outline.loops)
    y = points[:, 0].max()
    there = points[points[:, 0] > y - 1e-6 * np.ptp(points, axis=0).max()]
    return float(y), float((there[:, 1].min() + there[:, 1].max()) / 2)


def spread(wanted: Sequence[float], apart: float) -> list[float]:
    """Return ascending positions at least `apart` from each other, as near to the wanted (ascending) ones as that allows."""
    groups: list[list[float]] = []  # [sum of (wanted - offset), count]
    for value in wanted:
        groups.append([value, 1.0])
        while len(groups) > 1 and _start(groups[-1], apart) < _end(groups[-2], apart) + apart:
            total, count = groups.pop()
            groups[-1][0] += total
            groups[-1][1] += count
    return [_start(group, apart) + k * apart for group in groups for k in range(int(group[1]))]


def _start(group: list[float], apart: float) -> float:
    return group[0] / group[1] - (group[1] - 1) * apart / 2


def _end(group: list[float], apart: float) -> float:
    return _start(group, apart) + (group[1] - 1) * apart
