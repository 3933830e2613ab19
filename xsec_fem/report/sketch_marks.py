"""Marks on a sketch: the file's axes, overall dimensions, centroid, principal axes, shear centre and loads."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from xsec_fem.model.outline import Point
from xsec_fem.model.section import Section
from xsec_fem.recovery.section_forces import load_point
from xsec_fem.report.numbers import number, point
from xsec_fem.report.sheet import INK, NOTE, Box
from xsec_fem.report.sketch_legend import Entry
from xsec_fem.results import Properties
from xsec_fem.units import UnitSystem

if TYPE_CHECKING:
    from matplotlib.axes import Axes

AXIS_COLOUR, CENTROID_COLOUR, SHEAR_COLOUR, LOAD_COLOUR = "#1f4e9c", "#000000", "#d95f02", "#c00000"

_AXIS = 0.75  # length of the file's axes [in]
_FORCE = 0.5  # length of a force [in]
_OUTSIDE = 0.55  # distance of the dimension lines from the section [in]
_NEAR_ORIGIN = 0.25  # the origin is drawn when no farther from the section than this share of its size


def axes_entries(properties: Properties | None, units: UnitSystem, size: float) -> list[Entry]:
    """Return the legend's entries for the centres and principal axes; none before solving [mm]."""
    if properties is None:
        return []
    p = properties
    centroid, shear = point(p.yc, p.zc, size), point(p.ysc, p.zsc, size)
    alpha = number(p.alpha_deg, 4, 1.0)
    return [
        Entry("mark", f"C: centroid {centroid} {units.length}", "o", CENTROID_COLOUR),
        Entry("mark", f"S: shear centre {shear} {units.length}", "D", SHEAR_COLOUR),
        Entry("line", f"u, v: principal axes, u turned {alpha} deg from y", "-.", "#666666"),
    ]


def draw_axes(axes: Axes, box: Box, scale: float) -> list[Point]:
    """Draw the arrows y and z at the origin, or below the section on the left when that is far away; return places taken."""
    size = _NEAR_ORIGIN * max(box[2] - box[0], box[3] - box[1])
    near = box[0] - size <= 0 <= box[2] + size and box[1] - size <= 0 <= box[3] + size
    lowest = (axes.get_xlim()[0] + 0.12 / scale, axes.get_ylim()[0] + 0.12 / scale)
    origin = (0.0, 0.0) if near else lowest
    length = _AXIS / scale
    for name, tip in (("y", (origin[0] + length, origin[1])), ("z", (origin[0], origin[1] + length))):
        _arrow(axes, origin, tip, AXIS_COLOUR, 1.0)
        away = (2, -8) if name == "y" else (-8, 2)
        axes.annotate(name, tip, away, textcoords="offset points", size=NOTE + 1, color=AXIS_COLOUR, zorder=9)
    return [origin, (origin[0] + length, origin[1]), (origin[0], origin[1] + length)] if near else []


def draw_dimensions(axes: Axes, box: Box, scale: float, unit: str) -> None:
    """Draw overall width and height with dimension lines below and left of the section [mm]."""
    y0, z0, y1, z1 = box
    low, left = z0 - _OUTSIDE / scale, y0 - _OUTSIDE / scale
    for start, end, text, turn in (
        ((y0, low), (y1, low), f"{number(y1 - y0)} {unit}", 0.0),
        ((left, z0), (left, z1), f"{number(z1 - z0)} {unit}", 90.0),
    ):
        axes.annotate(
            "",
            end,
            start,
            arrowprops={"arrowstyle": "<->", "color": "#555555", "linewidth": 0.6, "shrinkA": 0, "shrinkB": 0},
        )
        axes.text(
            (start[0] + end[0]) / 2, (start[1] + end[1]) / 2, text, size=NOTE, ha="center", va="center", rotation=turn,
            color="#333333", zorder=5, bbox={"boxstyle": "square,pad=0.15", "facecolor": "white", "edgecolor": "none"},
        )  # fmt: skip


