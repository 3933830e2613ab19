"""The shapes of the section file, by the word after `shape =`.

A new shape is a subclass of `ShapeSpec` in a module here and one line in `SHAPES`.
"""

from __future__ import annotations

from xsec_fem.model.shapes.angle import Angle
from xsec_fem.model.shapes.base import Problem, ShapeSpec
from xsec_fem.model.shapes.box import Box
from xsec_fem.model.shapes.channel_and_zed import Channel, Zed
from xsec_fem.model.shapes.circular import Circle, Ellipse, Ring, Sector
from xsec_fem.model.shapes.file import FileShape
from xsec_fem.model.shapes.free_outline import Outline
from xsec_fem.model.shapes.i_and_tee import IShape, Tee
from xsec_fem.model.shapes.straight import Polygon, Rectangle
from xsec_fem.model.shapes.strips import Plate, Strip

__all__ = ["SHAPES", "Problem", "ShapeSpec"]

SHAPES: dict[str, type[ShapeSpec]] = {
    "rectangle": Rectangle,
    "circle": Circle,
    "ellipse": Ellipse,
    "ring": Ring,
    "sector": Sector,
    "polygon": Polygon,
    "outline": Outline,
    "strip": Strip,
    "plate": Plate,
    "i_shape": IShape,
    "tee": Tee,
    "channel": Channel,
    "angle": Angle,
    "zed": Zed,
    "box": Box,
    "file": FileShape,
}
