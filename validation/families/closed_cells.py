"""Two cells of thin walls: torsion and the flows that equilibrium alone does not give, with and without the Poisson effect.

Two cells 100 x 100 and 150 x 100 (mid-lines), webs 2, 1, 3 and flanges 1.5 times s; s = 2 and 1.
"""

from __future__ import annotations

import math
from functools import cache

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..closed_form.cells import ThinWalls, two_cell_box
from ..section_text import section_text, shear, twist

GROUP = "closed cells"
_DEPTH, _WIDTHS, _WEBS, _FLANGE = 100.0, (100.0, 150.0), (2.0, 1.0, 3.0), 1.5
_STATIONS = (0.0, _WIDTHS[0], sum(_WIDTHS))
_S = 2.0
WALLS = ("left web", "middle web", "right web", "left bottom", "right bottom")
_BREDT = Source(
    "R. Bredt", "Kritische Bemerkungen zur Drehungselastizität, Z. VDI 40", "1896", "several cells: 4 A_mᵀ D⁻¹ A_m"
)
_FLOWS = Source(
    "T. H. G. Megson",
    "Aircraft Structures for Engineering Students",
    "1972",
    "shear of multi-cell sections; the Poisson term derived here",
)


@cache
def walls(nu: float, s: float = 1.0) -> ThinWalls:
    """Return the thin walls; flows of unit actions do not depend on s."""
    return two_cell_box(_DEPTH, _WIDTHS, [s * web for web in _WEBS], s * _FLANGE, nu)


def text(nu: float, s: float) -> str:
    """Return the section file: one outline, two holes, a cut through the middle of each wall."""
    webs, f = [s * web / 2 for web in _WEBS], s * _FLANGE / 2
    top = _DEPTH - f
    outline = _rectangle(-webs[0], _STATIONS[2] + webs[2], -f, _DEPTH + f)
    holes = [
        {"shape": "polygon", "points": _rectangle(_STATIONS[k] + webs[k], _STATIONS[k + 1] - webs[k + 1], f, top)}
        for k in (0, 1)
    ]
    cuts = [
        {"name": name, "from": [y - 2 * w, _DEPTH / 2], "to": [y + 2 * w, _DEPTH / 2]}
        for name, y, w in zip(WALLS, _STATIONS, webs, strict=False)
    ]
    middles = ((_STATIONS[k] + _STATIONS[k + 1]) / 2 for k in (0, 1))
    # the normal of a cut is its direction turned to the left: downward cuts have the walls' own direction, +y
    cuts += [{"name": name, "from": [y, 2 * f], "to": [y, -2 * f]} for name, y in zip(WALLS[3:], middles, strict=True)]
    return section_text(
        f"two cells, walls times {s:g}, nu = {nu:g}", [{"shape": "polygon", "points": outline, "holes": holes}], nu=nu, cuts=cuts,
        actions=[shear(Vz=1.0), twist()], solve={"accuracy": 3e-3},
    )  # fmt: skip


def _rectangle(left: float, right: float, bottom: float, top: float) -> list[list[float]]:
    return [[left, bottom], [right, bottom], [right, top], [left, top]]


def flow(result: Result, case: int, wall: int) -> float:
    """Return the flow through the cut of a wall in a load case, along the wall."""
    return result.cases[case].cuts[wall].field.flow


def _limit(thick: float, thin: float) -> float:
    """t -> 0 of a quantity whose difference is of first order in t, from t and t/2."""
    return 2 * thin - thick


def _tolerance(size: float) -> Tolerance:
    # first order is extrapolated away; t/a = 6/100 for the thickest web, a coefficient of order 1 on its square
    return Tolerance(
        size * (6 / _WIDTHS[0]) ** 2,
        "extrapolated to t = 0 from t/a = 6/100 and 3/100: what is left is of order (t/a)²",
        relative=False,
    )


def cases() -> list[Case]:
    """Return torsion constant, order, flows of torsion and of shear, shear centres."""
    found = []
    pair = (text(0.0, _S), text(0.0, _S / 2))
    title = "two cells 100 and 150 x 100, walls 1 to 3, t -> 0"
    IT, flows = walls(0.0).torsion()

    def ratio(result: Result, s: float) -> float:
        return result.properties.IT / (s * IT)

    found += [
        Case("cells.IT.limit", GROUP, title, "IT over Bredt's", pair, lambda a, b: _limit(ratio(a, _S), ratio(b, _S / 2)), 1.0,
             _BREDT, "computed", _tolerance(1.0)),
        Case("cells.IT.order", GROUP, title, "IT: order of the difference in t", pair,
             lambda a, b: math.log2((ratio(a, _S) - 1) / (ratio(b, _S / 2) - 1)), 1.0, _BREDT, "computed",
             Tolerance(1.5 * 6 / _WIDTHS[0], "the next term is t/a times the first, times a number of order 1", relative=False)),
    ]  # fmt: skip
    largest = float(abs(flows).max()) / IT
    for k, name in enumerate(WALLS):
        found.append(
            Case(f"cells.torsion.{name.replace(' ', '-')}", GROUP, title, f"flow of T = 1, {name}", pair,
                 lambda a, b, k=k: _limit(flow(a, 1, k), flow(b, 1, k)), float(flows[k]) / IT, _BREDT, "computed",
                 _tolerance(largest), "N/mm")
        )  # fmt: skip
    for nu in (0.0, 0.3):
        found += _sheared(nu, title)
    return found


def _sheared(nu: float, title: str) -> list[Case]:
    pair = (text(nu, _S), text(nu, _S / 2))
    _, middle = walls(nu).shear((0.0, 1.0))
    largest = float(abs(middle).max())
    found = [
        Case(f"cells.shear.nu{nu:g}.{name.replace(' ', '-')}", GROUP, f"{title}, nu = {nu:g}", f"flow of Vz = 1, {name}", pair,
             lambda a, b, k=k: _limit(flow(a, 0, k), flow(b, 0, k)), float(middle[k]), _FLOWS, "computed", _tolerance(largest),
             "N/mm")
        for k, name in enumerate(WALLS)
    ]  # fmt: skip
    found.append(
        Case(f"cells.shear.nu{nu:g}.centre", GROUP, f"{title}, nu = {nu:g}", "shear centre, mean twist, from the left web", pair,
             lambda a, b: _limit(a.properties.ysc, b.properties.ysc), float(walls(nu).shear_centre()[0]), _FLOWS, "computed",
             _tolerance(_STATIONS[2]), "mm")
    )  # fmt: skip
    return found
