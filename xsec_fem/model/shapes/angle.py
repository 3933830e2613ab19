"""Angle: two legs that meet at a heel."""

from __future__ import annotations

from pydantic import Field

from xsec_fem.model.rounding import Corner
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import CorneredShape, NotNegative, Positive, Problem, fills, not_below


class Angle(CorneredShape):
    """An angle, heel at the bottom left and at its own origin; anchor = "bottom left" places it by the heel."""

    depth: Positive = Field(description="Give the length of the vertical leg, over all.")
    width: Positive = Field(description="Give the length of the horizontal leg, over all.")
    thickness: Positive = Field(description="Give the legs' thickness.")
    root_radius: NotNegative = Field(0.0, description="Give the radius between the legs.")
    toe_radius: NotNegative = Field(0.0, description="Give the radius on the inner edge of the leg tips.")

    def size_problems(self) -> list[Problem]:
        """The thickness less than either leg."""
        limits = (("the depth", self.depth), ("the width", self.width))
        remedy = "Give the thickness of the legs."
        return [
            not_below("thickness", self.thickness, limit, what, remedy)
            for what, limit in limits
            if fills(self.thickness, limit)
        ][:1]

    def corners(self) -> list[Corner]:
        """Six corners [mm], counter-clockwise from the heel."""
        y, z, t = self.width, self.depth, self.thickness
        return [
            Corner((0.0, 0.0), edge="bottom"),
            Corner((y, 0.0), edge="tip of the horizontal leg"),
            Corner((y, t), self.toe_radius, "toe_radius", "inner face of the horizontal leg"),
            Corner((t, t), self.root_radius, "root_radius", "inner face of the vertical leg"),
            Corner((t, z), self.toe_radius, "toe_radius", "tip of the vertical leg"),
            Corner((0.0, z), edge="left side"),
        ]

    def walls(self) -> tuple[Wall, ...]:
        """The two legs, joined on their mid-lines: points (2, 2) each [mm]."""
        m = self.thickness / 2
        return (
            Wall("vertical leg", ((m, m), (m, self.depth)), self.thickness),
            Wall("horizontal leg", ((m, m), (self.width, m)), self.thickness),
        )
