"""Sections with welds, rows, contact, cells, sharp corners and cuts, as section files."""

from __future__ import annotations

from tests.report.sections import TEE

FILLETS = (
    TEE.replace('title = "Welded tee"', 'title = "Tee with fillets"')
    + """
[[joints]]
name = "fillets"
between = ["flange", "web"]
kind = "fillet weld"
throat = 4
strength = 200
"""
)

STEEL = """
units = "N mm"

[materials.steel]
E = 210000
nu = 0.3
"""

ROWS = (
    'title = "Strap in two rows"\n'
    + STEEL
    + """
[[parts]]
name = "beam"
material = "steel"
shape = "rectangle"
width = 100
height = 60
at = [0, -30]

[[parts]]
name = "strap"
material = "steel"
shape = "rectangle"
width = 100
height = 10
at = [0, 5]

[[parts]]
name = "rail"
material = "steel"
shape = "rectangle"
width = 20
height = 10
at = [0, 15]

[[joints]]
name = "bolts"
between = ["beam", "strap"]
kind = "fasteners"
rows = [-30, 30]
diameter = 10
capacity = 20000
spacing = 60

[[joints]]
name = "rail glue"
between = ["strap", "rail"]
kind = "glue"

[[actions]]
name = "twisted"
Vz = 50000
T = 1e6
load_point = "shear centre"
"""
)

SHARP = (
    'title = "Sharp angle"\n'
    + STEEL
    + """
[[parts]]
name = "angle"
material = "steel"
shape = "angle"
depth = 10
width = 8
thickness = 1
anchor = "bottom left"
at = [0, 0]

[[cuts]]
name = "leg"
from = [-1, 5]
to = [2, 5]

[[actions]]
name = "down and twisted"
Vz = -100
T = 50
load_point = "centroid"

[solve]
try_radius = 0.2
"""
)

BOX = (
    'title = "Box"\n'
    + STEEL
    + """
[[parts]]
name = "box"
material = "steel"
shape = "box"
depth = 100
width = 60
web = 4
flange = 4

[[cuts]]
name = "both webs"
from = [-31, 0]
to = [31, 0]

[[cuts]]
name = "one web"
from = [-31, 10]
to = [0, 10]

[[actions]]
name = "sideways"
Vy = 1000
load_point = "centroid"

[[actions]]
name = "pull"
N = 1000
"""
)

PROFILE = (
    'title = "Rolled profile"\n'
    + STEEL
    + """
[[parts]]
name = "profile"
material = "steel"
shape = "i_shape"
depth = 360
width = 300
web = 12
flange = 20
root_radius = 24

[[cuts]]
name = "neutral axis"
from = [-10, 0]
to = [10, 0]

[[actions]]
name = "vertical"
Vz = -300000
load_point = "centroid"
"""
)

MORE = {"fillets": FILLETS, "rows": ROWS, "sharp": SHARP, "box": BOX, "profile": PROFILE}
