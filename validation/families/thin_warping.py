"""Warping constants and shear centres of open thin walls: the section of finite thickness against the formula of its mid-line."""

from __future__ import annotations

from ..case import Case, Source, Tolerance
from ..reading import Read, constant, from_centroid
from ..section_text import Table, section_text
from ..sources import TIMOSHENKO_GERE, at
from ..tolerances import SOLVE

GROUP = "thin open walls, warping constant and shear centre"
MID_LINE = at(TIMOSHENKO_GERE, "ch. 5, warping constants of open sections by their mid-lines")
VLASOV = Source(
    "V. Z. Vlasov", "Thin-Walled Elastic Beams, 2nd ed.", "1961", "warping across the wall of a narrow rectangle"
)
H, B, T = 100.0, 50.0, 1.0  # of the mid-line: depth, flange; thickness
SQUARE = (T / B) ** 2
THIN = Tolerance(
    2 * SQUARE,
    "the mid-line leaves out the warping across the wall and the squares at the corners, both of the order of "
    f"(thickness/flange)², {SQUARE:g} here, with factors about 1",
)


def cases() -> list[Case]:
    """Return the cases of this family."""
    channel: Table = {"shape": "channel", "depth": H + T, "width": B + T / 2, "web": T, "flange": T}
    i_shape: Table = {"shape": "i_shape", "depth": H + T, "width": B, "web": T, "flange": T}
    zed: Table = {"shape": "zed", "depth": H + T, "width": 2 * B, "web": T, "flange": T}
    narrow: Table = {"shape": "rectangle", "width": T, "height": H}
    from_web, centroid = 3 * B**2 / (H + 6 * B), B**2 / (H + 2 * B)
    return [
        _case("channel", channel, "Iw", T * B**3 * H**2 / 12 * (3 * B + 2 * H) / (6 * B + H)),
        _case("channel", channel, "ysc from the centroid", -from_web - centroid),
        _case("I", i_shape, "Iw", T * B**3 * H**2 / 24),
        _case("zed", zed, "Iw", T * B**3 * H**2 / 12 * (B + 2 * H) / (2 * B + H)),
        _case("narrow rectangle", narrow, "Iw", (T * H) ** 3 / 144, VLASOV),
    ]


def _case(name: str, part: Table, quantity: str, reference: float, source: Source = MID_LINE) -> Case:
    read: Read = constant("Iw") if quantity == "Iw" else from_centroid("ysc_trefftz")
    title = f"{name}, mid-line {H:g}" + ("" if name == "narrow rectangle" else f" x {B:g}") + f", walls {T:g}"
    return Case(
        f"thin.{name}.{quantity.split()[0]}", GROUP, title, quantity, (section_text(name, [part], solve=SOLVE),), read,
        reference, source, "computed", THIN, "mm⁶" if quantity == "Iw" else "mm", quick=name == "narrow rectangle",
    )  # fmt: skip
