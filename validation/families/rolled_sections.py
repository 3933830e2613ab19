"""Rolled sections: the tool on the tables' dimensions against the tables' constants.

Allowed is what the table itself allows: half a digit of the constant, half a digit of every dimension where dimensions are
rounded (AISC) carried through the closed forms, and what the table's formula leaves out, with its size.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from xsec_fem.results import Properties

from ..case import Case, Provenance, Source, Tolerance
from ..closed_form.rolled import (
    Dimensions,
    channel_table,
    i_moments,
    junction_share,
    open_share,
    tee_moments,
    tube_moments,
)
from ..section_text import Table, section_text
from .rolled_tables import AISC_C, AISC_HSS, AISC_L, AISC_W, AISC_WT, EN_I, EN_RHS, EN_UPN, Row, half_digit

GROUP = "rolled sections"
_EN = Source("EN 10365", "dimensions; section tables of European mills", "2017")
_EN_RHS = Source("EN 10219-2", "table of rectangular hollow sections", "2006")
_AISC = Source("AISC", "Shapes Database v15.0", "2017")
Moments = Callable[[Dimensions], Mapping[str, float]]
Read = Callable[[Properties], float]


@dataclass(frozen=True)
class _Model:
    """What a formula leaves out: a share of the value, in words."""

    share: float = 0.0
    why: str = ""


@dataclass(frozen=True)
class _Shape:
    """One row of a table: what is drawn, what is read."""

    name: str
    row: Row
    part: Table
    units: str
    source: Source
    provenance: Provenance
    moments: Moments | None = None
    dimensions: Dimensions | None = None
    digits: int = 3
    rounded_dimensions: bool = True

    def case(self, key: str, read: Read, unit: str, model: _Model | None = None, quick: bool = False) -> Case:
        """The case of one printed constant, read from our properties in the table's unit."""
        printed = self.row[key]
        value, model = float(printed), model or _Model()
        share = half_digit(printed, self.digits) / value + model.share
        why = [f"half a digit of {printed}"]
        if self.rounded_dimensions and self.moments is not None and self.dimensions is not None:
            share += self._spread(key)
            why.append("half a digit of every dimension")
        if model.why:
            why.append(model.why)
        text = section_text(self.name, [self.part], nu=0.3, units=self.units)
        name = self.name.replace(" ", "").replace("/", "-")
        return Case(
            f"rolled.{name}.{key}", GROUP, self.name, key, (text,), lambda result: read(result.properties), value, self.source,
            self.provenance, Tolerance(share, "; ".join(why)), unit, quick=quick,
        )  # fmt: skip

    def _spread(self, key: str) -> float:
        """Sum over the dimensions of the relative change of a constant by half a digit of each."""
        if self.moments is None or self.dimensions is None:
            return 0.0
        base, total = self.moments(self.dimensions)[key], 0.0
        for name, value in self.dimensions.items():
            half = (
                half_digit(self.row[name])
                if name in self.row
                else half_digit(self.row["kdes"]) + half_digit(self.row["tf"])
            )
            total += abs(self.moments({**self.dimensions, name: value + half})[key] / base - 1)
        return total


def _numbers(row: Row, *keys: str) -> dict[str, float]:
    return {key: float(row[key]) for key in keys}


def cases() -> list[Case]:
    """Return the European and American sections."""
    found = [case for name, row in EN_I.items() for case in _en_i(name, row)]
    found += [case for name, row in EN_UPN.items() for case in _upn(name, row)]
    found += [case for name, row in AISC_W.items() for case in _w(name, row)]
    found += [case for name, row in AISC_C.items() for case in _c(name, row)]
    found += [case for name, row in AISC_L.items() for case in _l(name, row)]
    found += [case for name, row in AISC_WT.items() for case in _wt(name, row)]
    found += [case for name, row in EN_RHS.items() for case in _tube(name, row, "N mm", _EN_RHS, 10.0, 1.0)]
    return found + [case for name, row in AISC_HSS.items() for case in _tube(name, row, "kip in", _AISC, 1.0, 2.0)]


def _i_part(d: Dimensions) -> Table:
    return {
        "shape": "i_shape",
        "depth": d["h"],
        "width": d["b"],
        "web": d["tw"],
        "flange": d["tf"],
        "root_radius": d["r"],
    }


def _flanges_as_lines(d: Dimensions) -> _Model:
    share = junction_share(d)
    return _Model(share, f"Iz (h - tf)²/4 takes the flanges as lines; the junction's fillets may take {share:.1%} away")


