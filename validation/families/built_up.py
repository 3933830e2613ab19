"""Built-up beams: the flow of each joint by V S/I, and what it asks of glue, welds and fasteners.

Signs are those of the joint: positive along +x on the part named first, here always what is cut off above or outside.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import sqrt
from typing import Any

import numpy as np

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..closed_form.built_up import BuiltUp, Piece, bead, rectangle
from ..closed_form.flexure import rectangle_flexure
from ..closed_form.independent_values import RING_SECTORS
from ..reading import constant
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GOODIER, at

GROUP = "built-up beams"
QUICK = ("three-planks", "angle-both", "five-boards", "screws1", "seam")
JOURAWSKI = Source(
    "D. I. Jourawski", "V S/(I t); any text on the strength of materials", "1856", "equilibrium of what is cut off"
)
_SERIES = Source("derived here", "series of a ring sector in r^m and r^-m", "2026", "slit tube")
_FLOW = Tolerance(
    1e-9, "the sum of the consistent nodal forces of a joint is V S/I on any mesh; round-off of a few thousand terms"
)
_SPLIT = Tolerance(
    2e-3,
    "the share of two equal beads or rows is half by symmetry; the mesh is not symmetric, and good to 1e-2 in energy at most",
)


@dataclass(frozen=True)
class _Beam:
    """A beam of pieces: one section file, one closed form."""

    name: str
    title: str
    text: str
    parts: BuiltUp
    Vy: float
    Vz: float
    unit: str = "N/mm"

    def case(
        self, quantity: str, read: Callable[[Result], float], reference: float, tolerance: Tolerance = _FLOW,
        unit: str = "N/mm", source: Source = JOURAWSKI,
    ) -> Case:  # fmt: skip
        name = quantity.replace(" ", "-").replace(",", "")
        return Case(f"built-up.{self.name}.{name}", GROUP, self.title, quantity, (self.text,), read, reference, source, "computed",
                    tolerance, unit, quick=self.name in QUICK)  # fmt: skip

    def flow(self, joint: int, cut_off: Sequence[int]) -> Case:
        """The flow of a joint."""
        return self.case(f"flow of joint {joint + 1}", joint_flow(joint), self.parts.flow(cut_off, self.Vy, self.Vz))


def joint_flow(joint: int) -> Callable[[Result], float]:
    """Return a reader of a joint's flow in the first load case, against the sign of what pulls it."""
    return lambda result: -result.cases[0].joints[joint].flow


def _plank(name: str, piece: Piece, width: float, height: float, material: str = "m") -> Table:
    return {
        "name": name,
        "material": material,
        "shape": "rectangle",
        "width": width,
        "height": height,
        "at": [piece.y, piece.z],
    }


def _joint(number: int, first: str, second: str, kind: str = "glue", **more: Any) -> Table:
    return {"name": f"joint {number}", "between": [first, second], "kind": kind, **more}


def _beam(
    name: str, title: str, sizes: Sequence[tuple[float, float, float, float, float]], joints: Sequence[Table], Vy: float = 0.0,
    Vz: float = 0.0, nu: float = 0.3,
) -> _Beam:  # fmt: skip
    """Rectangles (width, height, y, z, E) named "1", "2", ... in their order."""
    pieces = [rectangle(*size) for size in sizes]
    moduli = sorted({piece.E for piece in pieces})
    materials = {f"E{E:g}": {"E": E, "nu": nu} for E in moduli}
    parts = [
        _plank(str(k), piece, size[0], size[1], f"E{piece.E:g}")
        for k, (piece, size) in enumerate(zip(pieces, sizes, strict=True), 1)
    ]
    action = {"name": "V", "Vy": Vy, "Vz": Vz, "load_point": "shear centre"}
    text = section_text(title, parts, materials=materials, joints=joints, actions=[action])
    return _Beam(name, title, text, BuiltUp(pieces), Vy, Vz)


def cases() -> list[Case]:
    """Return planks, girders, layered and unsymmetric beams, welds, fasteners and a slit held by contact."""
    return [*_planks(), *_girder(), *_unsymmetric(), *_boards_with_poisson(), *_welds(), *_fasteners(), *_contact()]


