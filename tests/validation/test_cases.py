"""Every case of the validation library holds, and says where its reference and its tolerance come from."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Callable

import numpy as np
import pytest

from validation.case import PROVENANCES, Case, Record
from validation.families import all_cases, select
from validation.readme import README, readme, stale_lines
from xsec_fem.model.reader import parse_section

CASES = all_cases()


@pytest.mark.parametrize(
    "case", [pytest.param(case, id=case.id, marks=[] if case.quick else [pytest.mark.slow]) for case in CASES]
)
def test_case(case: Case, record_of: Callable[[Case], Record]) -> None:
    record = record_of(case)
    assert record.ok, f"{record.message} ({record.reason})"


@pytest.mark.slow
def test_readme_is_what_a_fresh_run_gives(record_of: Callable[[Case], Record]) -> None:
    fresh = readme([record_of(case) for case in CASES])
    stale = stale_lines(README.read_text(encoding="utf-8"), fresh)
    assert not stale, "run `xsec-fem validate --write-readme`; new lines:\n" + "\n".join(stale)


def test_there_are_enough_checks() -> None:
    assert len(CASES) >= 120
    assert len({case.group for case in CASES}) >= 15


def test_ids_are_unique_and_plain() -> None:
    assert max(Counter(case.id for case in CASES).values()) == 1
    assert all(case.id.isprintable() and case.id == case.id.strip() for case in CASES)


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_case_says_where_it_comes_from(case: Case) -> None:
    assert case.group
    assert case.title
    assert case.quantity
    assert case.source.author
    assert case.source.title or case.source.place
    assert re.fullmatch(r"\d{4}|-|", case.source.year), case.source.year
    assert case.provenance in PROVENANCES
    assert len(case.tolerance.reason) >= len("round-off")
    assert case.tolerance.value < 1
    assert np.isfinite(case.reference_value())
    assert case.tolerance.allowed(case.reference_value()) > 0, "nothing may differ from nought by a share of nought"


def test_sections_can_be_read() -> None:
    for text in {text for case in CASES for text in case.sections}:
        assert parse_section(text, "case.toml").parts


def test_selection() -> None:
    assert select() == CASES or len(select()) == len(CASES)
    assert {case.group for case in select("ELLIPSE torsion")} <= {case.group for case in CASES}
    assert all("ellipse" in f"{case.id} {case.title}".lower() for case in select("ellipse torsion"))
    assert select("no such thing") == []
    quick = select(quick=True)
    assert 0 < len(quick) < len(CASES)
    assert all(case.quick for case in quick)


def test_quick_run_looks_at_most_groups() -> None:
    missing = {case.group for case in CASES} - {case.group for case in select(quick=True)}
    assert len(missing) <= 3, missing
