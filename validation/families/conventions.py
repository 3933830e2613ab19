"""What the user's words mean: signs of actions, load points, anchors, turns and mirrors, grain, nu_effect; by hand calculations."""

from __future__ import annotations

from collections.abc import Callable
from math import atan2, cos, degrees, hypot, radians, sin

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..closed_form.flexure import rectangle_shear_coefficient
from ..closed_form.orthotropic import rectangle_flexibility, rectangle_torsion
from ..closed_form.torsion import rectangle_torsion_constant
from ..reading import constant, stress
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GOODIER, at

GROUP = "conventions"
_STATICS = Source("statics", "right-handed axes x, y, z; actions on the +x face", "", "derived here")
_LEKHNITSKII = Source(
    "S. G. Lekhnitskii", "Theory of Elasticity of an Anisotropic Body", "1963", "orthotropic bars; flexure derived here"
)
_EXACT = Tolerance(1e-10, "polynomials on straight sides; round-off")
_SMALL = Tolerance(1e-9, "round-off of lengths of order 1 to 100", relative=False)
_ENERGY = Tolerance(1e-5, "energies of meshes asked for 1e-3 in energy: its square, and one more for the turned tensor")
_ACCURACY: Table = {"accuracy": 1e-3}


def _case(
    key: str, title: str, quantity: str, text: str, read: Callable[[Result], float], reference: float, tolerance: Tolerance,
    unit: str, source: Source = _STATICS,
) -> Case:  # fmt: skip
    return Case(
        f"conventions.{key}",
        GROUP,
        title,
        quantity,
        (text,),
        read,
        reference,
        source,
        "computed",
        tolerance,
        unit,
        quick=True,
    )


def cases() -> list[Case]:
    """Return bending signs, load points, placement, grain and nu_effect."""
    return [*_bending(), *_load_points(), *_placement(), *_principal(), *_grain(), *_without_nu()]


def _bending() -> list[Case]:
    """Rectangle 2 x 4, centre at (10, 20): My stretches +z, Mz stretches -y."""
    text = section_text("rectangle", [{"shape": "rectangle", "width": 2.0, "height": 4.0, "at": [10.0, 20.0]}], nu=0.3)
    title = "rectangle 2 x 4 at (10, 20)"
    Iyy, Izz = 2 * 4**3 / 12, 4 * 2**3 / 12
    return [
        _case("N", title, "sigma_x of N = 1", text, stress(10.5, 21.0, "sigma_x", N=1.0), 1 / 8, _EXACT, "MPa"),
        _case("My", title, "sigma_x of My = 1 at +1.5 z", text, stress(10.5, 21.5, "sigma_x", My=1.0), 1.5 / Iyy, _EXACT, "MPa"),
        _case("Mz", title, "sigma_x of Mz = 1 at +0.5 y", text, stress(10.5, 21.5, "sigma_x", Mz=1.0), -0.5 / Izz, _EXACT, "MPa"),
        _case("twist-sense", title, "tau_xz of T = 1, right side, times its own sense", text,
              lambda r: 1.0 if stress(10.9, 20.0, "tau_xz", T=1.0)(r) > 0 else -1.0, 1.0, _EXACT, "-"),
        _case("shear-sense", title, "tau_xz of Vz = 1 at the centre, nu = 0.3, times its own sense", text,
              lambda r: 1.0 if stress(10.0, 20.0, "tau_xz", Vz=1.0)(r) > 0 else -1.0, 1.0, _EXACT, "-"),
    ]  # fmt: skip


def _load_points() -> list[Case]:
    """A rectangle's shear centre is its centre: T = T0 + Vz (y - yc) - Vy (z - zc)."""
    actions = [
        {"name": "point", "Vy": 3.0, "Vz": 5.0, "T": 2.0, "load_point": [11.0, 24.0]},
        {"name": "centroid", "Vz": 5.0, "T": 2.0, "load_point": "centroid"},
    ]
    text = section_text(
        "loaded", [{"shape": "rectangle", "width": 2.0, "height": 4.0, "at": [10.0, 20.0]}], actions=actions
    )
    title = "rectangle 2 x 4 at (10, 20), V = (3, 5) at (11, 24), T = 2"
    return [
        _case(
            "load-point",
            title,
            "T about the shear centre",
            text,
            lambda r: r.cases[0].T_total,
            2 + 5 * 1 - 3 * 4.0,
            _SMALL,
            "N mm",
        ),
        _case("centroid", title, "T, through the centroid", text, lambda r: r.cases[1].T_total, 2.0, _SMALL, "N mm"),
    ]


def _placement() -> list[Case]:
    """A right triangle (0, 0), (6, 0), (0, 3) by its anchors, turned by 90°, mirrored: where its centroid (2, 1) goes."""
    triangle: Table = {"shape": "polygon", "points": [[0.0, 0.0], [6.0, 0.0], [0.0, 3.0]]}
    places = (
        ("top-right", {"anchor": "top right", "at": [10.0, 20.0]}, (10 - 6 + 2, 20 - 3 + 1)),
        ("bottom-left-turned", {"anchor": "bottom left", "at": [10.0, 20.0], "rotate": 90.0}, (10 - 1, 20 + 2)),
        ("left-mirrored", {"anchor": "left", "at": [10.0, 20.0], "mirror": "y"}, (10 - 2, 20 + 1 - 1.5)),
        ("bottom-mirrored-turned", {"anchor": "bottom", "at": [0.0, 0.0], "mirror": "z", "rotate": 30.0},
         (-1 * cos(radians(30)) + 1 * sin(radians(30)), -1 * sin(radians(30)) - 1 * cos(radians(30)))),
    )  # fmt: skip
    found = []
    for key, placing, (y, z) in places:
        text = section_text(key, [{**triangle, **placing}])
        title = f"triangle 6 x 3, {key.replace('-', ' ')}"
        found += [
            _case(f"anchor.{key}.yc", title, "yc", text, constant("yc"), y, _SMALL, "mm"),
            _case(f"anchor.{key}.zc", title, "zc", text, constant("zc"), z, _SMALL, "mm"),
        ]
    return found