def draw_principal_axes(axes: Axes, properties: Properties, box: Box, scale: float) -> list[Point]:
    """Draw centroid C, shear centre S and both principal axes u, v; return places taken [mm]."""
    p = properties
    centre, shear = (p.yc, p.zc), (p.ysc, p.zsc)
    taken = [centre, shear]
    for name, turn in (("u", 0.0), ("v", 90.0)):
        angle = math.radians(p.alpha_deg + turn)
        along = (math.cos(angle), math.sin(angle))
        reach = [_reach(centre, (s * along[0], s * along[1]), box, 0.15 / scale) for s in (-1, 1)]
        ends = [
            (centre[0] + s * r * along[0], centre[1] + s * r * along[1]) for s, r in zip((-1, 1), reach, strict=True)
        ]
        axes.plot(*zip(*ends, strict=True), linestyle="-.", color="#666666", linewidth=0.7, zorder=4)
        taken.append(ends[1])
        axes.annotate(name, ends[1], (7 * along[0], 7 * along[1]), textcoords="offset points", size=NOTE + 1,
                      color="#444444", ha="center", va="center", zorder=9)  # fmt: skip
    axes.plot(*centre, "o", color=CENTROID_COLOUR, markersize=6, zorder=9)
    axes.plot(
        *shear, "D", markerfacecolor="none", markeredgecolor=SHEAR_COLOUR, markersize=8, markeredgewidth=1.5, zorder=10
    )
    together = math.dist(centre, shear) * scale < 0.2
    _name(axes, "C, S" if together else "C", centre)
    if not together:
        _name(axes, "S", shear)
    return taken


def load_arrows(section: Section, properties: Properties | None) -> list[tuple[Point, Point, str]]:
    """Return (place, direction, "Vy" or "Vz") of all shear forces, equal ones once; unsolved, only those at given points."""
    found: list[tuple[Point, Point, str]] = []
    for case in section.actions:
        if properties is not None:
            place = load_point(case, properties)
        elif case.load_point is None or isinstance(case.load_point, str):
            continue
        else:
            place = case.load_point
        for name, value, direction in (("Vy", case.Vy, (1.0, 0.0)), ("Vz", case.Vz, (0.0, 1.0))):
            sign = math.copysign(1.0, value)
            arrow = (place, (sign * direction[0], sign * direction[1]), name)
            if value and arrow not in found:
                found.append(arrow)
    return found


def draw_loads(axes: Axes, arrows: list[tuple[Point, Point, str]], scale: float) -> list[Point]:
    """Draw the shear forces in their directions, their tips at the load points; return the places taken [mm]."""
    taken = []
    for place, along, name in arrows:
        tail = (place[0] - along[0] * _FORCE / scale, place[1] - along[1] * _FORCE / scale)
        _arrow(axes, tail, place, LOAD_COLOUR, 2.2)
        axes.annotate(
            name, tail, (5, 0) if along[1] else (0, 5), textcoords="offset points", size=NOTE, weight="bold",
            color=LOAD_COLOUR, zorder=10, ha="left" if along[1] else "center", va="center" if along[1] else "bottom",
        )  # fmt: skip
        taken += [place, tail]
    return taken


def _reach(start: Point, along: Point, box: Box, beyond: float) -> float:
    """Distance from a point inside the box to its side in a direction, and a bit beyond [mm]."""
    steps = []
    for k in (0, 1):
        if abs(along[k]) > 1e-9:
            side = box[2 + k] if along[k] > 0 else box[k]
            steps.append((side - start[k]) / along[k])
    return max(0.0, min(steps)) + beyond


def _arrow(axes: Axes, start: Point, end: Point, colour: str, width: float) -> None:
    axes.annotate(
        "", end, start, zorder=8,
        arrowprops={"arrowstyle": "-|>", "color": colour, "linewidth": width, "shrinkA": 0, "shrinkB": 0, "mutation_scale": 10},
    )  # fmt: skip


def _name(axes: Axes, text: str, at: Point) -> None:
    axes.annotate(
        text, at, (-8, -12), textcoords="offset points", size=NOTE, weight="bold", color=INK, ha="right", zorder=10,
        bbox={"boxstyle": "round,pad=0.15", "facecolor": "white", "edgecolor": "none", "alpha": 0.8},
    )  # fmt: skip
