"""Box: a rectangular hollow shape of one or more cells."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import Field, Strict

from xsec_fem.model.outline import Face
from xsec_fem.model.rounding import Corner, rounded_loop
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import (
    NotNegative,
    Positive,
    Problem,
    ShapeSpec,
    fills,
    not_below,
    radius_problems,
    text,
)

_SIDES = ("bottom", "right side", "top", "left side")


class Box(ShapeSpec):
    """A box about the origin with `cells` equal cells side by side; all webs are `web` thick."""

    depth: Positive = Field(description="Give the whole height.")
    width: Positive = Field(description="Give the whole width.")
    web: Positive = Field(description="Give the thickness of the upright walls.")
    flange: Positive = Field(description="Give the thickness of top and bottom wall.")
    outer_radius: NotNegative = Field(0.0, description="Give the radius of the four outer corners.")
    inner_radius: NotNegative = Field(0.0, description="Give the radius of the cells' corners.")
    cells: Annotated[int, Strict(), Field(ge=1, lt=1000)] = Field(
        1, description="Give the number of equal cells side by side."
    )

    @property
    def cell_width(self) -> float:
        """Clear width of one cell [mm]."""
        return (self.width - (self.cells + 1) * self.web) / self.cells

    def problems(self) -> list[Problem]:
        """Walls that leave room for the cells; radii that fit and leave a wall at the corners."""
        found = []
        if fills(self.web * (self.cells + 1), self.width):
            what = f"width / {self.cells + 1}, which is what {self.cells + 1} webs would fill"
            limit = self.width / (self.cells + 1)
            found.append(not_below("web", self.web, limit, what, "Give the thickness of one web."))
        if fills(2 * self.flange, self.depth):
            remedy = "Give the thickness of the top and bottom wall."
            found.append(not_below("flange", self.flange, self.depth / 2, "half the depth", remedy))
        return found or self._radius_problems() or self._thin_corner_problems()

    def _radius_problems(self) -> list[Problem]:
        return radius_problems(self._outer()) + radius_problems(self._cell(0))

    def _thin_corner_problems(self) -> list[Problem]:
        """The outer arc must not cut into the inner one: the inner arc's farthest point from the outer centre."""
        inner, outer = self.inner_radius, self.outer_radius
        y, z = outer - self.web - inner, outer - self.flange - inner
        if min(y, z) <= 0 or not fills(math.hypot(y, z) + inner, outer):
            return []
        rule = f"must leave some wall at the corners (web {text(self.web)}, flange {text(self.flange)})"
        remedy = "Usual is inner_radius + thickness."
        return [Problem("outer_radius", rule, text(outer), remedy)]

    def _outer(self) -> list[Corner]:
        return _rectangle(-self.width / 2, self.width / 2, self.depth / 2, self.outer_radius, "outer_radius")

    def _cell(self, k: int) -> list[Corner]:
        left = self.web + k * (self.cell_width + self.web) - self.width / 2
        right = left + self.cell_width if k < self.cells - 1 else self.width / 2 - self.web
        return _rectangle(left, right, self.depth / 2 - self.flange, self.inner_radius, "inner_radius")

    def face(self) -> Face:
        """The outer loop and one hole per cell [mm]."""
        return Face(rounded_loop(self._outer()), tuple(rounded_loop(self._cell(k)) for k in range(self.cells)))

    def walls(self) -> tuple[Wall, ...]:
        """Top and bottom flange, then "web 1" to "web n + 1" from left to right, joined on their mid-lines.

        Each has points (2, 2) [mm].
        """
        y, z, step = (self.width - self.web) / 2, (self.depth - self.flange) / 2, self.cell_width + self.web
        top = Wall("top flange", ((-y, z), (y, z)), self.flange)
        bottom = Wall("bottom flange", ((-y, -z), (y, -z)), self.flange)
        webs = [Wall(f"web {k + 1}", ((k * step - y, -z), (k * step - y, z)), self.web) for k in range(self.cells + 1)]
        return (top, bottom, *webs)


def _rectangle(left: float, right: float, top: float, radius: float, key: str) -> list[Corner]:
    """Four corners, counter-clockwise, symmetric about z = 0."""
    points = ((left, -top), (right, -top), (right, top), (left, top))
    where = "" if key == "outer_radius" else " of the cell"
    return [Corner(p, radius, key, side + where) for p, side in zip(points, _SIDES, strict=True)]
