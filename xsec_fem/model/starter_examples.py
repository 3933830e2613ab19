"""The numbers of the starter files: one example per shape, with a remark for every number. Lengths in mm."""

from __future__ import annotations

from dataclasses import dataclass

Value = float | int | bool | str | list["Value"] | dict[str, "Value"]


@dataclass(frozen=True)
class Entry:
    """One `key = value  # remark` line.

    length : True when the value is a length (or points) in mm, to be put into the file's unit.
    optional : True for a line that is written behind a #, to be used when wanted.
    """

    key: str
    value: Value
    remark: str
    length: bool = True
    optional: bool = False


def _option(key: str, value: Value, remark: str, length: bool = True) -> Entry:
    return Entry(key, value, remark, length, optional=True)


_ROOT = Entry("root_radius", 15, "optional: radius between web and flanges")
EXAMPLES: dict[str, tuple[Entry, ...]] = {
    "rectangle": (
        Entry("width", 100, "size along y"),
        Entry("height", 200, "size along z"),
        _option("corner_radius", 10, "optional: radius of all four corners"),
    ),
    "circle": (Entry("diameter", 120, "outer diameter"),),
    "ellipse": (Entry("width", 160, "whole size along y"), Entry("height", 100, "whole size along z")),
    "ring": (Entry("diameter", 200, "outer diameter"), Entry("thickness", 8, "thickness of the wall")),
    "sector": (
        Entry("radius", 100, "outer radius"),
        Entry("from_deg", 0, "where it starts, degrees counter-clockwise from +y", length=False),
        Entry("to_deg", 180, "where it ends, degrees; more than from_deg", length=False),
        _option("thickness", 10, "optional: a ring sector, its wall measured inward"),
    ),
    "polygon": (
        Entry("points", [[0, 0], [120, 0], [120, 20], [20, 20], [20, 150], [0, 150]], "corners [y, z] in order"),
        _option("radius", 5, "optional: radius of all corners; or radii = [...], one per corner"),
    ),
    "outline": (
        Entry("start", [0, 0], "first point [y, z]"),
        Entry(
            "steps",
            [
                {"to": [100, 0]},
                {"to": [120, 20], "centre": [100, 20]},
                {"to": [120, 80]},
                {"to": [0, 80], "through": [60, 120]},
                {"to": [0, 0]},
            ],
            "straight to a point; an arc about centre; an arc through a point; the last one closes the outline",
        ),
    ),
    "strip": (
        Entry("points", [[70, 25], [70, 0], [0, 0], [0, 180], [70, 180], [70, 155]], "mid-line [y, z]"),
        Entry("thickness", 3, "thickness of the sheet"),
        _option("bend_radius", 4, "optional: inner radius of all bends; sharp when left out"),
        _option("closed", False, "optional: true joins the last point to the first", length=False),
    ),
    "plate": (
        Entry("from", [0, 0], "one end of the mid-line [y, z]"),
        Entry("to", [0, 300], "the other end"),
        Entry("thickness", 12, "thickness across the mid-line"),
    ),
    "i_shape": (
        Entry("depth", 300, "whole height"),
        Entry("width", 150, "width of the flanges"),
        Entry("web", 7.1, "thickness of the web"),
        Entry("flange", 10.7, "thickness of the flanges"),
        _ROOT,
        _option("bottom_width", 180, "optional: width of the bottom flange when it differs"),
        _option("bottom_flange", 12, "optional: thickness of the bottom flange when it differs"),
        _option("toe_radius", 3, "optional: radius on the inner edge of the flange tips"),
        _option("taper", 0.08, "optional: slope of the inner flange faces, 0.08 for 8 %", length=False),
    ),
    "tee": (
        Entry("depth", 150, "whole height"),
        Entry("width", 150, "width of the flange"),
        Entry("web", 8, "thickness of the web"),
        Entry("flange", 12, "thickness of the flange"),
        _ROOT,
        _option("toe_radius", 3, "optional: radius on the inner edge of the flange tips"),
        _option("taper", 0.02, "optional: slope of the inner flange face, 0.02 for 2 %", length=False),
    ),
    "channel": (
        Entry("depth", 200, "whole height"),
        Entry("width", 75, "whole width"),
        Entry("web", 8.5, "thickness of the web, on the left"),
        Entry(
            "flange", 11.5, "thickness of the flanges, halfway out when tapered (U tables give it at half the width)"
        ),
        Entry("root_radius", 11.5, "optional: radius between web and flanges"),
        _option("lip", 40, "optional: whole length of lips at the flange tips; not with toe_radius or taper"),
    ),
    "angle": (
        Entry("depth", 150, "vertical leg, over all"),
        Entry("width", 90, "horizontal leg, over all; the heel is at the bottom left"),
        Entry("thickness", 10, "thickness of both legs"),
        Entry("root_radius", 12, "optional: radius between the legs"),
        Entry("toe_radius", 5, "optional: radius on the inner edge of the leg tips"),
    ),
    "zed": (
        Entry("depth", 200, "whole height"),
        Entry("width", 80, "width of each flange, over the web"),
        Entry("web", 8, "thickness of the web"),
        Entry("flange", 8, "thickness of the flanges"),
        Entry("root_radius", 8, "optional: radius between web and flanges"),
        _option("lip", 30, "optional: whole length of lips at the flange tips"),
    ),
    "box": (
        Entry("depth", 200, "whole height"),
        Entry("width", 120, "whole width"),
        Entry("web", 6, "thickness of the upright walls"),
        Entry("flange", 8, "thickness of the top and bottom wall"),
        _option("outer_radius", 12, "optional: radius of the outer corners"),
        _option("inner_radius", 4, "optional: radius of the corners of each cell"),
        _option("cells", 2, "optional: number of equal cells side by side", length=False),
    ),
    "file": (
        Entry("path", "section.msh", "a mesh or geometry file (.msh, .vtu, .geo) beside this one", length=False),
        _option("region", "web", "optional: name or number of one physical region in it", length=False),
        _option("scale", 1.0, "optional: factor on the file's coordinates, 1000 for a mesh in m", length=False),
    ),
}

# per unit system: factor on mm; shear force; steel E, shear strength; board E, G, shear strength; glue strength.
# The inch sizes are round numbers (1 in for 25 mm), not converted ones.
STARTER_NUMBERS: dict[str, dict[str, float]] = {
    "N mm": {"length": 1, "Vz": 10000, "steel_E": 210000, "steel_strength": 120,
             "board_E": 11600, "board_G": 650, "board_strength": 1.6, "glue": 1.4},
    "kN m": {"length": 1e-3, "Vz": 10, "steel_E": 210e6, "steel_strength": 120e3,
             "board_E": 11.6e6, "board_G": 650e3, "board_strength": 1600, "glue": 1400},
    "lbf in": {"length": 0.04, "Vz": 2000, "steel_E": 30e6, "steel_strength": 17000,
               "board_E": 1.7e6, "board_G": 95000, "board_strength": 230, "glue": 200},
    "kip in": {"length": 0.04, "Vz": 2, "steel_E": 30000, "steel_strength": 17,
               "board_E": 1700, "board_G": 95, "board_strength": 0.23, "glue": 0.2},
}  # fmt: skip
