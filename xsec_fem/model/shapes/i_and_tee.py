"""I-shape and tee: a web in the middle, flanges to both sides."""

from __future__ import annotations

from pydantic import Field

from xsec_fem.model.rounding import Corner, mirrored
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import CorneredShape, NotNegative, Positive, Problem, fills, not_below
from xsec_fem.model.shapes.flange import Flange, flange_problems

_WEB_REMEDY = "Give the thickness of the web."


class IShape(CorneredShape):
    """An I or H, rolled or welded, its bounding box about the origin.

    `taper` is the slope of the inner flange faces, 0.08 for 8 %; `flange` is then the thickness at mid-outstand, half
    way from the web's face to the flange's tip. `toe_radius` rounds the inner edge of the flange tips.
    """

    depth: Positive = Field(description="Give the whole height.")
    width: Positive = Field(description="Give the width of the flanges, over all.")
    web: Positive = Field(description="Give the web's thickness.")
    flange: Positive = Field(description="Give the flanges' thickness, at mid-outstand when tapered.")
    root_radius: NotNegative = Field(0.0, description="Give the radius between web and flanges.")
    bottom_width: Positive | None = Field(None, description="Give the width of the bottom flange.")
    bottom_flange: Positive | None = Field(None, description="Give the bottom flange's thickness.")
    toe_radius: NotNegative = Field(0.0, description="Give the radius on the inner edge of the flange tips.")
    taper: NotNegative = Field(0.0, description="Give the slope of the inner flange faces, 0.08 for 8 %.")

    def _flanges(self) -> tuple[Flange, Flange]:
        """Top and bottom."""
        key = "flange" if self.bottom_flange is None else "bottom_flange"
        bottom_width = self.bottom_width or self.width
        return (
            Flange(self.flange, (self.width - self.web) / 2, self.taper),
            Flange(self.bottom_flange or self.flange, (bottom_width - self.web) / 2, self.taper, key),
        )

    def size_problems(self) -> list[Problem]:
        """The web thinner than both widths; the flanges within the depth, their taper possible."""
        found = []
        if fills(self.web, self.width):
            found.append(not_below("web", self.web, self.width, "the width", _WEB_REMEDY))
        if self.bottom_width is not None and fills(self.web, self.bottom_width):
            found.append(not_below("web", self.web, self.bottom_width, "bottom_width", _WEB_REMEDY))
        return found or flange_problems(self.depth, self._flanges())

    def corners(self) -> list[Corner]:
        """Twelve corners [mm], counter-clockwise from the bottom right."""
        top, bottom = self._flanges()
        z, y, y_top, y_bottom = self.depth / 2, self.web / 2, self.width / 2, (self.bottom_width or self.width) / 2
        half = [
            Corner((y_bottom, -z), edge="tip of the bottom flange"),
            Corner((y_bottom, bottom.tip - z), self.toe_radius, "toe_radius", "inner face of the bottom flange"),
            Corner((y, bottom.root - z), self.root_radius, "root_radius", "web"),
            Corner((y, z - top.root), self.root_radius, "root_radius", "inner face of the top flange"),
            Corner((y_top, z - top.tip), self.toe_radius, "toe_radius", "tip of the top flange"),
            Corner((y_top, z), edge="top"),
        ]
        return mirrored(half, "y")

    def walls(self) -> tuple[Wall, ...]:
        """Web between the flanges' mid-lines, top and bottom flange: points (2, 2) each [mm]."""
        top, bottom = self._flanges()
        z_top, z_bottom = (self.depth - top.thickness) / 2, (bottom.thickness - self.depth) / 2
        y_top, y_bottom = self.width / 2, (self.bottom_width or self.width) / 2
        return (
            Wall("web", ((0.0, z_bottom), (0.0, z_top)), self.web),
            Wall("top flange", ((-y_top, z_top), (y_top, z_top)), top.thickness),
            Wall("bottom flange", ((-y_bottom, z_bottom), (y_bottom, z_bottom)), bottom.thickness),
        )


class Tee(CorneredShape):
    """A tee, flange on top and web down, its bounding box about the origin; numbers as for the I-shape."""

    depth: Positive = Field(description="Give the whole height.")
    width: Positive = Field(description="Give the width of the flange.")
    web: Positive = Field(description="Give the web's thickness.")
    flange: Positive = Field(description="Give the flange's thickness, at mid-outstand when tapered.")
    root_radius: NotNegative = Field(0.0, description="Give the radius between web and flange.")
    toe_radius: NotNegative = Field(0.0, description="Give the radius on the inner edge of the flange tips.")
    taper: NotNegative = Field(0.0, description="Give the slope of the inner flange face, 0.08 for 8 %.")

    def _flange(self) -> Flange:
        return Flange(self.flange, (self.width - self.web) / 2, self.taper)

    def size_problems(self) -> list[Problem]:
        """The web thinner than the width, the flange within the depth, its taper possible."""
        if fills(self.web, self.width):
            return [not_below("web", self.web, self.width, "the width", _WEB_REMEDY)]
        return flange_problems(self.depth, [self._flange()])

    def corners(self) -> list[Corner]:
        """Eight corners [mm], counter-clockwise from the web's bottom right."""
        flange, y, z = self._flange(), self.web / 2, self.depth / 2
        half = [
            Corner((y, -z), edge="web"),
            Corner((y, z - flange.root), self.root_radius, "root_radius", "inner face of the flange"),
            Corner((self.width / 2, z - flange.tip), self.toe_radius, "toe_radius", "tip of the flange"),
            Corner((self.width / 2, z), edge="top"),
        ]
        return mirrored(half, "y")

    def walls(self) -> tuple[Wall, ...]:
        """Web up to the flange's mid-line, and the top flange: points (2, 2) each [mm]."""
        z, y = (self.depth - self.flange) / 2, self.width / 2
        return (
            Wall("web", ((0.0, -self.depth / 2), (0.0, z)), self.web),
            Wall("top flange", ((-y, z), (y, z)), self.flange),
        )
