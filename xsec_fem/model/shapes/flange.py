"""A flange of a rolled or welded shape: tapered or not, and the rules on its sizes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from xsec_fem.model.shapes.base import Problem, fills, not_below, text


@dataclass(frozen=True)
class Flange:
    """Thickness at mid-outstand and outstand (web face to tip) [mm], taper: slope of the inner face.

    name : of the taper-free number that gives the thickness, "flange" or "bottom_flange".
    """

    thickness: float
    outstand: float
    taper: float = 0.0
    key: str = "flange"

    @property
    def tip(self) -> float:
        """Thickness at the tip [mm]."""
        return self.thickness - self.taper * self.outstand / 2

    @property
    def root(self) -> float:
        """Thickness at the web face, before the fillet [mm]."""
        return self.thickness + self.taper * self.outstand / 2


def flange_problems(depth: float, flanges: Sequence[Flange]) -> list[Problem]:
    """Return broken rules of one or two flanges on a web within the depth [mm]; two equal ones are named together."""
    total = sum(flange.thickness for flange in flanges)
    if fills(total, depth):
        remedy = "Give the thickness of the flange, not its width."
        if len(flanges) == 2 and flanges[0].key == flanges[1].key:
            return [not_below("flange", flanges[0].thickness, depth / 2, "half the depth", remedy)]
        key, value = flanges[-1].key, flanges[-1].thickness
        if len(flanges) == 1:
            return [not_below(key, value, depth, "the depth", remedy)]
        return [not_below(key, value, depth - flanges[0].thickness, "depth - flange", remedy)]
    taper, found = flanges[0].taper, []
    for flange in flanges:
        if fills(flange.thickness - flange.tip, flange.thickness):
            found.append((2 * flange.thickness / flange.outstand, "must leave some thickness at the flange tip"))
    if fills(sum(flange.root for flange in flanges), depth):
        limit = 2 * (depth - total) / sum(flange.outstand for flange in flanges)
        found.append((limit, "must leave some web between the flanges"))
    if not found:
        return []
    limit, words = min(found)
    remedy = "Give the slope as a ratio: 0.08 for 8 %."
    return [Problem("taper", f"{words}: less than {text(limit)}", text(taper), remedy)]