def _en_i(name: str, row: Row) -> list[Case]:
    d = _numbers(row, "h", "b", "tw", "tf", "r")
    known: Provenance = "read" if name.startswith("IPE") else "from memory"
    shape = _Shape(name, row, _i_part(d), "N mm", _EN, known, digits=4, rounded_dimensions=False)
    memory = _Shape(name, row, _i_part(d), "N mm", _EN, "from memory", digits=4, rounded_dimensions=False)
    junction = _Model(
        0.03,
        "2/3 (b - 0.63 tf) tf³ + (h - 2 tf) tw³/3 + 2 (tw/tf)(0.145 + 0.1 r/tf) D⁴ is a fit, good to about 3 %; r/tf <= 1.9",
    )
    return [
        shape.case("A", lambda p: p.A / 1e2, "cm²", quick=name == "IPE 300"),
        shape.case("Iy", lambda p: p.Iyy / 1e4, "cm⁴", quick=name == "IPE 300"),
        shape.case("Iz", lambda p: p.Izz / 1e4, "cm⁴", quick=name == "IPE 300"),
        memory.case("It", lambda p: p.IT / 1e4, "cm⁴", junction),
        memory.case("Iw", lambda p: p.Iw / 1e6, "cm⁶", _flanges_as_lines(d)),
    ]


def _upn(name: str, row: Row) -> list[Case]:
    """Flange thickness is printed at b/2; ours is at mid-outstand, tw/2 nearer to the toe."""
    d, slope = _numbers(row, "h", "b", "tw", "tf", "r1", "r2"), 0.08
    part: Table = {
        "shape": "channel", "depth": d["h"], "width": d["b"], "web": d["tw"], "flange": d["tf"] - slope * d["tw"] / 2,
        "taper": slope, "root_radius": d["r1"], "toe_radius": d["r2"],
    }  # fmt: skip
    shape = _Shape(name, row, part, "N mm", _EN, "from memory", rounded_dimensions=False)
    left_out = 1.5 * (d["tf"] / (d["b"] - d["tw"] / 2)) ** 2
    thin = _Model(left_out, f"mid-lines: order (t/b)² is left out ({left_out:.1%})")
    fit = _Model(0.05, "a fit for the junctions of tapered flanges")
    return [
        shape.case("A", lambda p: p.A / 1e2, "cm²"),
        shape.case("Iy", lambda p: p.Iyy / 1e4, "cm⁴"),
        # the table's Iz of UPN 300 does not follow from the table's dimensions: see the page of disagreements
        *([shape.case("Iz", lambda p: p.Izz / 1e4, "cm⁴")] if name != "UPN 300" else []),
        shape.case("ys", lambda p: (p.yc + d["b"] / 2) / 10, "cm"),
        shape.case("ym", lambda p: (p.yc - p.ysc_trefftz) / 10, "cm", thin),
        shape.case("It", lambda p: p.IT / 1e4, "cm⁴", fit),
        shape.case("Iw", lambda p: p.Iw / 1e6, "cm⁶", thin),
    ]


def _w(name: str, row: Row) -> list[Case]:
    d = {"h": float(row["d"]), "b": float(row["bf"]), **_numbers(row, "tw", "tf")}
    d["r"] = float(row["kdes"]) - d["tf"]
    table = {**row, "h": row["d"], "b": row["bf"], "Iy": row["Ix"], "Iz": row["Iy"], "It": row["J"], "Iw": row["Cw"]}
    shape = _Shape(name, table, _i_part(d), "kip in", _AISC, "read", i_moments, d)
    junction = _Model(0.01, "El Darwish and Johnston's fit for the junctions, good to about 1 %")
    return [
        shape.case("A", lambda p: p.A, "in²"),
        shape.case("Iy", lambda p: p.Iyy, "in⁴"),
        shape.case("Iz", lambda p: p.Izz, "in⁴"),
        shape.case("It", lambda p: p.IT, "in⁴", junction),
        shape.case("Iw", lambda p: p.Iw, "in⁶", _flanges_as_lines(d)),
    ]


