"""Channel and zed: one flange end on the web; with or without lips."""

from __future__ import annotations

from pydantic import Field

from xsec_fem.model.outline import Point
from xsec_fem.model.rounding import Corner, half_turned, mirrored
from xsec_fem.model.section import Wall
from xsec_fem.model.shapes.base import CorneredShape, NotNegative, Positive, Problem, fills, not_below, text
from xsec_fem.model.shapes.flange import Flange, flange_problems


class Channel(CorneredShape):
    """A channel, web on the left and flanges to the right, its bounding box about the origin.

    `taper`, `toe_radius` as for the I-shape. Tables of UPN channels give the flange's thickness at half the whole width
    instead: take off taper * web / 2. `lip` is the whole length of the lips, from the flange's outer face, turned
    inward, as thick as the flange; `root_radius` then also rounds the corner between flange and lip.
    """

    depth: Positive = Field(description="Give the whole height.")
    width: Positive = Field(description="Give the whole width.")
    web: Positive = Field(description="Give the web's thickness.")
    flange: Positive = Field(description="Give the flanges' thickness, at mid-outstand when tapered.")
    root_radius: NotNegative = Field(0.0, description="Give the radius between web and flanges.")
    toe_radius: NotNegative = Field(0.0, description="Give the radius on the inner edge of the flange tips.")
    taper: NotNegative = Field(0.0, description="Give the slope of the inner flange faces, 0.08 for 8 %.")
    lip: Positive | None = Field(None, description="Give the lips' whole length from the flange's outer face.")

    def _flange(self) -> Flange:
        return Flange(self.flange, self.width - self.web, self.taper)

    def size_problems(self) -> list[Problem]:
        """The web thinner than the width, the flanges within the depth, lips that fit and stand alone."""
        found = [] if self.lip is None else _lip_problems(self.lip, self.flange, self.depth / 2, "half the depth")
        found += _web_problems(self.web, self.width, self.flange if self.lip is not None else 0.0)
        for key, value in (("taper", self.taper), ("toe_radius", self.toe_radius)):
            if self.lip is not None and value > 0:
                rule = "must not be given beside lip"
                found.append(Problem(key, rule, text(value), "Leave it out, or draw the shape as an outline."))
        return found or flange_problems(self.depth, [self._flange()] * 2)

    def corners(self) -> list[Corner]:
        """Eight corners [mm], twelve with lips, counter-clockwise from the bottom left."""
        flange, y, z = self._flange(), self.width / 2, self.depth / 2
        root = Corner((self.web - y, flange.root - z), self.root_radius, "root_radius", "web")
        if self.lip is None:
            tip = [
                Corner((y, -z), edge="tip of the flange"),
                Corner((y, flange.tip - z), self.toe_radius, "toe_radius", "inner face of the flange"),
            ]
        else:
            tip = [
                Corner((y, -z)),
                Corner((y, self.lip - z)),
                Corner((y - self.flange, self.lip - z), edge="inner face of the lip"),
                Corner((y - self.flange, self.flange - z), self.root_radius, "root_radius", "inner face of the flange"),
            ]
        return mirrored([Corner((-y, -z), edge="bottom"), *tip, root], "z")

    def walls(self) -> tuple[Wall, ...]:
        """Web, top and bottom flange, and the lips, all joined on their mid-lines: points (2, 2) each [mm]."""
        y, z, y_web = self.width / 2, (self.depth - self.flange) / 2, (self.web - self.width) / 2
        tip = y if self.lip is None else y - self.flange / 2
        found = [
            Wall("web", ((y_web, -z), (y_web, z)), self.web),
            Wall("top flange", ((y_web, z), (tip, z)), self.flange),
            Wall("bottom flange", ((y_web, -z), (tip, -z)), self.flange),
        ]
        if self.lip is not None:
            end = self.depth / 2 - self.lip
            found.append(Wall("top lip", ((tip, z), (tip, end)), self.flange))
            found.append(Wall("bottom lip", ((tip, -z), (tip, -end)), self.flange))
        return tuple(found)


class Zed(CorneredShape):
    """A zed, top flange to the right and bottom flange to the left, its bounding box about the origin.

    `width` is the whole width from tip to tip, so that each flange is (width + web)/2 wide. `lip` is the whole length
    of the lips, from the flange's outer face, turned inward; `root_radius` also rounds the corner of flange and lip.
    """

    depth: Positive = Field(description="Give the whole height.")
    width: Positive = Field(description="Give the whole width, tip to tip.")
    web: Positive = Field(description="Give the web's thickness.")
    flange: Positive = Field(description="Give the flanges' thickness.")
    root_radius: NotNegative = Field(0.0, description="Give the radius between web and flanges.")
    lip: Positive | None = Field(None, description="Give the lips' whole length from the flange's outer face.")

    def size_problems(self) -> list[Problem]:
        """The web thinner than the width, the flanges within the depth, lips that fit."""
        found = [] if self.lip is None else _lip_problems(self.lip, self.flange, self.depth, "the depth")
        found += _web_problems(self.web, self.width, 2 * self.flange if self.lip is not None else 0.0)
        return found or flange_problems(self.depth, [Flange(self.flange, (self.width - self.web) / 2)] * 2)

    def corners(self) -> list[Corner]:
        """Eight corners [mm], twelve with lips, counter-clockwise from the web's bottom right."""
        y, z, z_inner = self.width / 2, self.depth / 2, self.depth / 2 - self.flange
        half = [
            Corner((self.web / 2, -z), edge="web"),
            Corner((self.web / 2, z_inner), self.root_radius, "root_radius", "inner face of the flange"),
        ]
        if self.lip is None:
            half.append(Corner((y, z_inner)))
        else:
            inner = Corner((y - self.flange, z_inner), self.root_radius, "root_radius", "inner face of the lip")
            half += [inner, Corner((y - self.flange, z - self.lip)), Corner((y, z - self.lip))]
        return half_turned([*half, Corner((y, z))])

    def walls(self) -> tuple[Wall, ...]:
        """Web, top and bottom flange, and the lips, all joined on their mid-lines: points (2, 2) each [mm]."""
        z, tip = (self.depth - self.flange) / 2, self.width / 2 - (0.0 if self.lip is None else self.flange / 2)
        top: list[tuple[str, tuple[Point, Point]]] = [("flange", ((0.0, z), (tip, z)))]
        if self.lip is not None:
            top.append(("lip", ((tip, z), (tip, self.depth / 2 - self.lip))))
        found = [Wall("web", ((0.0, -z), (0.0, z)), self.web)]
        for name, (start, end) in top:
            found.append(Wall(f"top {name}", (start, end), self.flange))
            turned = ((-start[0], -start[1]), (-end[0], -end[1]))
            found.append(Wall(f"bottom {name}", turned, self.flange))
        return tuple(found)


def _lip_problems(lip: float, flange: float, limit: float, what: str) -> list[Problem]:
    """A lip longer than the flange's thickness and shorter than its room, which `what` puts in words."""
    if fills(flange, lip):
        remedy = "Give its whole length from the flange's outer face, or leave lip out."
        return [Problem("lip", f"must be more than the flange's thickness ({text(flange)})", text(lip), remedy)]
    if fills(lip, limit):
        return [not_below("lip", lip, limit, what, "Give a shorter lip.")]
    return []


def _web_problems(web: float, width: float, lips: float) -> list[Problem]:
    """A web that leaves room for the outstands and for the thickness of the lips."""
    if not fills(web + lips, width):
        return []
    what = "the width less the thickness of the lips" if lips else "the width"
    return [not_below("web", web, width - lips, what, "Give the thickness of the web.")]
