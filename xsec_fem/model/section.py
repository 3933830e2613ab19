"""What the user said, after reading: frozen objects without numerics.

A `Section` is what `read_section` returns and what the mesher, the solver and the sketch take. All lengths are in the
file's own axes (y to the right, z up) and units.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from xsec_fem.model.outline import Face, Point
from xsec_fem.units import UnitSystem


@dataclass(frozen=True)
class Material:
    """Elastic constants and design strengths of one material.

    E [MPa], Gxy and Gxz [MPa] in the part's own axes, nu_xy and nu_xz [-]; an isotropic material has equal pairs.
    `shear_strength` and `strength` [MPa] are design values, None when not given. `G_given` is False when G was taken
    as E/(2(1+nu)).
    """

    name: str
    E: float
    Gxy: float
    Gxz: float
    nu_xy: float
    nu_xz: float
    shear_strength: float | None = None
    strength: float | None = None
    G_given: bool = True

    @property
    def isotropic(self) -> bool:
        """True when the constants do not depend on the grain angle."""
        return self.Gxy == self.Gxz and self.nu_xy == self.nu_xz


@dataclass(frozen=True)
class MeshRegion:
    """A region of a mesh or geometry file that stands for a part.

    `region` is a physical name or number (.msh, .geo), a cell-data "region" number or name (.vtu), or None for the
    whole file; `scale` multiplies the file's coordinates.
    """

    path: Path
    region: str | int | None = None
    scale: float = 1.0


@dataclass(frozen=True)
class Wall:
    """A straight or bent wall of a named shape, "web" or "top flange": mid-line points and thickness [mm]."""

    name: str
    points: tuple[Point, ...]
    thickness: float
    closed: bool = False


@dataclass(frozen=True)
class Part:
    """One part: a face in the file's axes, or a region of a mesh file; exactly one of the two is set.

    `grain_angle` [deg] is in the section's axes: the file's angle, mirrored and turned with the part; 0 when isotropic.
    `bead_of` is the weld joint whose bead it is, None for a part of the file.
    """

    name: str
    material: str
    shape: str
    face: Face | None = None
    mesh_region: MeshRegion | None = None
    embedded_in: str | None = None
    grain_angle: float = 0.0
    walls: tuple[Wall, ...] = ()
    bead_of: str | None = None


@dataclass(frozen=True)
class FilletWeld:
    """Numbers of a fillet weld [mm]: either `throat` or `leg` is None.

    `sides` is 1, 2, or the end of each faying line that is welded ("left", "right", "top", "bottom"); `penetration` is how
    far the bead reaches into the faying line; `material` None: that of the first side.
    """

    throat: float | None = None
    leg: float | None = None
    sides: int | str = 2
    penetration: float = 0.0
    material: str | None = None


@dataclass(frozen=True)
class Fasteners:
    """Rows of fasteners at coordinates y (z where the faying line is steeper than 45 deg) [mm]; capacity of one [N]."""

    rows: tuple[float, ...]
    diameter: float
    capacity: float
    spacing: float | None = None


@dataclass(frozen=True)
class Bond:
    """Where a joint that is a slit still carries: a weld bead, or the strip of a fastener row.

    Attributes
    ----------
    name : "bead 1", "row y = 70".
    strip : ends of the stretch of the faying line that stays bonded (row, penetration) [mm]; None without one.
    bead : name of the bead's part.
    throat : from the root to the nearest point of the bead's surface [mm].
    leg : length of the bead's legs [mm].
    angle_deg : angle between the fusion faces [deg].
    """

    name: str
    strip: tuple[Point, Point] | None = None
    bead: str | None = None
    throat: tuple[Point, Point] | None = None
    leg: float | None = None
    angle_deg: float | None = None


@dataclass(frozen=True)
class Joint:
    """A declared joint between two groups of parts; `strength` [MPa] of glue or on the throat of a weld.

    `bonds` and `vertices` (points of its faying lines where the mesh needs a node) follow from the parts' outlines:
    `xsec_fem.model.joint_geometry` fills them in.
    """

    name: str
    first: tuple[str, ...]
    second: tuple[str, ...]
    kind: str
    strength: float | None = None
    weld: FilletWeld | None = None
    fasteners: Fasteners | None = None
    bonds: tuple[Bond, ...] = ()
    vertices: tuple[Point, ...] = ()

    @property
    def is_slit(self) -> bool:
        """True when the faying faces come apart in the mesh, but for the bonds."""
        return self.kind != "glue"


@dataclass(frozen=True)
class Cut:
    """A straight cut from one point (y, z) to another [mm], to be looked at."""

    name: str
    start: Point
    end: Point


@dataclass(frozen=True)
class Probe:
    """A point (y, z) [mm] whose stresses are wanted."""

    name: str
    at: Point


@dataclass(frozen=True)
class Actions:
    """Section forces and moments on the +x face; N, Vy, Vz [N], T, My, Mz [N mm].

    `load_point` is where Vy and Vz act: "shear centre", "centroid", a point (y, z), or None when the user did not say
    (then the shear centre, with a warning). T is counted in addition to the torque of the shear about the shear centre.
    """

    name: str = "actions"
    N: float = 0.0
    Vy: float = 0.0
    Vz: float = 0.0
    T: float = 0.0
    My: float = 0.0
    Mz: float = 0.0
    load_point: str | Point | None = None


@dataclass(frozen=True)
class SolveSettings:
    """The [solve] table. `order` None: 4, or that of the parts' mesh file when above 1; `mesh_file`: where to keep it.

    `corner_distance` [mm] from sharp corners at which stresses are read, None for a tenth of the wall; `try_radius` [mm] is
    a root radius to solve again with.
    """

    accuracy: float = 0.01
    order: int | None = None
    nu_effect: bool = True
    mesh_file: Path | None = None
    corner_distance: float | None = None
    try_radius: float | None = None


@dataclass(frozen=True)
class Section:
    """A whole section file, resolved. `path` is the file as given, None when built in Python."""

    title: str
    units: UnitSystem
    materials: Mapping[str, Material]
    parts: tuple[Part, ...]
    joints: tuple[Joint, ...] = ()
    cuts: tuple[Cut, ...] = ()
    probes: tuple[Probe, ...] = ()
    actions: tuple[Actions, ...] = ()
    solve: SolveSettings = field(default_factory=SolveSettings)
    path: Path | None = None
    sha256: str = ""
    cautions: tuple[tuple[str, str], ...] = ()

    def part(self, name: str) -> Part:
        """Return the part of that name; KeyError when there is none."""
        for part in self.parts:
            if part.name == name:
                return part
        raise KeyError(f"no part {name!r}; there are {[part.name for part in self.parts]}")
