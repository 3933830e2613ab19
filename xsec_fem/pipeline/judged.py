"""The verdict again, by other limits than the default ones."""

from __future__ import annotations

from dataclasses import replace

from xsec_fem.elementary.compare import Limits
from xsec_fem.elementary.verdict import verdict
from xsec_fem.results import CaseResult, Result


def judged(result: Result, limits: Limits) -> Result:
    """Return the result with the verdicts that `limits` (shares, -) give; the places compared stay the same."""
    return replace(result, cases=tuple(_judged(case, limits) for case in result.cases))


def _judged(case: CaseResult, limits: Limits) -> CaseResult:
    if case.comparison is None:
        return case
    comparison = replace(case.comparison, limits=replace(limits, small=case.comparison.limits.small))
    return replace(case, comparison=comparison, verdict=verdict(comparison))