def _planks() -> list[Case]:
    E = 10.0
    three = _beam(
        "three-planks", "three planks 200 x 40 glued flat, Vz = 12 kN",
        [(200, 40, 0, 40, E), (200, 40, 0, 0, E), (200, 40, 0, -40, E)], [_joint(1, "1", "2"), _joint(2, "3", "2")], Vz=12000.0,
    )  # fmt: skip
    i_beam = _beam(
        "planked-i", "I of three planks, flanges 150 x 40, web 40 x 220, Vz = 10 kN",
        [(150, 40, 0, 130, E), (40, 220, 0, 0, E), (150, 40, 0, -130, E)], [_joint(1, "1", "2"), _joint(2, "3", "2")], Vz=10000.0,
    )  # fmt: skip
    layered = _beam(
        "layered-i", "the same with flanges of 1.4 times the modulus, Vz = 10 kN",
        [(150, 40, 0, 130, 14), (40, 220, 0, 0, E), (150, 40, 0, -130, E)], [_joint(1, "1", "2"), _joint(2, "3", "2")], Vz=10000.0,
    )  # fmt: skip
    mean = three.case(
        "mean glue stress",
        lambda r: -(r.cases[0].joints[0].mean or 0.0),
        three.parts.flow([0], Vz=12000.0) / 200,
        unit="MPa",
    )
    return [*(beam.flow(joint, [2 * joint]) for beam in (three, i_beam, layered) for joint in (0, 1)), mean]


def _girder() -> list[Case]:
    """Unequal flanges, bonded over the web's thickness."""
    girder = _beam(
        "girder", "girder 300 x 20, web 760 x 10, 400 x 25, Vz = 900 kN",
        [(300, 20, 0, 795, 210e3), (10, 760, 0, 405, 210e3), (400, 25, 0, 12.5, 210e3)],
        [_joint(1, "1", "2"), _joint(2, "3", "2")], Vz=900e3,
    )  # fmt: skip
    return [girder.flow(0, [0]), girder.flow(1, [2])]


def _unsymmetric() -> list[Case]:
    """Two plates to an angle: Iyz is half of everything, and two materials to make it worse."""
    found = []
    for name, Vy, Vz in (("z", 0.0, 1000.0), ("y", 1000.0, 0.0), ("both", 700.0, -400.0)):
        angle = _beam(
            f"angle-{name}", f"angle of plates 20 x 120 (E = 3) and 80 x 10 (E = 1), V = ({Vy:g}, {Vz:g}) N",
            [(20, 120, 0, 0, 3.0), (80, 10, 50, -55, 1.0)], [_joint(1, "1", "2")], Vy=Vy, Vz=Vz,
        )  # fmt: skip
        found.append(angle.flow(0, [0]))
    return found


def _boards_with_poisson() -> list[Case]:
    """Five boards, G apart from E: the peak in a glue line is that of the solid rectangle's series with g = 2 nu G/E."""
    E, G, nu, V = 11600.0, 650.0, 0.35, 18000.0
    names = [str(k) for k in range(1, 6)]
    pieces = [rectangle(140, 40, 0, 40.0 * (k - 2), E) for k in range(5)]
    text = section_text(
        "five boards 140 x 40", [_plank(name, piece, 140, 40) for name, piece in zip(names, pieces, strict=True)], nu=nu, E=E, G=G,
        joints=[_joint(k, names[k - 1], names[k]) for k in range(1, 5)],
        actions=[{"name": "V", "Vz": V, "load_point": "shear centre"}], solve={"accuracy": 1e-3},
    )  # fmt: skip
    boards = _Beam("five-boards", "five boards 140 x 40 of softwood, Vz = 18 kN", text, BuiltUp(pieces), 0.0, V)
    y, z = np.array([70.0]), np.array([20.0])
    peak = V * float(rectangle_flexure(y, z, 140.0, 200.0, 2 * nu * G / E)[0, 1])
    tolerance = Tolerance(1e-3, "a boundary stress, on a mesh asked for 1e-3 in energy")
    return [
        boards.case("flow of joint 1", lambda r: r.cases[0].joints[0].flow, -boards.parts.flow([0], Vz=V)),
        boards.case("flow of joint 2", lambda r: r.cases[0].joints[1].flow, -boards.parts.flow([0, 1], Vz=V)),
        boards.case("peak of joint 3", lambda r: abs(r.cases[0].joints[2].peak or 0.0), peak, tolerance, "MPa",
                    source=at(TIMOSHENKO_GOODIER, "bending of bars, rectangular section")),
    ]  # fmt: skip


