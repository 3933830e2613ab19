"""A case: one quantity of one section, a reference from outside the project, and how far apart the two may be, with the reason."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Literal, get_args

from xsec_fem.results import Result

Provenance = Literal["computed", "read", "common practice", "from memory"]
PROVENANCES: tuple[str, ...] = get_args(Provenance)
Interval = tuple[float, float]


@dataclass(frozen=True)
class Source:
    """Where a reference comes from: author, title, year, and the article, table or equation in it."""

    author: str
    title: str
    year: str
    place: str = ""

    def __str__(self) -> str:
        return ", ".join(text for text in (self.author, self.title, self.year, self.place) if text)


@dataclass(frozen=True)
class Tolerance:
    """How far the result may be from the reference, and why that much.

    Attributes
    ----------
    value : of the reference's magnitude when `relative` [-], in the quantity's unit otherwise.
    reason : a sentence: rounding of the table, error of the polygon, accuracy the mesh was asked for, ...
    """

    value: float
    reason: str
    relative: bool = True

    def __post_init__(self) -> None:
        if not (math.isfinite(self.value) and self.value > 0):
            raise ValueError(f"a tolerance must be a finite number > 0 (got {self.value})")
        if not self.reason.strip():
            raise ValueError(f"a tolerance needs a reason (got {self.reason!r})")

    def allowed(self, reference: float) -> float:
        """Return the largest allowed difference, in the quantity's unit."""
        return self.value * abs(reference) if self.relative else self.value


@dataclass(frozen=True)
class Case:
    """One check.

    Attributes
    ----------
    id : unique, dotted: "family.shape.quantity".
    group : heading of the table it stands under.
    title : the section, in words with its parameters.
    quantity, unit : what is compared; "-" for pure numbers.
    sections : texts of the section files to solve; several for a rate or a ratio, none for a check of the kernel alone.
        Cases with the same text share one solve.
    extract : from the results, in the order of `sections`, to the number.
    reference : the number, or a function that computes it from its formula.
    source, provenance : where the reference comes from; "computed" is from a formula or an independent numerical method,
        "read" in a copy of the source, "common practice" without a source, "from memory" not looked up again.
    tolerance : allowed difference with its reason.
    interval : from the results to our guaranteed interval of the quantity. Where the certificate is strict, the reference
        must lie in it, give or take `reference_error`.
    reference_error : relative accuracy of the reference itself, where it is a rounded number [-].
    quick : part of the short run.
    """

    id: str
    group: str
    title: str
    quantity: str
    sections: tuple[str, ...]
    extract: Callable[..., float]
    reference: float | Callable[[], float]
    source: Source
    provenance: Provenance
    tolerance: Tolerance
    unit: str = "-"
    interval: Callable[..., Interval] | None = None
    reference_error: float = 0.0
    quick: bool = False

    def reference_value(self) -> float:
        """Return the reference, computed from its formula where it has one, in the quantity's unit."""
        return float(self.reference() if callable(self.reference) else self.reference)


@dataclass(frozen=True)
class Record:
    """What came of a case.

    Attributes
    ----------
    case_id, group, title, quantity, unit, source, provenance, reason : of the case, as text.
    reference, ours : the two numbers [unit]; `ours` is None when there is no result.
    interval : our guaranteed one, None where there is none.
    strict : True when nothing but round-off stands behind the interval.
    difference, allowed : |ours - reference| and the largest one allowed [unit].
    relative : the tolerance is a share of the reference.
    ok : within the tolerance, and the reference in the strict interval.
    message : why not.
    seconds : spent on the case's solves, shared with the cases of the same section.
    """

    case_id: str
    group: str
    title: str
    quantity: str
    unit: str
    source: str
    provenance: str
    reason: str
    reference: float
    ours: float | None
    interval: Interval | None
    strict: bool
    difference: float | None
    allowed: float
    relative: bool
    ok: bool
    message: str = ""
    seconds: float = field(default=0.0, compare=False)

    @property
    def inside_strict(self) -> bool:
        """True when there is a strict interval and nothing is wrong: then the reference lies in it."""
        return self.strict and self.interval is not None and self.ok

    @property
    def scale(self) -> float:
        """What difference and allowed are divided by to be shown: |reference| where the tolerance is relative, else 1."""
        return abs(self.reference) if self.relative else 1.0


def judge(case: Case, *results: Result) -> Record:
    """Return the record of a case from the results of its sections."""
    reference = case.reference_value()
    ours = float(case.extract(*results))
    interval = case.interval(*results) if case.interval is not None else None
    strict = interval is not None and all(r.certificate is not None and r.certificate.strict for r in results)
    difference, allowed = abs(ours - reference), case.tolerance.allowed(reference)
    faults = []
    if not difference <= allowed:  # also when it is not a number
        faults.append(f"differs by {difference:.3g}, allowed are {allowed:.3g}")
    if strict and interval is not None and not _within(reference, interval, case.reference_error):
        faults.append(f"the reference {reference:.12g} lies outside the guaranteed interval {interval}")
    return _record(case, reference, ours, interval, strict, faults)


def failed(case: Case, message: str) -> Record:
    """Return the record of a case that gave no result."""
    return _record(case, case.reference_value(), None, None, False, [message])


def _within(reference: float, interval: Interval, reference_error: float) -> bool:
    slack = max(reference_error, _ROUND_OFF) * max(abs(reference), *map(abs, interval))
    return interval[0] - slack <= reference <= interval[1] + slack


_ROUND_OFF = 1e-11  # of the sums behind the constants: a few hundred to a few thousand nodes at 1e-16 each, and the factorisation


def _record(
    case: Case, reference: float, ours: float | None, interval: Interval | None, strict: bool, faults: list[str]
) -> Record:
    return Record(
        case.id, case.group, case.title, case.quantity, case.unit, str(case.source), case.provenance,
        case.tolerance.reason, reference, ours, interval, strict,
        difference=None if ours is None else abs(ours - reference),
        allowed=case.tolerance.allowed(reference), relative=case.tolerance.relative, ok=not faults, message="; ".join(faults),
    )  # fmt: skip
