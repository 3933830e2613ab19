"""Named cuts in words and tables: what the field says beside V S/(I t), and the hand calculation line by line."""

from __future__ import annotations

from xsec_fem.elementary.formula import HandCalculation
from xsec_fem.recovery.cuts import CutResult
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.numbers import number, point
from xsec_fem.report.wording import is_twisted, section_size
from xsec_fem.results import CaseResult, CutComparison, Result
from xsec_fem.units import UnitSystem

_AXIS = 1e-9  # share of Iyy and Izz below which a product moment is round-off


def cut_blocks(result: Result, case: CaseResult, hand: bool = False) -> list[Block]:
    """Return the cuts of one case beside V S/(I t), their walls, why a hand value is missing; with `hand` its symbols too."""
    if not case.cuts:
        return []
    blocks: list[Block] = [Heading("cuts", 3), _cuts(result, case)]
    if any(len(cut.field.spans) > 1 for cut in case.cuts):
        blocks.append(_walls(result, case))
    remarks = [f"{cut.field.name}: {cut.hand.reason}" for cut in case.cuts if cut.hand.calculation is None]
    if case.comparison is not None and is_twisted(result, case):
        remarks.append("The field's values hold torsion too; V S/(I t) does not know it.")
    if remarks:
        blocks.append(Lines(tuple(remarks)))
    if hand:
        for cut in case.cuts:
            blocks += hand_blocks(result, cut)
    return blocks


def _cuts(result: Result, case: CaseResult) -> Table:
    units, size, tau = result.section.units, section_size(result), case.tau_max.value
    header = (
        "cut", f"flow [{units.flow}]", f"t [{units.length}]", f"mean [{units.stress}]", f"peak [{units.stress}]",
        f"at (y, z) [{units.length}]", f"V S/(I t) [{units.stress}]", "peak / V S/(I t) [-]",
    )  # fmt: skip
    rows = tuple(
        (
            cut.field.name, number(cut.field.flow, scale=tau * size), number(cut.field.t), number(cut.field.mean, scale=tau),
            number(cut.field.peak, scale=tau), point(*cut.field.peak_at, size), *_hand_cells(cut, tau),
        )
        for cut in case.cuts
    )  # fmt: skip
    return Table(header, rows, "lrrrrlrr")


def _hand_cells(cut: CutComparison, tau: float) -> tuple[str, str]:
    calculation = cut.hand.calculation
    if calculation is None:
        return "none", "-"
    text = number(calculation.tau, scale=tau)
    return text, "-" if text == "0" or cut.ratio is None else f"{cut.ratio:.3f}"


def _walls(result: Result, case: CaseResult) -> Table:
    """One row a wall of every cut that crosses several."""
    units, size, tau = result.section.units, section_size(result), case.tau_max.value
    header = (
        "cut", "wall", f"from (y, z) [{units.length}]", f"to (y, z) [{units.length}]", f"t [{units.length}]", "through",
        f"flow [{units.flow}]", f"mean [{units.stress}]", f"peak [{units.stress}]",
    )  # fmt: skip
    rows = tuple(
        (
            cut.name, str(k), point(*span.start, size), point(*span.end, size), number(span.t), " | ".join(span.parts),
            number(span.flow, scale=tau * size), number(span.mean, scale=tau), number(span.peak, scale=tau),
        )
        for cut in _of_several_walls(case)
        for k, span in enumerate(cut.spans, start=1)
    )  # fmt: skip
    return Table(header, rows, "lrllrlrrr")


def _of_several_walls(case: CaseResult) -> list[CutResult]:
    return [cut.field for cut in case.cuts if len(cut.field.spans) > 1]


def hand_blocks(result: Result, cut: CutComparison) -> list[Block]:
    """Return the hand calculation of one cut, symbol by symbol with value, unit and meaning; nothing without one."""
    calculation = cut.hand.calculation
    if calculation is None:
        return []
    units, size = result.section.units, section_size(result)
    fields = {
        "Iyz": calculation.Iyy + calculation.Izz, "Sy": calculation.A * size, "Sz": calculation.A * size,
        "Vy": abs(calculation.Vz), "Vz": abs(calculation.Vy),
    }  # fmt: skip
    rows = tuple(
        (symbol, number(value, scale=fields.get(symbol, 0.0)), unit_of(dimension, units), meaning)
        for symbol, value, dimension, meaning in calculation.symbols()
    )
    line = (
        f"cut from {point(*calculation.start, size)} to {point(*calculation.end, size)} {units.length}; what is cut off lies "
        f"behind the normal {point(*calculation.normal, 1.0, 3)}"
    )
    heading = Heading(f"hand calculation: {cut.field.name}", 3)
    return [
        heading,
        Lines((line, formula_text(calculation))),
        Table(("symbol", "value", "unit", "meaning"), rows, "lrll"),
    ]


def formula_text(calculation: HandCalculation) -> str:
    """Return the formula that the symbols go into: about one axis where that is all there is, else about both."""
    c = calculation
    if abs(c.Iyz) > _AXIS * (c.Iyy + c.Izz) or (c.Vy and c.Vz):
        return "tau = q/t, q = -[(Vz Izz - Vy Iyz) Sy + (Vy Iyy - Vz Iyz) Sz]/(Iyy Izz - Iyz²)"
    return "tau = q/t, q = -Vz Sy/Iyy" if c.Vz else "tau = q/t, q = -Vy Sz/Izz"


def unit_of(dimension: str, units: UnitSystem) -> str:
    """Return the unit of a symbol's dimension: "force", "stress", "flow", or "L1" to "L6" for powers of length."""
    if dimension.startswith("L"):
        return units.power(int(dimension[1:]))
    return {"force": units.force, "stress": units.stress, "flow": units.flow}[dimension]
