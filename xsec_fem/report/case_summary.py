"""One load case in words and tables: largest stresses, parts, joints, cuts, probes, corners, the verdict on V S/(I t)."""

from __future__ import annotations

from xsec_fem.recovery.largest import Largest
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.corner_blocks import corner_readings
from xsec_fem.report.cut_blocks import cut_blocks
from xsec_fem.report.joint_blocks import joint_blocks, utilisation_text
from xsec_fem.report.numbers import number, point
from xsec_fem.report.verdict_blocks import verdict_blocks
from xsec_fem.report.wording import actions_text, load_point_text, section_size
from xsec_fem.results import CaseResult, Result


def case_blocks(result: Result, case: CaseResult, hand: bool = False) -> list[Block]:
    """Return the summary of one case; stresses, flows and lengths in the file's units, written beside them.

    With `hand` the hand calculation of every named cut is there symbol by symbol.
    """
    blocks: list[Block] = [Lines(_head(result, case)), _parts(result, case)]
    if any(part.tau_max.beside_corner for part in case.parts):
        blocks.append(Lines(("* read beside a corner without limit, which governs it",)))
    if case.joints:
        blocks += [Heading("joints", 3), *joint_blocks(result, case)]
    blocks += cut_blocks(result, case, hand)
    if case.probes:
        blocks += [Heading("probes", 3), _probes(result, case)]
    return blocks + corner_readings(result, case) + verdict_blocks(result, case)


def _head(result: Result, case: CaseResult) -> tuple[str, ...]:
    units, size = result.section.units, section_size(result)
    where = load_point_text(case.actions, units)
    shear = abs(case.forces.Vy) + abs(case.forces.Vz)
    torque = number(case.T_total, scale=shear * size)
    tau, equivalent = case.tau_max, case.von_mises_max
    components = ", ".join(
        f"{name} {number(value, scale=tau.value)}" for name, value in (("tau_xy", tau.tau_xy), ("tau_xz", tau.tau_xz))
    )
    return (
        f"actions: {actions_text(case.actions, units)}{' ' + where if where else ''}",
        f"torque about the shear centre, T_total: {torque} {units.moment}",
        f"largest |tau|: {number(tau.value)} {units.stress} {_place(tau, result)} ({components} {units.stress}){_beside(tau)}",
        f"largest von Mises: {number(equivalent.value)} {units.stress} {_place(equivalent, result)}{_beside(equivalent)}",
    )


def _place(largest: Largest, result: Result) -> str:
    size, length = section_size(result), result.section.units.length
    return f"at {point(largest.y, largest.z, size)} {length} in {largest.part}"


def _beside(largest: Largest) -> str:
    return "; read beside a corner without limit, which governs it" if largest.beside_corner else ""


def _parts(result: Result, case: CaseResult) -> Table:
    units, size = result.section.units, section_size(result)
    rated = any(part.utilisation is not None for part in case.parts)
    header = (
        "part",
        "material",
        f"largest |tau| [{units.stress}]",
        f"at (y, z) [{units.length}]",
        f"von Mises [{units.stress}]",
    )
    rows = [
        (
            part.name,
            result.section.part(part.name).material,
            number(part.tau_max.value),
            point(part.tau_max.y, part.tau_max.z, size) + (" *" if part.tau_max.beside_corner else ""),
            number(part.von_mises_max.value),
            *((utilisation_text(part.utilisation),) if rated else ()),
        )
        for part in case.parts
    ]
    return Table((*header, "utilisation [-]") if rated else header, tuple(rows), "llrlr" + "r" * rated)


def _probes(result: Result, case: CaseResult) -> Table:
    units, size = result.section.units, section_size(result)
    tau, sigma = case.tau_max.value, case.von_mises_max.value
    rows = tuple(
        (
            probe.name, value.part, point(probe.y, probe.z, size), number(value.tau_xy, scale=tau),
            number(value.tau_xz, scale=tau), number(value.tau), number(value.sigma_x, scale=sigma),
            number(value.von_mises),
        )
        for probe in case.probes
        for value in probe.values
    )  # fmt: skip
    stresses = tuple(f"{name} [{units.stress}]" for name in ("tau_xy", "tau_xz", "|tau|", "sigma_x", "von Mises"))
    return Table(("probe", "part", f"at (y, z) [{units.length}]", *stresses), rows, "lllrrrrr")
