"""Corners where the stress grows without limit: the exponents found on the mesh, and the growth of the field itself."""

from __future__ import annotations

from collections.abc import Callable
from math import cos, log10, pi, radians, sin

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..closed_form.wedges import half_and_quarter, two_sectors, wedge
from ..section_text import Table, section_text

GROUP = "singular corners"
_WILLIAMS = Source(
    "M. L. Williams",
    "Stress singularities in angular corners, J. Appl. Mech. 19",
    "1952",
    "antiplane form derived here",
)
_EXACT = Tolerance(
    1e-9, "the angle is that of the mesh's straight sides; round-off of their directions", relative=False
)


def cases() -> list[Case]:
    """Return notches of one material, corners of two, and the growth beside a right-angled notch."""
    found = [_notch(angle) for angle in (225.0, 240.0, 270.0, 315.0, 350.0)]
    found += [_block(ratio) for ratio in (0.1, 1.0, 10.0)]
    found += [_scarf(angle, ratio) for angle, ratio in ((30.0, 5.0), (60.0, 5.0), (60.0, 0.2), (135.0, 20.0))]
    return [*found, _growth(270.0), _growth(315.0)]


def _exponent(y: float, z: float) -> Callable[[Result], float]:
    def read(result: Result) -> float:
        corner = min(result.corners, key=lambda corner: (corner.y - y) ** 2 + (corner.z - z) ** 2)
        return corner.exponent

    return read


def _case(name: str, title: str, text: str, place: tuple[float, float], reference: float, quick: bool = False) -> Case:
    return Case(
        f"corner.{name}",
        GROUP,
        title,
        "exponent of the stress",
        (text,),
        _exponent(*place),
        reference,
        _WILLIAMS,
        "computed",
        _EXACT,
        quick=quick,
    )


def _notched(angle: float) -> Table:
    """A square 2 x 2 with a notch from the middle of its right side to its centre, of 360 - angle degrees."""
    half = radians(360.0 - angle) / 2
    if half < pi / 4:
        mouth = [[1.0, -sin(half) / cos(half)], [0.0, 0.0], [1.0, sin(half) / cos(half)]]
        points = [[-1.0, -1.0], [1.0, -1.0], *mouth, [1.0, 1.0], [-1.0, 1.0]]
    elif half > pi / 4:
        reach = cos(half) / sin(half)
        points = [[-1.0, -1.0], [reach, -1.0], [0.0, 0.0], [reach, 1.0], [-1.0, 1.0]]
    else:
        points = [[-1.0, -1.0], [1.0, -1.0], [0.0, 0.0], [1.0, 1.0], [-1.0, 1.0]]
    return {"shape": "polygon", "points": points}


def _notch(angle: float) -> Case:
    title = f"notch, {angle:g}° of material"
    return _case(
        f"notch{angle:g}", title, section_text(title, [_notched(angle)]), (0.0, 0.0), wedge(angle), quick=angle == 225.0
    )


def _block(ratio: float) -> Case:
    """A block on a strip: 180° of the strip, 90° of the block."""
    parts = [
        {"name": "strip", "material": "strip", "shape": "rectangle", "width": 4.0, "height": 1.0, "at": [0.0, -0.5]},
        {"name": "block", "material": "block", "shape": "rectangle", "width": 1.0, "height": 1.0, "at": [0.0, 0.5]},
    ]
    materials = {"strip": {"E": 2.0, "nu": 0.3}, "block": {"E": 2.0 * ratio, "nu": 0.3}}
    title = f"block on a strip, {ratio:g} times as stiff"
    text = section_text(title, parts, materials=materials)
    return _case(f"block{ratio:g}", title, text, (0.5, 0.0), half_and_quarter(ratio), quick=ratio == 10.0)


def _scarf(angle: float, ratio: float) -> Case:
    """Two materials that meet in a line at an angle to a straight edge: singular on the side where the stiffer one is obtuse."""
    run = 1.0 / radians_tan(angle)
    parts = [
        {
            "name": "left",
            "material": "left",
            "shape": "polygon",
            "points": [[-3.0, 0.0], [0.0, 0.0], [run, 1.0], [-3.0, 1.0]],
        },
        {
            "name": "right",
            "material": "right",
            "shape": "polygon",
            "points": [[0.0, 0.0], [3.0, 0.0], [3.0, 1.0], [run, 1.0]],
        },
    ]
    materials = {"left": {"E": 2.0, "nu": 0.3}, "right": {"E": 2.0 * ratio, "nu": 0.3}}
    title = f"scarf at {angle:g}° to the edge, right {ratio:g} times as stiff"
    text = section_text(title, parts, materials=materials)
    # below, the right part has the angle, the left one the rest; above it is the other way round: one of the two is singular
    below, above = two_sectors(180.0 - angle, angle, ratio), two_sectors(angle, 180.0 - angle, ratio)
    place, reference = ((0.0, 0.0), below) if below < above else ((run, 1.0), above)
    return _case(f"scarf{angle:g}-{ratio:g}", title, text, place, reference)


def radians_tan(angle: float) -> float:
    """Tangent of an angle in degrees."""
    return sin(radians(angle)) / cos(radians(angle))


def _growth(angle: float) -> Case:
    """The field of torsion beside the notch's root, 0.3 rad off the line that halves the material, at 1e-4 and 1e-3."""
    near, far = 1e-4, 1e-3
    title = f"notch, {angle:g}° of material"
    text = section_text(title, [_notched(angle)], actions=[{"name": "T", "T": 1.0}], solve={"accuracy": 1e-3})

    def read(result: Result) -> float:
        at_near, at_far = (result.at(-r * cos(0.3), r * sin(0.3))[0].tau for r in (near, far))
        return log10(at_near / at_far) / log10(near / far)

    return Case(
        f"corner.growth{angle:g}",
        GROUP,
        title,
        "exponent of |tau| read in the field",
        (text,),
        read,
        wedge(angle),
        _WILLIAMS,
        "computed",
        Tolerance(
            0.02,
            "the next term is smaller by r^lambda, 1e-2 here, of which the slope sees a half; the mesh's stress is good to 1 %",
            relative=False,
        ),
    )