def _principal() -> list[Case]:
    """A Z of three rectangles: Iyz, the principal angle and moments by hand."""
    parts: list[Table] = [
        {"shape": "rectangle", "width": 2.0, "height": 10.0},
        {"shape": "rectangle", "width": 4.0, "height": 2.0, "at": [3.0, 4.0]},
        {"shape": "rectangle", "width": 4.0, "height": 2.0, "at": [-3.0, -4.0]},
    ]
    Iyy = 2 * 10**3 / 12 + 2 * (4 * 2**3 / 12 + 8 * 4**2)
    Izz = 10 * 2**3 / 12 + 2 * (2 * 4**3 / 12 + 8 * 3**2)
    Iyz = 2 * 8 * 3 * 4.0
    radius = hypot((Iyy - Izz) / 2, Iyz)
    text, title = section_text("zed", parts), "Z of rectangles 2 x 10 and twice 4 x 2"
    return [
        _case("Iyz", title, "Iyz = ∫ y z", text, constant("Iyz"), Iyz, _EXACT, "mm⁴"),
        _case("Iu", title, "Iu", text, constant("Iu"), (Iyy + Izz) / 2 + radius, _EXACT, "mm⁴"),
        _case("Iv", title, "Iv", text, constant("Iv"), (Iyy + Izz) / 2 - radius, _EXACT, "mm⁴"),
        _case("alpha", title, "angle of the stiff axis", text, constant("alpha_deg"), degrees(atan2(-Iyz, (Iyy - Izz) / 2) / 2),
              _SMALL, "deg"),
    ]  # fmt: skip


def _grain() -> list[Case]:
    """Orthotropic rectangles 3 x 2, upright, with the grain across, and drawn turned by 30° with the grain turned along."""
    E, Gxy, Gxz, nu_xy, nu_xz, w, h = 11000.0, 900.0, 150.0, 0.45, 0.25, 3.0, 2.0
    material: Table = {"E": E, "Gxy": Gxy, "Gxz": Gxz, "nu_xy": nu_xy, "nu_xz": nu_xz}
    c, s = cos(radians(30)), sin(radians(30))
    turned = [
        [c * y - s * z, s * y + c * z] for y, z in ((-w / 2, -h / 2), (w / 2, -h / 2), (w / 2, h / 2), (-w / 2, h / 2))
    ]
    upright: Table = {"shape": "rectangle", "width": w, "height": h, "material": "wood"}
    sections = (
        ("grain0", "grain along y", upright, Gxy, Gxz),
        ("grain90", "grain turned by 90°", {**upright, "grain_angle": 90.0}, Gxz, Gxy),
        (
            "turned30",
            "drawn at 30°, grain at 30°",
            {"shape": "polygon", "points": turned, "material": "wood", "grain_angle": 30.0},
            Gxy,
            Gxz,
        ),
        ("rotated30", "rotated by 30°", {**upright, "rotate": 30.0}, Gxy, Gxz),
    )
    found = []
    for key, words, part, along_y, along_z in sections:
        title = f"orthotropic rectangle 3 x 2, {words}"
        text = section_text(title, [part], materials={"wood": material}, solve=_ACCURACY)
        found.append(
            _case(f"{key}.GIT", title, "GIT", text, constant("GIT"), rectangle_torsion(w, h, along_y, along_z), _ENERGY, "N mm²",
                  _LEKHNITSKII)
        )  # fmt: skip
        if "30" not in key:
            flexibility = rectangle_flexibility(w, h, E, along_y, along_z, nu_xy if along_y == Gxy else nu_xz)
            found.append(
                _case(
                    f"{key}.flexibility",
                    title,
                    "shear flexibility",
                    text,
                    lambda r: r.properties.shear_flexibility[1][1],
                    flexibility,
                    _ENERGY,
                    "1/N",
                    _LEKHNITSKII,
                )
            )
    return found


def _without_nu() -> list[Case]:
    """nu_effect = false: the field of nu = 0, while G is still E/(2 (1 + nu))."""
    nu, E = 0.4, 2.8  # G = 1
    text = section_text("plain flow", [{"shape": "rectangle", "width": 4.0, "height": 1.0}], nu=nu, E=E,
                        solve={**_ACCURACY, "nu_effect": False})  # fmt: skip
    with_nu = section_text(
        "with nu", [{"shape": "rectangle", "width": 4.0, "height": 1.0}], nu=nu, E=E, solve=_ACCURACY
    )
    title, place = "rectangle 4 x 1, nu = 0.4", at(TIMOSHENKO_GOODIER, "bending of bars, rectangular section")
    return [
        _case(
            "no-nu.Asz",
            f"{title}, nu_effect = false",
            "Asz/A",
            text,
            lambda r: r.properties.Asz / 4,
            5 / 6,
            _ENERGY,
            "-",
            place,
        ),
        _case(
            "no-nu.GIT",
            f"{title}, nu_effect = false",
            "GIT",
            text,
            constant("GIT"),
            rectangle_torsion_constant(4, 1),
            _ENERGY,
            "N mm²",
            place,
        ),
        _case(
            "nu.Asz",
            title,
            "Asz/A",
            with_nu,
            lambda r: r.properties.Asz / 4,
            rectangle_shear_coefficient(4, 1, nu),
            _ENERGY,
            "-",
            place,
        ),
    ]
