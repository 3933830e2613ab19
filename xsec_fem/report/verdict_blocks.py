"""The verdict on V S/(I t): the sentence, then parts and walls with both numbers and the reason."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.elementary.compare import Comparison
from xsec_fem.elementary.verdict import GOOD, Finding
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.numbers import number, point
from xsec_fem.report.wording import is_twisted, section_size
from xsec_fem.results import CaseResult, Result


def verdict_blocks(result: Result, case: CaseResult, every: bool = False) -> list[Block]:
    """Return the verdict of one case; parts and walls that are good only when `every` is set [MPa, mm].

    Nothing in a case without shear.
    """
    if case.verdict is None or case.comparison is None:
        return []
    findings = [*case.verdict.parts, *case.verdict.walls]
    shown = [finding for finding in findings if every or finding.grade != GOOD]
    blocks: list[Block] = [Heading(f"V S/(I t) against the elasticity solution: {case.verdict.grade}", 3)]
    blocks.append(
        Lines((case.verdict.message + (" Torsion is left out on both sides." if is_twisted(result, case) else ""),))
    )
    if shown:
        blocks.append(_table(result, shown))
    reasons = [line for reason, line in _reasons(shown) if reason not in case.verdict.message]
    good = sum(finding.grade == GOOD for finding in findings)
    if not every and good and shown:
        limit = 100 * case.comparison.limits.good
        reasons.append(f"{good} more within {limit:g} %: xsec-fem compare lists them")
    return [*blocks, Lines(tuple(reasons))] if reasons else blocks


def _table(result: Result, findings: Sequence[Finding]) -> Table:
    units, size = result.section.units, section_size(result)
    header = (
        "part or part/wall", "verdict", "side", f"elasticity [{units.stress}]", f"V S/(I t) [{units.stress}]",
        "ratio [-]", f"at (y, z) [{units.length}]",
    )  # fmt: skip
    rows = tuple(
        (
            finding.name, finding.grade, finding.side, number(finding.elasticity, 4), number(finding.elementary, 4),
            f"{finding.ratio:.3g}" if finding.elementary else "-", point(*finding.at, size, 4),
        )
        for finding in findings
    )  # fmt: skip
    return Table(header, rows, "lllrrrl")


def _reasons(findings: Sequence[Finding]) -> list[tuple[str, str]]:
    """Each reason once, and its line with the parts and walls it holds for before it."""
    names: dict[str, list[str]] = {}
    for finding in findings:
        if finding.reason:
            names.setdefault(finding.reason, []).append(finding.name)
    return [(reason, f"{', '.join(dict.fromkeys(who))}: {reason}") for reason, who in names.items()]


def scale_line(comparison: Comparison) -> str:
    """Return how the grades are meant: the shares of `comparison.limits` in percent."""
    good, care, small = (
        100 * share for share in (comparison.limits.good, comparison.limits.care, comparison.limits.small)
    )
    return (
        f"good: within {good:g} %; use with care: within {care:g} %; poor: beyond. Ratio: largest |tau| of the elasticity solution "
        f"on a cut (of a wall: along it) over V S/(I t) of that cut; cuts with less than {small:g} % of the largest do not count."
    )
