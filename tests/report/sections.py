"""Small sections to draw and to report on, as section files."""

BOARDS = """
title = "Two boards"
units = "N mm"

[materials.board]
E = 11600
G = 650
nu = 0.35
shear_strength = 1.6

[[parts]]
name = "lower"
material = "board"
shape = "rectangle"
width = 100
height = 40
at = [0, -20]

[[parts]]
name = "upper"
material = "board"
shape = "rectangle"
width = 100
height = 40
at = [0, 20]

[[joints]]
name = "glue"
between = ["lower", "upper"]
kind = "glue"
strength = 2.0

[[cuts]]
name = "middle"
from = [-50, 10]
to = [50, 10]

[[probes]]
name = "gauge"
at = [0, 0]

[[actions]]
name = "support"
Vz = 4000
load_point = "shear centre"
"""

TEE = """
title = "Welded tee"
units = "N mm"

[materials.steel]
E = 210000
nu = 0.3

[[parts]]
name = "flange"
material = "steel"
shape = "rectangle"
width = 120
height = 12
anchor = "bottom"
at = [0, 100]

[[parts]]
name = "web"
material = "steel"
shape = "rectangle"
width = 6
height = 100
anchor = "bottom"
at = [0, 0]

[[actions]]
name = "down, at the centroid"
Vz = -30000
My = 1e6
load_point = "centroid"

[[actions]]
name = "aside"
Vy = 5000
load_point = [40, 112]
"""

TUBE = """
title = "Thin tube"
units = "kN m"

[materials.steel]
E = 210e6
nu = 0.3

[[parts]]
name = "tube"
material = "steel"
shape = "ring"
diameter = 0.2
thickness = 0.002

[[actions]]
name = "shear and torque"
Vz = 40
T = 5
load_point = "centroid"
"""

DECK = """
title = "Deck of a footbridge with a name so long that it has to be broken into several lines before it fits on the paper"
units = "kip in"

[materials.steel]
E = 29000
nu = 0.3

[[parts]]
name = "deck plate"
material = "steel"
shape = "rectangle"
width = 160
height = 4

[[actions]]
name = "the governing combination of dead load, crowd, wind from the left and a service vehicle at the kerb"
Vz = 12.5
Vy = -1.5
T = 3
load_point = [70, 2]
"""

MAST = """
title = "Mast with $ and _ in its name^2"
units = "lbf in"

[materials.steel]
E = 29e6
nu = 0.3

[[parts]]
name = "blade $x"
material = "steel"
shape = "rectangle"
width = 0.5
height = 20

[[actions]]
name = "gust $"
Vz = 900
load_point = "shear centre"
"""

AXIAL = """
title = "Tie"
units = "N mm"

[materials.steel]
E = 210000
nu = 0.3

[[parts]]
name = "tie"
material = "steel"
shape = "rectangle"
width = 20
height = 20

[[actions]]
name = "pull"
N = 1000
"""

ALL = {"boards": BOARDS, "tee": TEE, "tube": TUBE, "deck": DECK, "mast": MAST, "axial": AXIAL}
