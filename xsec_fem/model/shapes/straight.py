"""Rectangle and polygon."""

from __future__ import annotations

from typing import ClassVar

from pydantic import Field

from xsec_fem.model.outline import polygon_loop
from xsec_fem.model.rounding import Corner
from xsec_fem.model.shapes.base import (
    CorneredShape,
    NotNegative,
    Pair,
    Positive,
    Problem,
    crossing_problems,
    place,
    repeated_points,
)


class Rectangle(CorneredShape):
    """A rectangle about the origin, its corners rounded when `corner_radius` is given."""

    width: Positive = Field(description="Give the size along y.")
    height: Positive = Field(description="Give the size along z.")
    corner_radius: NotNegative = Field(0.0, description="Give the radius of all four corners.")

    def corners(self) -> list[Corner]:
        """Four corners [mm], counter-clockwise from the bottom left."""
        y, z, r = self.width / 2, self.height / 2, self.corner_radius
        sides = ("bottom", "right side", "top", "left side")
        points = ((-y, -z), (y, -z), (y, z), (-y, z))
        return [Corner(p, r, "corner_radius", side) for p, side in zip(points, sides, strict=True)]


class Polygon(CorneredShape):
    """Straight sides through points in their own coordinates; the last point joins the first."""

    default_anchor: ClassVar[str] = "origin"

    points: tuple[Pair, ...] = Field(min_length=3, description="Give at least three corners [y, z] in order.")
    radius: NotNegative | None = Field(None, description="Give the radius of all corners.")
    radii: tuple[NotNegative, ...] | None = Field(None, description="Give one radius per point, 0 for a sharp corner.")

    def corners(self) -> list[Corner]:
        """The points (n, 2) with their radii [mm]; sides are named by their ends."""
        found = []
        for k, point in enumerate(self.points):
            side = f"side from {place(point)} to {place(self.points[(k + 1) % len(self.points)])}"
            if self.radii is None:
                found.append(Corner(point, self.radius or 0.0, "radius", side))
            else:
                found.append(Corner(point, self.radii[k], f"radii[{k}]", side))
        return found

    def size_problems(self) -> list[Problem]:
        """Radii given twice or too few, points repeated, sides that cross or touch."""
        found = []
        if self.radius is not None and self.radii is not None:
            found.append(
                Problem("radii", "must not be given beside radius", None, "Give either radius or radii, not both.")
            )
        elif self.radii is not None and len(self.radii) != len(self.points):
            rule = f"must have one entry per point ({len(self.points)} points)"
            remedy = f"Give {len(self.points)} radii, 0 for a sharp corner."
            found.append(Problem("radii", rule, f"{len(self.radii)} radii", remedy))
        repeated = repeated_points(self.points, "points", closed=True)
        return found + (repeated or crossing_problems([polygon_loop(self.points)], "points"))

    def problems(self) -> list[Problem]:
        """The above, radii that do not fit, and arcs that run into another side."""
        key = "radius" if self.radii is None else "radii"
        return super().problems() or crossing_problems([self.face().outer], key)
