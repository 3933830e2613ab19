"""Polygons of finite thickness by an independent method, to the digits it is good for, against our guaranteed intervals."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace

from xsec_fem.results import Result

from ..case import Case, Interval, Tolerance
from ..closed_form.polygons import ALL_POLYGONS, POINT_STRESSES, PointStress
from ..reading import Read, ReadInterval, bounds, constant, from_centroid, from_centroid_bounds, stress
from ..section_text import Table, section_text
from ..sources import GOPAL_TREFETHEN
from ..tolerances import SOLVE, energy, point_stress, product, warping
from .torsion import twist_stress

GROUP, STRESS_GROUP = "polygons by an independent method, constants", "polygons by an independent method, stresses"
QUICK = ("right triangle", "hexagon")
NUS = (0.0, 0.3)


def _channel(t: float) -> list[list[float]]:
    return [[0, 0], [50, 0], [50, t], [t, t], [t, 100 - t], [50, 100 - t], [50, 100], [0, 100]]


_ROOT = 3**0.5
OUTLINES: dict[str, list[list[float]]] = {
    "right triangle": [[0, 0], [1, 0], [0, 1]],
    "equilateral triangle": [[-_ROOT, -1], [_ROOT, -1], [0, 2]],
    "hexagon": [[1, 0], [0.5, _ROOT / 2], [-0.5, _ROOT / 2], [-1, 0], [-0.5, -_ROOT / 2], [0.5, -_ROOT / 2]],
    "angle": [[0, 0], [100, 0], [100, 10], [10, 10], [10, 100], [0, 100]],
    "channel": _channel(20),
    "channel 10": _channel(10),
    "channel 2.5": _channel(2.5),
    "I": [
        [-50, 0], [50, 0], [50, 16], [5, 16], [5, 104], [50, 104], [50, 120], [-50, 120], [-50, 104], [-5, 104], [-5, 16],
        [-50, 16],
    ],
    "cross": [[1, 0], [2, 0], [2, 1], [3, 1], [3, 2], [2, 2], [2, 3], [1, 3], [1, 2], [0, 2], [0, 1], [1, 1]],
    "box": [[-50, -50], [50, -50], [50, 50], [-50, 50]],
}  # fmt: skip
HOLES = {"box": [{"shape": "rectangle", "width": 80, "height": 80}]}
TITLES = {
    "right triangle": "right triangle, legs 1", "equilateral triangle": "equilateral triangle, altitude 3",
    "hexagon": "regular hexagon, side 1", "angle": "angle 100 x 100 x 10, sharp", "channel": "channel 100 x 50 x 20, sharp",
    "channel 10": "channel 100 x 50 x 10, sharp", "channel 2.5": "channel 100 x 50 x 2.5, sharp",
    "I": "I 120 x 100, web 10, flanges 16, sharp", "cross": "Greek cross 3 x 3, arms 1 wide",
    "box": "square tube 100 x 100 x 10, sharp",
}  # fmt: skip


def cases() -> list[Case]:
    """Return the cases of this family."""
    found = [case for name in OUTLINES for case in _constants(name)]
    return found + [_point(number, reference) for number, reference in enumerate(POINT_STRESSES, 1)]


def text(name: str, nu: float) -> str:
    """Return the section file of a polygon."""
    part: Table = {"shape": "polygon", "points": OUTLINES[name], "anchor": "origin", "holes": HOLES.get(name, [])}
    return section_text(name, [part], nu=nu, solve=SOLVE)


def _constants(name: str) -> Iterator[Case]:
    values, size = ALL_POLYGONS[name], max(max(point) for point in OUTLINES[name])
    error = values.digits

    def case(
        quantity: str, unit: str, nu: float, read: Read, reference: float, tolerance: Tolerance,
        interval: ReadInterval | None = None,
    ) -> Case:  # fmt: skip
        title = TITLES[name] + (f", nu {nu:g}" if nu else "")
        return Case(
            f"polygon.{name}.nu{nu:g}.{quantity}", GROUP, title, quantity, (text(name, nu),), read, reference,
            GOPAL_TREFETHEN, "computed", tolerance, unit, interval, reference_error=error, quick=name in QUICK,
        )  # fmt: skip

    yield case("IT", "mm⁴", 0.0, constant("IT"), values.IT, energy(error), bounds("IT"))
    yield case("Iw", "mm⁶", 0.0, constant("Iw"), values.Iw, warping(error))
    for axis, number in (("y", 0), ("z", 1)):
        if values.trefftz[number] and (axis == "y" or name == "right triangle"):
            named = f"{axis}sc_trefftz"
            yield case(
                f"{axis}sc (Trefftz) from the centroid", "mm", 0.0, from_centroid(named), values.trefftz[number],
                product(size, error * size), from_centroid_bounds(named),
            )  # fmt: skip
            yield case(
                f"{axis}sc (zero mean twist) from the centroid", "mm", 0.3, from_centroid(f"{axis}sc"),
                values.mean_twist[number], product(size, error * size), from_centroid_bounds(f"{axis}sc"),
            )  # fmt: skip
    for nu, flexibility in zip(NUS, (values.A_flexibility_nu0, values.A_flexibility), strict=True):
        same = flexibility[0] == flexibility[1]
        for axis, reference in zip("yz", flexibility[:2], strict=True):
            if not (same and axis == "y"):
                yield case(
                    f"A/As{axis}",
                    "-",
                    nu,
                    _area_over(f"As{axis}"),
                    reference,
                    energy(error),
                    _area_over_bounds(f"As{axis}"),
                )
        if flexibility[2]:
            found = case(
                "A G F_yz", "-", nu, _coupling, flexibility[2], product(1.0, error * flexibility[0]), _coupling_bounds
            )
            yield replace(
                found, reference_error=error * flexibility[0] / flexibility[2]
            )  # it is as good as the diagonal


def _area_over(name: str) -> Read:
    return lambda result: result.properties.A / float(getattr(result.properties, name))


def _area_over_bounds(name: str) -> Callable[[Result], Interval]:
    def read(result: Result) -> Interval:
        low, high = bounds(name)(result)
        return result.properties.A / high, result.properties.A / low

    return read


def _coupling_scale(result: Result) -> float:
    return result.properties.A * result.section.materials["m"].Gxy


def _coupling(result: Result) -> float:
    return _coupling_scale(result) * result.properties.shear_flexibility[0][1]


def _coupling_bounds(result: Result) -> Interval:
    low, high = bounds("coupling")(result)
    return low * _coupling_scale(result), high * _coupling_scale(result)


def _point(number: int, ref: PointStress) -> Case:
    place = f"({ref.y:.4g}, {ref.z:.4g})"
    read: Read
    if ref.load == "T":
        read, quantity, unit = twist_stress(ref.y, ref.z, ref.component), f"{ref.component}/(G twist) at {place}", "mm"
    else:
        read, quantity, unit = _mean_stresses(ref), f"{ref.component} A/{ref.load} at {place}", "-"
    return Case(
        f"polygon.{ref.polygon}.nu{ref.nu:g}.stress {number}", STRESS_GROUP,
        TITLES[ref.polygon] + (f", nu {ref.nu:g}" if ref.nu else ""), quantity, (text(ref.polygon, ref.nu),), read, ref.value,
        GOPAL_TREFETHEN, "computed", point_stress(abs(ref.value) if ref.load == "T" else 1.0), unit,
        reference_error=ALL_POLYGONS[ref.polygon].digits, quick=ref.polygon in QUICK,
    )  # fmt: skip


def _mean_stresses(ref: PointStress) -> Read:
    """The stress over V/A, V = 1 through the Trefftz centre."""
    Vy, Vz = float(ref.load == "Vy"), float(ref.load == "Vz")
    read = stress(ref.y, ref.z, ref.component, trefftz=True, Vy=Vy, Vz=Vz)
    return lambda result: result.properties.A * read(result)
