"""The verdict on V S/(I t): good, use with care or poor, for the section, each part and each wall, with the reason."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.elementary.causes import Cause, cause_of, place_text
from xsec_fem.elementary.compare import Compared, Comparison, Difference, Limits
from xsec_fem.elementary.walls import WallTable
from xsec_fem.model.outline import Point
from xsec_fem.units import UnitSystem

FloatArray = npt.NDArray[np.float64]

GOOD, CARE, POOR = "good", "use with care", "poor"
TOO_LOW, TOO_HIGH = "formula too low", "formula too high"
_GRADES = (GOOD, CARE, POOR)


@dataclass(frozen=True)
class Finding:
    """One side of one part or wall.

    side : "formula too low" (unsafe) or "formula too high". grade : "good", "use with care" or "poor". elasticity, elementary [MPa]
    at (y, z) [mm]; cause : a code of xsec_fem.elementary.causes, "" when good; message : one or two sentences; reason : the
    second of them, "" when good.
    """

    name: str
    side: str
    grade: str
    elasticity: float
    elementary: float
    at: Point
    cause: str
    message: str
    reason: str = ""

    @property
    def ratio(self) -> float:
        """Elasticity over elementary [-]; infinite when the formula gives 0."""
        return self.elasticity / self.elementary if self.elementary else float("inf")


@dataclass(frozen=True)
class Verdict:
    """The verdict on the section, with all findings of parts and walls.

    grade : the worst of the parts. message : one sentence. parts, walls : findings, the unsafe side of each first.
    """

    grade: str
    message: str
    parts: tuple[Finding, ...]
    walls: tuple[Finding, ...]

    @property
    def too_low(self) -> Finding | None:
        """The place in any part where the field exceeds the formula most; None when it never does."""
        return _farthest(self.parts, TOO_LOW)

    @property
    def too_high(self) -> Finding | None:
        """The place in any part where the formula exceeds the field most; None when it never does."""
        return _farthest(self.parts, TOO_HIGH)


def grade_of(ratio: float, limits: Limits) -> str:
    """Return "good", "use with care" or "poor" for elasticity/elementary [-]."""
    off = abs(ratio - 1.0)
    return GOOD if off <= limits.good else CARE if off <= limits.care else POOR


def verdict(comparison: Comparison) -> Verdict:
    """Judge a comparison [N, mm, MPa]; `comparison.limits` holds the shares."""
    normal = comparison.sweep.crossings.normal
    parts = tuple(finding for part in comparison.parts for finding in _findings(comparison, part, normal))
    walls = tuple(finding for wall in comparison.walls for finding in _findings(comparison, wall, None))
    grade = max((finding.grade for finding in parts), key=_GRADES.index, default=GOOD)
    return Verdict(grade, _summary(grade, parts, comparison.limits), parts, walls)


def _farthest(findings: tuple[Finding, ...], side: str) -> Finding | None:
    mine = [finding for finding in findings if finding.side == side]
    return max(mine, key=lambda finding: abs(finding.elasticity - finding.elementary)) if mine else None


def _summary(grade: str, parts: tuple[Finding, ...], limits: Limits) -> str:
    # a corner without limit says nothing of the formula where something else does
    telling = tuple(finding for finding in parts if finding.grade == grade and finding.cause != "corner") or parts
    low, high = _farthest(telling, TOO_LOW), _farthest(telling, TOO_HIGH)
    worst = low if low and low.grade == grade else high if high and high.grade == grade else low or high
    if worst is None or grade == GOOD:
        return f"V S/(I t) is good here: within {100 * limits.good:.0f} % in every part."
    return f"V S/(I t) is {'to be used with care' if grade == CARE else 'poor'} here. {worst.name}: {worst.message}"


def _findings(comparison: Comparison, compared: Compared, normal: FloatArray | None) -> Iterator[Finding]:
    for side, difference in ((TOO_LOW, compared.too_low), (TOO_HIGH, compared.too_high)):
        if difference is None:
            continue
        grade = grade_of(difference.ratio, comparison.limits)
        cause = Cause("", "")
        if grade != GOOD:
            cause = _cause(comparison, compared.table, difference, normal)
        message = f"{_numbers(side, difference, comparison.units)} {cause.sentence}".strip()
        yield Finding(
            compared.name, side, grade, difference.elasticity, difference.elementary, difference.at, cause.code, message,
            cause.sentence,
        )  # fmt: skip


def _numbers(side: str, difference: Difference, units: UnitSystem) -> str:
    return (
        f"{side.capitalize()}: elasticity {difference.elasticity:.4g} {units.stress}, V S/(I t) {difference.elementary:.4g} "
        f"{units.stress}, ratio {difference.ratio:.3g} at {place_text(difference.at, units.length)}."
    )


def _cause(comparison: Comparison, table: WallTable | None, difference: Difference, normal: FloatArray | None) -> Cause:
    if table is None or normal is not None:
        return cause_of(comparison, difference, comparison.sweep.crossings.normal if normal is None else normal)
    if table.in_closed_cell:
        sentence = (
            "Wall of a closed cell: a cut across it does not separate the section, so no hand cut knows its flow. "
            f"Compared with the cut through the whole section, {difference.elementary:.4g} {comparison.units.stress}."
        )
        return Cause("closed cell", sentence)
    return cause_of(comparison, difference, table.direction[difference.row], one_wall=True)
