"""The summary of a result: what an engineer reads first, every number with its unit."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.case_summary import case_blocks
from xsec_fem.report.corner_blocks import corner_blocks
from xsec_fem.report.numbers import number
from xsec_fem.report.property_table import properties_table
from xsec_fem.report.trust_blocks import accuracy_blocks, convergence_blocks
from xsec_fem.report.wording import counted, section_size
from xsec_fem.results import Result

NO_ACTIONS = "No actions in the file: no stresses. Add an [[actions]] table for them."


def summary(result: Result, files: Sequence[str] = (), hand: bool = False) -> list[Block]:
    """Return title, properties, accuracy, cases, contacts, corners, checks, warnings and the names of the files written.

    `hand` adds the hand calculation of every named cut, symbol by symbol.
    """
    blocks: list[Block] = [
        *head_blocks(result),
        Heading(f"Section properties (over reference material {result.properties.reference_material})"),
        properties_table(result.properties, result.section.units, section_size(result), result.certificate),
        *accuracy_blocks(result),
    ]
    for k, case in enumerate(result.cases):
        blocks += [Heading(case_title(result, k)), *case_blocks(result, case, hand)]
    if not result.cases:
        blocks.append(Lines((NO_ACTIONS,)))
    blocks += _contacts(result) + corner_blocks(result) + _trust(result) + convergence_blocks(result)
    if files:
        blocks += [Heading("Files written"), Lines(tuple(files))]
    return blocks


def head_blocks(result: Result) -> list[Block]:
    """Return the title, the file with its units, and the mesh [s]."""
    section, mesh = result.section, result.mesh
    source = str(section.path) if section.path else "built in Python"
    return [
        Heading(section.title or "Section", 1),
        Lines(
            (
                f"file: {source}; units: {section.units.name} (stress in {section.units.stress})",
                f"mesh: {counted(len(mesh.nodes), 'node')}, {counted(len(mesh.triangles), 'triangle')} of order {mesh.order}; "
                f"solved in {number(_seconds(result), 3)} s",
            )
        ),
    ]


def case_title(result: Result, index: int) -> str:
    """Return "Load case 1 of 2: its name", without the count when there is one."""
    count = f"Load case {index + 1} of {len(result.cases)}" if len(result.cases) > 1 else "Load case"
    return f"{count}: {result.cases[index].name}"


def _seconds(result: Result) -> float:
    stages = ("mesh", "assemble", "factorise", "solve", "certificate", "recover")
    return sum(result.timings.get(stage, 0.0) for stage in stages)


def _contacts(result: Result) -> list[Block]:
    if not result.contacts:
        return []
    length = result.section.units.length
    rows = tuple(
        (
            " | ".join(contact.parts), number(contact.length), number(contact.slit, scale=contact.length),
            contact.joint or "none: taken as one solid",
        )
        for contact in result.contacts
    )  # fmt: skip
    header = ("parts", f"along [{length}]", f"of it a slit [{length}]", "joint")
    return [Heading("Parts that touch"), Table(header, rows, "lrrl")]


def _trust(result: Result) -> list[Block]:
    failed = [check for check in result.checks if not check.ok]
    if failed:
        lines = tuple(
            f"FAILED: {c.name}: {number(c.value, 3)} is above its limit {number(c.limit, 3)} [-]" for c in failed
        )
        lines += (f"{len(result.checks) - len(failed)} of {len(result.checks)} within their limits",)
    else:
        lines = (f"all {len(result.checks)} within their limits",)
    blocks: list[Block] = [Heading("Checks of the solution"), Lines(lines)]
    over = over_strength_lines(result)
    if over:
        blocks += [Heading("Over strength"), Lines(over)]
    if result.warnings:
        blocks += [Heading("Warnings"), Lines(tuple(caution.message for caution in result.warnings))]
    return blocks


def over_strength_lines(result: Result) -> tuple[str, ...]:
    """Return one sentence for each part or joint above its strength, with its utilisation [-]."""
    found = []
    for case in result.cases:
        for thing, items in (("part", case.parts), ("joint", case.joints)):
            for item in items:
                if item.utilisation is not None and item.utilisation > 1.0:
                    found.append(f"{case.name}: {thing} {item.name} has utilisation {number(item.utilisation, 3)}")
    return tuple(found)
