"""Strip (bent sheet along a mid-line) and plate (one straight piece)."""

from __future__ import annotations

import math
from typing import Annotated, ClassVar

from pydantic import Field, Strict

from xsec_fem.model.offset import MidLine
from xsec_fem.model.outline import Face
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import (
    NotNegative,
    Pair,
    Positive,
    Problem,
    ShapeSpec,
    crossing_problems,
    near,
    place,
    repeated_points,
    too_large,
)


class Strip(ShapeSpec):
    """A strip of constant thickness along a mid-line in its own coordinates.

    With `bend_radius` (inner) the bends are concentric arcs, inner and inner + thickness; without it they are mitred.
    """

    default_anchor: ClassVar[str] = "origin"

    points: tuple[Pair, ...] = Field(min_length=2, description="Give the mid-line's points [y, z], at least two.")
    thickness: Positive = Field(description="Give the strip's thickness.")
    bend_radius: NotNegative | None = Field(None, description="Give the inner radius of all bends.")
    closed: Annotated[bool, Strict()] = Field(False, description="Give true to join the last point to the first.")

    def _mid_line(self) -> MidLine:
        return MidLine(self.points, self.thickness, self.bend_radius, self.closed)

    def problems(self) -> list[Problem]:
        """Points repeated, too few or turning straight back; bends that do not fit; sides that cross."""
        return self._point_problems() or self._bend_problems() or self._crossing_problems()

    def _point_problems(self) -> list[Problem]:
        if self.closed and len(self.points) < 3:
            remedy = "Give more points, or leave closed out."
            return [Problem("points", "must be at least 3 for a closed strip", f"{len(self.points)} points", remedy)]
        repeated = repeated_points(self.points, "points", closed=False)
        if len(self.points) > 2 and math.dist(self.points[0], self.points[-1]) <= near(self.points):
            remedy = "Leave it out; closed = true joins the last point to the first."
            key, rule = f"points[{len(self.points) - 1}]", "must not repeat the first point"
            repeated.append(Problem(key, rule, place(self.points[-1]), remedy))
        if repeated:
            return repeated
        remedy = "Leave the point out, or shift it so that the strip has room to turn."
        rule = "must not make the strip turn straight back"
        return [Problem(f"points[{k}]", rule, place(self.points[k]), remedy) for k in self._mid_line().reversals()]

    def _bend_problems(self) -> list[Problem]:
        return [too_large(m.key, m.radius, f"must fit on the {m.edge}", m.limit) for m in self._mid_line().misfits()]

    def _crossing_problems(self) -> list[Problem]:
        return crossing_problems(self.face().loops, "points")

    def face(self) -> Face:
        """One loop when open; outer loop and one hole when closed [mm]."""
        return self._mid_line().face()

    def walls(self) -> tuple[Wall, ...]:
        """One wall along the mid-line, bends included: points (n, 2) [mm]."""
        return (Wall("wall", self._mid_line().bent(), self.thickness, self.closed),)


class Plate(ShapeSpec):
    """A straight plate along a mid-line from one point to another, in its own coordinates."""

    default_anchor: ClassVar[str] = "origin"

    start: Pair = Field(alias="from", description="Give one end of the mid-line, [y, z].")
    end: Pair = Field(alias="to", description="Give the other end of the mid-line, [y, z].")
    thickness: Positive = Field(description="Give the plate's thickness, half of it to either side.")

    def problems(self) -> list[Problem]:
        """The two ends must differ."""
        if self.start != self.end:
            return []
        return [Problem("to", "must differ from `from`", place(self.end), "Give the mid-line's other end.")]

    def face(self) -> Face:
        """Four straight sides [mm]."""
        return MidLine((self.start, self.end), self.thickness).face()

    def walls(self) -> tuple[Wall, ...]:
        """One wall along the mid-line, points (2, 2) [mm]."""
        return (Wall("wall", (self.start, self.end), self.thickness),)
