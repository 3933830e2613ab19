"""A free outline of straight lines and arcs."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import ClassVar

from pydantic import BaseModel, ConfigDict, Field

from xsec_fem.model.arcs import centred_arc, pieces, through_arc
from xsec_fem.model.outline import Arc, Face, Line, Loop, Point, Segment
from xsec_fem.model.shapes.base import Pair, Problem, ShapeSpec, crossing_problems, near, place, text

_EQUAL = 1e-4  # a centre's two distances may differ by this share: coordinates are typed with 4 or 5 digits
_NO_AREA = 1e-9  # an area below this share of the size squared is a line walked to and fro


class Step(BaseModel):
    """One step of an outline: a straight line to `to`, or an arc about `centre`, or one that passes `through` a point.

    About a centre the arc takes the shorter way; through a point it goes where the point is.
    """

    model_config = ConfigDict(frozen=True, extra="forbid")

    to: Pair = Field(description="Give the point [y, z] where the step ends.")
    centre: Pair | None = Field(None, description="Give the centre [y, z] of the arc.")
    through: Pair | None = Field(None, description="Give a point [y, z] on the arc.")

    def problem(self, start: Point, key: str, same: float) -> Problem | None:
        """Return what is wrong with the step from `start`, None when it can be drawn.

        key : the step's place, 'steps[2]'; same : distance below which two points are one [mm].
        """
        if self.centre is not None and self.through is not None:
            return Problem(key, "must not have both centre and through", None, "Give one of the two.")
        if math.dist(self.to, start) <= same:
            remedy = "Leave the step out; draw a full circle as two arcs."
            return Problem(f"{key}.to", "must differ from where the step starts", place(start), remedy)
        if self.centre is not None:
            return self._centre_problem(start, self.centre, f"{key}.centre")
        if self.through is not None and through_arc(start, self.through, self.to) is None:
            rule = f"must not lie on the line from {place(start)} to {place(self.to)}"
            return Problem(f"{key}.through", rule, place(self.through), "Leave `through` out for a straight line.")
        return None

    def _centre_problem(self, start: Point, centre: Point, key: str) -> Problem | None:
        near, far = sorted((math.dist(centre, start), math.dist(centre, self.to)))
        if far - near > _EQUAL * far:
            rule = f"must be equally far from both ends (distances {text(near)} and {text(far)})"
            return Problem(key, rule, place(centre), "Move the centre, or give a point with `through` instead.")
        if centred_arc(start, self.to, centre) is None:
            remedy = "Give a point of the arc with `through` instead."
            return Problem(key, "leaves the side of a half circle open", place(centre), remedy)
        return None

    def segments(self, start: Point) -> tuple[Segment, ...]:
        """Return the step from `start` as a line or as arcs of at most 90 deg; only when `problem` is None."""
        arc: Arc | None = None
        if self.centre is not None:
            arc = centred_arc(start, self.to, self.centre)
        elif self.through is not None:
            arc = through_arc(start, self.through, self.to)
        return (Line(start, self.to),) if arc is None else pieces(arc)


class Outline(ShapeSpec):
    """Steps from a start, closed by a straight line when the last does not end there; in its own coordinates."""

    default_anchor: ClassVar[str] = "origin"

    start: Pair = Field(description="Give the first point, [y, z].")
    steps: tuple[Step, ...] = Field(min_length=1, description="Give a list of steps such as {to = [y, z]}.")

    def _starts(self) -> list[Point]:
        return [self.start, *(step.to for step in self.steps[:-1])]

    def _same(self) -> float:
        return near([self.start, *(step.to for step in self.steps)])

    def _loop(self) -> Loop:
        segments = [s for start, step in zip(self._starts(), self.steps, strict=True) for s in step.segments(start)]
        if math.dist(self.steps[-1].to, self.start) > self._same():
            segments.append(Line(self.steps[-1].to, self.start))
        else:
            segments[-1] = replace(segments[-1], end=self.start)
        return Loop(tuple(segments))

    def problems(self) -> list[Problem]:
        """Steps that cannot be drawn; then an outline without area, or one that crosses itself."""
        starts, same = self._starts(), self._same()
        found = [step.problem(starts[k], f"steps[{k}]", same) for k, step in enumerate(self.steps)]
        broken = [problem for problem in found if problem is not None]
        if broken:
            return broken
        loop = self._loop()
        y0, z0, y1, z1 = loop.bounds()
        if len(loop.segments) < 3 and abs(loop.area) <= _NO_AREA * max(y1 - y0, z1 - z0) ** 2:
            return [Problem("steps", "must enclose an area", None, "Give at least two more points, or an arc.")]
        return crossing_problems([loop], "steps")

    def face(self) -> Face:
        """The closed outline [mm]."""
        return Face(self._loop())