def _c(name: str, row: Row) -> list[Case]:
    """eo and Cw are printed for flanges of one thickness as lines, which the table's own digits show; so they are drawn."""
    d = _numbers(row, "d", "bf", "tw", "tf")
    part: Table = {"shape": "channel", "depth": d["d"], "width": d["bf"], "web": d["tw"], "flange": d["tf"]}

    def moments(at: Dimensions) -> dict[str, float]:
        eo, Cw = channel_table(at)
        return {"eo": eo, "Cw": Cw}

    shape = _Shape(name, row, part, "kip in", _AISC, "read", moments, d)
    e = float(row["eo"]) + d["tw"] / 2
    left_out = 1.5 * (d["tf"] / (d["bf"] - d["tw"] / 2)) ** 2
    line = f"mid-lines: order (t/b)² is left out ({left_out:.1%})"
    return [
        shape.case(
            "eo",
            lambda p: -d["bf"] / 2 - p.ysc_trefftz,
            "in",
            _Model(left_out * e / float(row["eo"]), f"{line}, of e = eo + tw/2"),
        ),
        shape.case("Cw", lambda p: p.Iw, "in⁶", _Model(left_out, line)),
    ]


def _l(name: str, row: Row) -> list[Case]:
    d = _numbers(row, "d", "b", "t")
    sharp: Table = {"shape": "angle", "depth": d["d"], "width": d["b"], "thickness": d["t"]}
    rounded: Table = {**sharp, "root_radius": float(row["kdes"]) - d["t"]}
    plain = _Shape(name, row, sharp, "kip in", _AISC, "read")
    root = _Shape(name, row, rounded, "kip in", _AISC, "read")
    thin = _Model(d["t"] / (d["b"] - d["t"] / 2), "t³ (b³ + d³)/36 of the legs' mid-lines: order t/b is left out")
    return [
        plain.case("A", lambda p: p.A, "in²"),
        plain.case("x", lambda p: p.yc + d["b"] / 2, "in"),
        root.case("J", lambda p: p.IT, "in⁴", _Model(0.01, "a fit for the junction, good to about 1 %")),
        root.case("Cw", lambda p: p.Iw, "in⁶", thin),
    ]


def _wt(name: str, row: Row) -> list[Case]:
    d = _numbers(row, "d", "bf", "tw", "tf")
    part: Table = {
        "shape": "tee",
        "depth": d["d"],
        "width": d["bf"],
        "web": d["tw"],
        "flange": d["tf"],
        "root_radius": float(row["kdes"]) - d["tf"],
    }
    shape = _Shape(name, row, part, "kip in", _AISC, "read", tee_moments, d)
    no_spread = _Shape(name, row, part, "kip in", _AISC, "read")
    thin = _Model(
        d["tf"] / d["bf"] * 2, "bf³ tf³/144 + d³ tw³/36 of the mid-lines: order t/b is left out, b the outstand"
    )
    return [
        shape.case("A", lambda p: p.A, "in²"),
        shape.case("y", lambda p: d["d"] / 2 - p.zc, "in"),
        shape.case("Ix", lambda p: p.Iyy, "in⁴"),
        shape.case("Iy", lambda p: p.Izz, "in⁴"),
        shape.case(
            "J",
            lambda p: p.IT,
            "in⁴",
            _Model(0.01, "El Darwish and Johnston's fit for the junction, good to about 1 %"),
        ),
        no_spread.case("Cw", lambda p: p.Iw, "in⁶", thin),
    ]


def _tube(name: str, row: Row, units: str, source: Source, cm: float, outer: float) -> list[Case]:
    """Corners: outside radius 2 t, inside t, as both tables assume; `cm` is the table's length unit in the file's."""
    d = _numbers(row, "h", "b", "t")
    part: Table = {
        "shape": "box", "depth": d["h"], "width": d["b"], "web": d["t"], "flange": d["t"], "outer_radius": 2 * d["t"],
        "inner_radius": d["t"],
    }  # fmt: skip
    shape = _Shape(name, row, part, units, source, "read", tube_moments, d, rounded_dimensions=units != "N mm")
    walls = 2 * open_share(d)
    bredt = _Model(
        walls, f"Bredt's formula leaves out the walls' own t³/3 and the corners, each of the size of {walls / 2:.1%}"
    )
    length = "cm" if units == "N mm" else "in"
    return [
        shape.case("A", lambda p: p.A / cm**2, f"{length}²"),
        shape.case("Iy", lambda p: p.Iyy / cm**4, f"{length}⁴"),
        shape.case("Iz", lambda p: p.Izz / cm**4, f"{length}⁴"),
        shape.case("It", lambda p: p.IT / cm**4, f"{length}⁴", bredt),
    ]
