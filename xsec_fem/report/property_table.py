"""The constants of the section, those with a guaranteed interval rounded to the digits that it supports."""

from __future__ import annotations

import math
from collections.abc import Mapping

from xsec_fem.report.blocks import Table
from xsec_fem.report.intervals import certified
from xsec_fem.report.numbers import number
from xsec_fem.results import Certificate, Properties
from xsec_fem.units import UnitSystem

_LENGTHS = ("ysc", "zsc", "ysc_trefftz", "zsc_trefftz")


def properties_table(
    properties: Properties, units: UnitSystem, size: float, certificate: Certificate | None = None
) -> Table:
    """Return symbol, value, unit, guaranteed interval (with a certificate) and meaning of each constant.

    `size` of the section [mm] tells round-off from values.
    """
    rows = _rows(properties, units, size)
    if certificate is None:
        return Table(("symbol", "value", "unit", "meaning"), rows, "lrll")
    proven = _intervals(properties, certificate, size)
    with_intervals = tuple(
        (symbol, *proven[symbol][:1], unit, proven[symbol][1], meaning)
        if symbol in proven
        else (symbol, value, unit, "", meaning)
        for symbol, value, unit, meaning in rows
    )
    return Table(("symbol", "value", "unit", "guaranteed interval", "meaning"), with_intervals, "lrlll")


def _intervals(properties: Properties, certificate: Certificate, size: float) -> Mapping[str, tuple[str, str]]:
    """Value and interval as text, by symbol; GIT has IT's."""
    stiffer = properties.GIT / properties.IT
    proven = {
        symbol: (getattr(properties, symbol), getattr(certificate, symbol), 0.0) for symbol in ("IT", "Asy", "Asz")
    }
    proven |= {symbol: (getattr(properties, symbol), getattr(certificate, symbol), size) for symbol in _LENGTHS}
    proven["F_yz"] = (properties.shear_flexibility[0][1], certificate.coupling, _shear_scale(properties))
    proven["GIT"] = (properties.GIT, (certificate.IT[0] * stiffer, certificate.IT[1] * stiffer), 0.0)
    return {symbol: certified(value, interval, scale) for symbol, (value, interval, scale) in proven.items()}


def _shear_scale(properties: Properties) -> float:
    """What the coupling flexibility is compared with: the mean of the direct ones [1/N]."""
    return math.sqrt(properties.shear_flexibility[0][0] * properties.shear_flexibility[1][1])


def _rows(p: Properties, units: UnitSystem, size: float) -> tuple[tuple[str, str, str, str], ...]:
    length, area, fourth = units.length, units.power(2), units.power(4)
    EI, twist = f"{units.force} {area}", max(p.Iyy, p.Izz)
    flexibility = p.shear_flexibility[0][1]
    return (
        ("A", number(p.A), area, "area"),
        ("yc", number(p.yc, scale=size), length, "centroid, y"),
        ("zc", number(p.zc, scale=size), length, "centroid, z"),
        ("Iyy", number(p.Iyy), fourth, "second moment, bending in the z direction"),
        ("Izz", number(p.Izz), fourth, "second moment, bending in the y direction"),
        ("Iyz", number(p.Iyz, scale=twist), fourth, "product moment"),
        ("alpha", number(p.alpha_deg, scale=1.0), "deg", "from y to the principal axis u, counter-clockwise"),
        ("Iu", number(p.Iu), fourth, "second moment about u, the larger"),
        ("Iv", number(p.Iv), fourth, "second moment about v, the smaller"),
        ("IT", number(p.IT), fourth, "torsion constant (Saint-Venant)"),
        ("Iw", number(p.Iw, scale=p.Iyy * size**2), units.power(6), "warping constant about the shear centre"),
        ("ysc", number(p.ysc, scale=size), length, "shear centre (zero mean twist), y"),
        ("zsc", number(p.zsc, scale=size), length, "shear centre (zero mean twist), z"),
        ("ysc_trefftz", number(p.ysc_trefftz, scale=size), length, "shear centre (Trefftz, without nu), y"),
        ("zsc_trefftz", number(p.zsc_trefftz, scale=size), length, "shear centre (Trefftz, without nu), z"),
        ("Asy", number(p.Asy), area, "shear area in y: stiffness (Timoshenko), not a code's resistance area"),
        ("Asz", number(p.Asz), area, "shear area in z: stiffness (Timoshenko), not a code's resistance area"),
        (
            "F_yz",
            number(flexibility, scale=_shear_scale(p)),
            f"1/{units.force}",
            "shear flexibility, coupling of Vy and Vz",
        ),
        ("EA", number(p.EA), units.force, "axial stiffness"),
        ("EIyy", number(p.EIyy), EI, "bending stiffness"),
        ("EIzz", number(p.EIzz), EI, "bending stiffness"),
        ("EIyz", number(p.EIyz, scale=max(p.EIyy, p.EIzz)), EI, "bending stiffness, coupling"),
        ("GIT", number(p.GIT), EI, "torsional stiffness"),
        ("EIw", number(p.EIw, scale=p.EIyy * size**2), f"{units.force} {fourth}", "warping stiffness"),
    )
