"""Thin-wall formulas as limits: what the tool gives at t and t/2, carried on to t = 0, and the order at which it gets there.

ours(t)/formula(t) - 1 = c t^m + d t^n + smaller terms. The limit follows by Richardson's extrapolation with the m expected,
the order m from two thicknesses; where n = m + 1 a third, 2 t, takes out the second term first: e(t) -> 2^n e(t/2) - e(t).
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable
from dataclasses import dataclass

from xsec_fem.results import Result

from ..case import Case, Source, Tolerance
from ..closed_form import thin_walls
from ..closed_form.cells import square_tube_shear_coefficient
from ..section_text import Table, section_text

GROUP = "thin-wall limits"
_TIMOSHENKO = Source(
    "S. P. Timoshenko, J. M. Gere", "Theory of Elastic Stability, 2nd ed.", "1961", "appendix, e and warping constants"
)
_BREDT = Source("R. Bredt", "Kritische Bemerkungen zur Drehungselastizität, Z. VDI 40", "1896", "4 A_m²/∮ds/t")
_SAINT_VENANT = Source(
    "B. de Saint-Venant", "De la torsion des prismes", "1855", "narrow strips, IT = sum of b t³/3, ends 0.630 t"
)
_DERIVED = Source("derived here", "flow of a square tube, even across the walls", "2026", "")
Ratio = Callable[[Result, float], float]


@dataclass(frozen=True)
class _Limit:
    """One formula: `ratio` is ours over the formula at thickness t, `order` m is expected, `next_order` that of the term after
    it.

    `size` is the length that t is compared with.
    """

    name: str
    title: str
    quantity: str
    make: Callable[[float], str]
    t: float
    size: float
    ratio: Ratio
    order: int
    next_order: int
    source: Source

    def cases(self) -> list[Case]:
        """The limit and the order."""
        texts = (self.make(self.t), self.make(self.t / 2))
        ends = f"{self.title}, t = {self.t:g} and {self.t / 2:g}"
        # two terms left out by the extrapolation, each of a coefficient of order 1; constants are good to the square of 1e-3
        left_out = (self.t / self.size) ** self.next_order
        limit = Tolerance(
            left_out + 5e-6,
            f"left out by the extrapolation: order (t/b)^{self.next_order}; meshes asked for 1e-3 in energy",
        )
        share = 2.0**self.order

        def extrapolated(thick: Result, thin: Result) -> float:
            first, second = self.ratio(thick, self.t), self.ratio(thin, self.t / 2)
            return (share * second - first) / (share - 1)

        return [
            Case(f"thin.{self.name}.limit", GROUP, ends, f"{self.quantity} over its formula, t -> 0", texts, extrapolated, 1.0,
                 self.source, "computed", limit),
            self._order(),
        ]  # fmt: skip

    def _order(self) -> Case:
        apart = self.next_order - self.order
        steps = (2 * self.t, self.t, self.t / 2) if apart == 1 else (self.t, self.t / 2)

        def observed(*results: Result) -> float:
            errors = [self.ratio(result, t) - 1 for result, t in zip(results, steps, strict=True)]
            if apart == 1:
                errors = [2**self.next_order * thin - thick for thick, thin in itertools.pairwise(errors)]
            return math.log2(errors[0] / errors[1])

        left_out = 1.5 * (steps[0] / self.size) ** 2
        return Case(
            f"thin.{self.name}.order", GROUP, f"{self.title}, t = {', '.join(f'{t:g}' for t in steps)}",
            f"{self.quantity}: order of the difference in t", tuple(self.make(t) for t in steps), observed, float(self.order),
            self.source, "computed",
            Tolerance(max(0.01, left_out), "terms left out are (t/b)² times the first, times a number of order 1", relative=False),
        )  # fmt: skip


_H, _B = 120.0, 60.0  # mid-line depth and width
_HALF = math.radians(179.0)  # half opening of the slit tube


def _channel(t: float) -> str:
    return _text("channel", {"shape": "channel", "depth": _H + t, "width": _B + t / 2, "web": t, "flange": t}, t)


def _i(t: float) -> str:
    return _text("I", {"shape": "i_shape", "depth": _H + t, "width": _B, "web": t, "flange": t}, t)


def _slit_tube(t: float) -> str:
    return _text(
        "slit tube", {"shape": "sector", "radius": 1 + t / 2, "thickness": t, "from_deg": 1.0, "to_deg": 359.0}, t
    )


def _square_tube(t: float) -> str:
    return _text("square tube", {"shape": "box", "depth": 1 + t, "width": 1 + t, "web": t, "flange": t}, t)


def _text(name: str, part: Table, t: float) -> str:
    return section_text(f"{name}, t = {t:g}", [part], nu=0.3, solve={"accuracy": 1e-3})


def _channel_e(result: Result, t: float) -> float:
    web = -(_B + t / 2) / 2 + t / 2
    return (web - result.properties.ysc_trefftz) / thin_walls.channel(_H, _B, t)[0]


def _end_loss(result: Result, t: float) -> float:
    """What is missing from L t³/3, over t⁴/3 and over the 0.630 of two ends of a strip."""
    whole = thin_walls.arc(1.0, _HALF, t)[1]
    return (whole - result.properties.IT) / (t**4 / 3) / thin_walls.end_loss()


def cases() -> list[Case]:
    """Return limits of channel, I, slit tube and square tube."""
    c, i, s = "channel 120 x 60, mid-lines", "I 120 x 60, mid-lines", "slit tube, mid-radius 1, slit 2°"
    limits = [
        _Limit("channel.e", c, "e", _channel, 8.0, _B, _channel_e, 2, 4, _TIMOSHENKO),
        _Limit("channel.Iw", c, "Iw", _channel, 8.0, _B, lambda r, t: r.properties.Iw / thin_walls.channel(_H, _B, t)[2], 2, 3,
               _TIMOSHENKO),
        _Limit("channel.IT", c, "IT", _channel, 8.0, _B, lambda r, t: r.properties.IT / thin_walls.channel(_H, _B, t)[1], 1, 3,
               _SAINT_VENANT),
        _Limit("i.Iw", i, "Iw", _i, 4.0, _B, lambda r, t: r.properties.Iw / thin_walls.i_section(_H, _B, t)[1], 2, 3, _TIMOSHENKO),
        _Limit("i.IT", i, "IT", _i, 4.0, _B, lambda r, t: r.properties.IT / thin_walls.i_section(_H, _B, t)[0], 1, 3,
               _SAINT_VENANT),
        _Limit("slit-tube.e", s, "shear centre from the middle", _slit_tube, 0.1, 1.0,
               lambda r, t: -r.properties.ysc_trefftz / thin_walls.arc(1.0, _HALF, t)[0], 2, 4, _TIMOSHENKO),
        _Limit("slit-tube.Iw", s, "Iw", _slit_tube, 0.1, 1.0, lambda r, t: r.properties.Iw / thin_walls.arc(1.0, _HALF, t)[2], 2, 4,
               _TIMOSHENKO),
        _Limit("slit-tube.IT", s, "IT", _slit_tube, 0.1, 1.0, lambda r, t: r.properties.IT / thin_walls.arc(1.0, _HALF, t)[1], 1, 2,
               _SAINT_VENANT),
        _Limit("slit-tube.ends", s, "loss of IT at the ends", _slit_tube, 0.1, 1.0, _end_loss, 1, 2, _SAINT_VENANT),
        _Limit("square-tube.IT", "square tube, mid-lines 1", "IT", _square_tube, 0.05, 1.0, lambda r, t: r.properties.IT / t, 1, 2,
               _BREDT),
        _Limit("square-tube.Asz", "square tube, mid-lines 1", "Asz/A", _square_tube, 0.05, 1.0,
               lambda r, t: r.properties.Asz / r.properties.A / square_tube_shear_coefficient(), 1, 2, _DERIVED),
    ]  # fmt: skip
    return [case for limit in limits for case in limit.cases()]
