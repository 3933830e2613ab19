"""Sectors of discs and rings, slit and half tubes: IT and both shear centres, by the series in r^m and r^-m.

A slit has no width here: three sectors of 120 degrees, the first and the last of them in mere contact.
"""

from __future__ import annotations

from functools import partial
from itertools import pairwise

from ..case import Case, Tolerance
from ..closed_form.sectors import SectorValues, sector_values
from ..closed_form.shear_centres import semicircle_shear_centres
from ..reading import bounds, constant
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GOODIER, TREFFTZ, at
from ..tolerances import ARC, SOLVE, curved

GROUP, CENTRE_GROUP = "sectors and tubes, torsion constant", "sectors and tubes, shear centre"
SERIES = at(TIMOSHENKO_GOODIER, "torsion of sectors, series; the ring and the integrals derived here")
NU = 0.3
# opening in degrees, inner radius
SECTORS = ((60, 0.0), (90, 0.0), (120, 0.0), (180, 0.0), (240, 0.0), (270, 0.0), (300, 0.0), (360, 0.0),
           (180, 0.5), (180, 0.98), (270, 0.8), (360, 0.5), (360, 0.9), (360, 0.95), (360, 0.98))  # fmt: skip
QUICK = ((60, 0.0), (180, 0.5), (360, 0.95))
CENTRE = Tolerance(
    ARC,
    "curved sides are polynomials of degree 4, which moves the area's and the stress's moments by about 1e-8 of the radius; "
    "the error of the solution is the product of two energy errors below 1e-4; ten of both are allowed",
    relative=False,
)  # fmt: skip


def cases() -> list[Case]:
    """Return the cases of this family."""
    return [case for opening, inner in SECTORS for case in _sector(opening, inner)] + _semicircle()


def text(opening: float, inner: float) -> str:
    """Return the section file of a sector of outer radius 1 that is symmetric about +y."""
    cuts = (-opening / 2, opening / 2) if opening < 360 else (-180, -60, 60, 180)
    ring: Table = {"thickness": round(1 - inner, 12)} if inner else {}
    parts = [
        {"shape": "sector", "radius": 1, "from_deg": low, "to_deg": high} | dict(ring) for low, high in pairwise(cuts)
    ]
    slit = [{"name": "slit", "between": ["part 1", "part 3"], "kind": "contact"}] if opening == 360 else []
    return section_text("sector", parts, nu=NU, solve=SOLVE, joints=slit)


def _sector(opening: float, inner: float) -> list[Case]:
    shape = (
        "slit tube"
        if opening == 360 and inner
        else "half tube"
        if opening == 180 and inner
        else f"sector of {opening:g}°"
    )
    title = f"{shape}, outer radius 1" + (f", inner {inner:g}" if inner else "")
    sections, quick = (text(opening, inner),), (opening, inner) in QUICK

    def value(name: str) -> float:
        exact: SectorValues = sector_values(opening, inner)
        return exact.trefftz + NU / (1 + NU) * exact.slope if name == "mean" else float(getattr(exact, name))

    name = f"sector.{opening:g}.{inner:g}"
    return [
        Case(
            f"{name}.IT", GROUP, title, "IT", sections, constant("IT"), partial(value, "IT"), SERIES, "computed", curved(),
            "mm⁴", bounds("IT"), quick=quick,
        ),
        Case(
            f"{name}.trefftz", CENTRE_GROUP, title, "ysc (Trefftz) from the circle's centre", sections,
            constant("ysc_trefftz"), partial(value, "trefftz"), SERIES, "computed", CENTRE, "mm", bounds("ysc_trefftz"),
            quick=quick,
        ),
        Case(
            f"{name}.mean", CENTRE_GROUP, f"{title}, nu {NU:g}", "ysc (zero mean twist) from the circle's centre", sections,
            constant("ysc"), partial(value, "mean"), SERIES, "computed", CENTRE, "mm", bounds("ysc"), quick=quick,
        ),
    ]  # fmt: skip


def _semicircle() -> list[Case]:
    """The closed form, which the series must meet as well; two more Poisson's ratios."""
    found = []
    part: Table = {"shape": "sector", "radius": 1, "from_deg": -90, "to_deg": 90}
    for nu in (0.0, 0.25, 0.5):
        sections = (section_text("semicircle", [part], nu=nu, solve=SOLVE),)
        mean, trefftz = semicircle_shear_centres(1, nu)
        for quantity, name, reference in (("zero mean twist", "ysc", mean), ("Trefftz", "ysc_trefftz", trefftz)):
            found.append(
                Case(
                    f"semicircle.nu{nu:g}.{name}", CENTRE_GROUP, f"semicircle, radius 1, nu {nu:g}",
                    f"ysc ({quantity}) from the circle's centre", sections, constant(name), reference,
                    at(TREFFTZ, "8R/(5 pi); its term in nu derived here"), "computed", CENTRE, "mm", bounds(name),
                    quick=nu == 0.25,
                )
            )  # fmt: skip
    return found
