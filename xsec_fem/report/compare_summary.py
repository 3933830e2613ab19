"""The comparison with V S/(I t) in words and tables: verdict, parts, walls by both hand values, named cuts symbol by symbol."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from xsec_fem.elementary.walls import WallTable
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.cut_blocks import cut_blocks
from xsec_fem.report.numbers import number, point
from xsec_fem.report.summary import NO_ACTIONS, case_title, head_blocks
from xsec_fem.report.verdict_blocks import scale_line, verdict_blocks
from xsec_fem.report.wording import actions_text, load_point_text, section_size
from xsec_fem.results import CaseResult, Result

_NO_SHEAR = "No shear force in this case: nothing to compare."


def compare_summary(result: Result, files: Sequence[str] = ()) -> list[Block]:
    """Return title, the comparison of every case with V S/(I t), and the names of the files written [MPa, mm]."""
    blocks = head_blocks(result)
    for k, case in enumerate(result.cases):
        blocks += [Heading(case_title(result, k)), *_case_blocks(result, case)]
    if not result.cases:
        blocks.append(Lines((NO_ACTIONS,)))
    if files:
        blocks += [Heading("Files written"), Lines(tuple(files))]
    return blocks


def _case_blocks(result: Result, case: CaseResult) -> list[Block]:
    units = result.section.units
    where = load_point_text(case.actions, units)
    blocks: list[Block] = [Lines((f"actions: {actions_text(case.actions, units)}{' ' + where if where else ''}",))]
    if case.comparison is None:
        blocks.append(Lines((_NO_SHEAR,)))
    else:
        blocks += [*verdict_blocks(result, case, every=True), Lines((scale_line(case.comparison),))]
        blocks += wall_blocks(result, case)
    return blocks + cut_blocks(result, case, hand=True)


def wall_blocks(result: Result, case: CaseResult) -> list[Block]:
    """Return, for every wall that can be cut, the field and both hand values where its stress is largest [MPa, mm]."""
    tables = [wall.table for wall in case.comparison.walls if wall.table is not None] if case.comparison else []
    rows = tuple(_wall_row(result, case, table) for table in tables if not np.isnan(table.largest).all())
    if not rows:
        return []
    units = result.section.units
    header = (
        "wall", f"at (y, z) [{units.length}]", f"t [{units.length}]", f"field mean [{units.stress}]",
        f"field largest [{units.stress}]", f"V S/(I t) across the wall [{units.stress}]",
        f"V S/(I t) through the section [{units.stress}]",
    )  # fmt: skip
    title = "walls, each where the stress along it is largest: a cut across the wall alone, and one through the section"
    return [Heading(title, 3), Table(header, rows, "llrrrrr")]


def _wall_row(result: Result, case: CaseResult, table: WallTable) -> tuple[str, ...]:
    size, tau = section_size(result), case.comparison.largest if case.comparison else 0.0
    row = int(np.nanargmax(table.largest))
    y, z = table.middle[row].tolist()
    across, through = abs(float(table.across_wall[row])), abs(float(table.whole_section[row]))
    return (
        table.name, point(y, z, size, 4), number(float(table.t[row]), 4), number(abs(float(table.mean[row])), 4, tau),
        number(float(table.largest[row]), 4), "closed cell" if np.isnan(across) else number(across, 4, tau),
        "-" if np.isnan(through) else number(through, 4, tau),
    )  # fmt: skip
