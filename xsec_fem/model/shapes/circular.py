"""Circle, ellipse, ring and sector."""

from __future__ import annotations

from typing import ClassVar

from pydantic import Field

from xsec_fem.model.arcs import ROUND_OFF_DEG, at_angle, circle_loop, swept_arcs
from xsec_fem.model.outline import EllipseArc, Face, Line, Loop
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import Number, Positive, Problem, ShapeSpec, at_most, fills, not_below, text

_WALL_STEP = 5.0  # [deg] between the points of a curved wall's mid-line


class Circle(ShapeSpec):
    """A solid circle about the origin."""

    diameter: Positive = Field(description="Give the outer diameter.")

    def face(self) -> Face:
        """Four quarter arcs [mm]."""
        return Face(circle_loop(self.diameter / 2))


class Ellipse(ShapeSpec):
    """A solid ellipse about the origin, its axes along y and z."""

    width: Positive = Field(description="Give the whole size along y.")
    height: Positive = Field(description="Give the whole size along z.")

    def face(self) -> Face:
        """Four quarter arcs [mm], of a circle when width and height are equal."""
        y, z = self.width / 2, self.height / 2
        if y == z:
            return Face(circle_loop(y))
        major, ratio = ((y, 0.0), z / y) if y > z else ((0.0, z), y / z)
        tips = ((y, 0.0), (0.0, z), (-y, 0.0), (0.0, -z))
        arcs = (EllipseArc(tips[k], tips[(k + 1) % 4], (0.0, 0.0), major, ratio, True) for k in range(4))
        return Face(Loop(tuple(arcs)))


class Ring(ShapeSpec):
    """A round tube about the origin; `diameter` is the outer one."""

    diameter: Positive = Field(description="Give the outer diameter.")
    thickness: Positive = Field(description="Give the wall's thickness.")

    def problems(self) -> list[Problem]:
        """The wall must leave a hole."""
        if not fills(self.thickness, self.diameter / 2):
            return []
        remedy = 'Give the thickness of the wall, or shape = "circle" for a solid bar.'
        return [not_below("thickness", self.thickness, self.diameter / 2, "half the diameter", remedy)]

    def face(self) -> Face:
        """Outer circle and one hole [mm]."""
        return Face(circle_loop(self.diameter / 2), (circle_loop(self.diameter / 2 - self.thickness),))

    def walls(self) -> tuple[Wall, ...]:
        """One closed wall, points (n, 2) on its mid-line at most 5 deg apart [mm]."""
        loop = circle_loop((self.diameter - self.thickness) / 2)
        points = tuple((float(y), float(z)) for y, z in loop.polyline(_WALL_STEP))
        return (Wall("wall", points, self.thickness, closed=True),)


class Sector(ShapeSpec):
    """A slice of a circle about the origin, or of a ring when `thickness` (measured inward) is given."""

    default_anchor: ClassVar[str] = "origin"

    radius: Positive = Field(description="Give the outer radius.")
    from_deg: Number = Field(description="Give the angle where it begins, counter-clockwise from +y.")
    to_deg: Number = Field(description="Give the angle where it ends, counter-clockwise from +y.")
    thickness: Positive | None = Field(None, description="Give the wall's thickness, measured inward.")

    @property
    def _opening(self) -> float:
        """Angle between the two ends [deg]; half and whole turns exactly, and 0, when off by round-off only."""
        opening = self.to_deg - self.from_deg
        return next((turn for turn in (0.0, 180.0, 360.0) if abs(opening - turn) < ROUND_OFF_DEG), opening)

    def problems(self) -> list[Problem]:
        """Angles in order and within one turn; the wall thinner than the radius; a full ring is a ring."""
        found, opening = [], self._opening
        if opening <= 0:
            remedy = "Angles run counter-clockwise from +y: swap the two, or add 360 to to_deg."
            found.append(
                Problem("to_deg", f"must be more than from_deg ({text(self.from_deg)})", text(self.to_deg), remedy)
            )
        if opening > 360:
            limit = at_most(self.from_deg + 360)
            remedy = f"Give {limit} or less."
            found.append(Problem("to_deg", f"must be at most from_deg + 360 ({limit})", text(self.to_deg), remedy))
        if self.thickness is not None and fills(self.thickness, self.radius):
            remedy = "Leave thickness out for a sector that reaches the centre."
            found.append(not_below("thickness", self.thickness, self.radius, "the radius", remedy))
        if self.thickness is not None and opening == 360:
            remedy = 'Use shape = "ring" for a closed tube.'
            found.append(Problem("to_deg", "must leave a gap when thickness is given", text(self.to_deg), remedy))
        return found

    def face(self) -> Face:
        """Outer arcs, then the centre or the inner arcs walked back; a whole turn is a circle [mm]."""
        outer = swept_arcs(self.radius, self.from_deg, self.to_deg)
        first, last = outer[0].start, outer[-1].end
        opening = self._opening
        if self.thickness is not None:
            inner = Loop(swept_arcs(self.radius - self.thickness, self.from_deg, self.to_deg)).reversed().segments
            return Face(Loop((*outer, Line(last, inner[0].start), *inner, Line(inner[-1].end, first))))
        if opening == 360:
            return Face(Loop(outer))
        if opening == 180:
            return Face(Loop((*outer, Line(last, first))))
        return Face(Loop((*outer, Line(last, (0.0, 0.0)), Line((0.0, 0.0), first))))

    def walls(self) -> tuple[Wall, ...]:
        """One open wall for a ring sector, points (n, 2) on its mid-line about 5 deg apart [mm]."""
        if self.thickness is None:
            return ()
        radius, opening = self.radius - self.thickness / 2, self._opening
        n = max(2, round(opening / _WALL_STEP))
        points = tuple(at_angle(radius, self.from_deg + opening * k / n) for k in range(n + 1))
        return (Wall("wall", points, self.thickness),)