def _welds() -> list[Case]:
    """The girder with real beads: they count in I, and each carries half."""
    throat, V = 5.0, 900e3
    leg = throat * sqrt(2)
    plates = [rectangle(300, 20, 0, 795), rectangle(10, 760, 0, 405), rectangle(400, 25, 0, 12.5)]
    beads = [bead(leg, 5.0 * side, z, side > 0, z < 400) for z in (785.0, 25.0) for side in (-1, 1)]
    parts = [_plank("top", plates[0], 300, 20), _plank("web", plates[1], 10, 760), _plank("bottom", plates[2], 400, 25)]
    joints = [
        _joint(1, "top", "web", "fillet weld", throat=throat),
        _joint(2, "bottom", "web", "fillet weld", throat=throat),
    ]
    text = section_text("girder, fillet welds", parts, E=210e3, nu=0.3, joints=joints,
                        actions=[{"name": "V", "Vz": V, "load_point": "shear centre"}])  # fmt: skip
    girder = _Beam(
        "weld",
        "the girder with two fillet welds a = 5 at each flange, Vz = 900 kN",
        text,
        BuiltUp([*plates, *beads]),
        0,
        V,
    )
    found = [
        girder.case(
            "EIyy",
            constant("EIyy"),
            210e3 * girder.parts.EI[1, 1],
            Tolerance(1e-12, "straight sides; round-off"),
            "N mm²",
        )
    ]
    for joint, piece in ((0, 0), (1, 2)):
        flow = girder.parts.flow([piece], Vz=V)
        found.append(girder.flow(joint, [piece]))
        found.append(
            girder.case(f"throat stress of bead {2 * joint + 1}", _bead_mean(joint), flow / 2 / throat, _SPLIT, "MPa")
        )
    return found


def _bead_mean(joint: int) -> Callable[[Result], float]:
    return lambda result: -(result.cases[0].joints[joint].bonds[0].mean or 0.0)


def _fasteners() -> list[Case]:
    """The planked I with screws of 900 N: spacing F/q of one row, 2 F/q of two."""
    found = []
    for rows, places in ((1, [0.0]), (2, [-12.0, 12.0])):
        screws: dict[str, Any] = {"kind": "fasteners", "rows": places, "diameter": 6.0, "capacity": 900.0}
        joints = [_joint(1, "1", "2", **screws), _joint(2, "3", "2", **screws)]
        beam = _beam(
            f"screws{rows}", f"planked I, {rows} row(s) of screws of 900 N, Vz = 10 kN",
            [(150, 40, 0, 130, 10), (40, 220, 0, 0, 10), (150, 40, 0, -130, 10)], joints, Vz=10000.0,
        )  # fmt: skip
        flow = beam.parts.flow([0], Vz=10000.0)
        spacing = beam.case(
            "largest spacing",
            lambda r: r.cases[0].joints[0].required["spacing"],
            rows * 900.0 / flow,
            _FLOW if rows == 1 else _SPLIT,
            "mm",
        )
        found += [beam.flow(0, [0]), spacing]
    return found


def _contact() -> list[Case]:
    """A tube of three bonded pieces whose one seam only touches is a slit tube of no width: exact series."""
    exact = RING_SECTORS["slit tube, t/R = 0.05"]
    thickness = 1 - exact.inner
    parts = [
        {
            "name": name,
            "shape": "sector",
            "radius": 1.0,
            "thickness": thickness,
            "from_deg": start,
            "to_deg": start + 120.0,
        }
        for name, start in (("first", 0.0), ("second", 120.0), ("third", 240.0))
    ]
    joints = [_joint(1, "first", "third", "contact")]
    text = section_text("tube with a seam that only touches", parts, joints=joints, solve={"accuracy": 3e-3})
    seam = _Beam("seam", "tube of radius 1, t = 0.05, a seam of contact", text, BuiltUp([]), 0.0, 0.0)
    tolerance = Tolerance(3e-5, "energy error 3e-3 squared, and arcs drawn by polynomials over thin triangles")
    return [
        seam.case("IT", constant("IT"), exact.IT, tolerance, "mm⁴", source=_SERIES),
        seam.case("shear centre", lambda r: -r.properties.ysc_trefftz, exact.trefftz, tolerance, "mm", source=_SERIES),
    ]
