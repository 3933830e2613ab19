"""Sections are solved once, faults become records, processes give the same as one."""

from __future__ import annotations

import os
from typing import Any

import pytest

from tests.validation.samples import SQUARE, sample
from validation import runner
from validation.families import select
from validation.runner import group_by_section, run


def test_cases_of_one_section_are_a_batch() -> None:
    a, b, c = sample(id="a", sections=("1",)), sample(id="b", sections=("2",)), sample(id="c", sections=("1",))
    assert [[case.id for case in batch] for batch in group_by_section([a, b, c])] == [["a", "c"], ["b"]]


def test_cases_of_several_sections_join_batches() -> None:
    a, b = sample(id="a", sections=("1",)), sample(id="b", sections=("2",))
    both, none = sample(id="both", sections=("1", "2")), sample(id="none", sections=())
    assert [[case.id for case in batch] for batch in group_by_section([a, b, none, both])] == [
        ["a", "b", "both"],
        ["none"],
    ]


def test_section_is_solved_once(monkeypatch: pytest.MonkeyPatch) -> None:
    solved = []
    original = runner.solve

    def counting(section: Any) -> Any:
        solved.append(section.title)
        return original(section)

    monkeypatch.setattr(runner, "solve", counting)
    records = run([sample(id="a"), sample(id="b")], jobs=1)
    assert [record.case_id for record in records] == ["a", "b"]
    assert solved == ["square"]


def test_case_of_two_sections_gets_both_results() -> None:
    twice = SQUARE.replace("height = 1", "height = 2")
    ratio = sample(sections=(SQUARE, twice), extract=lambda one, two: two.properties.A / one.properties.A, reference=2.0,
                   interval=None)  # fmt: skip
    assert run([ratio], jobs=1)[0].ok


def test_case_without_a_section() -> None:
    record = run([sample(sections=(), extract=lambda: 2.0, reference=2.0, interval=None)], jobs=1)[0]
    assert record.ok
    assert not record.strict


def test_section_that_cannot_be_read() -> None:
    record = run([sample(sections=("title = 3",))], jobs=1)[0]
    assert not record.ok
    assert record.message.startswith("InputError: section.toml: title")


def test_reader_that_fails() -> None:
    def broken(_: object) -> float:
        raise KeyError("no such thing")

    record = run([sample(extract=broken)], jobs=1)[0]
    assert record.message == "KeyError: 'no such thing'"


def test_progress_counts_cases() -> None:
    seen: list[tuple[int, int]] = []
    run([sample(id="a"), sample(id="b", sections=(), extract=lambda: 1.0)], 1, lambda *counts: seen.append(counts))
    assert seen == [(1, 2), (2, 2)]


def test_no_jobs() -> None:
    with pytest.raises(ValueError, match=r"jobs must be at least 1 \(got 0\)"):
        run([sample()], jobs=0)


def test_two_processes_give_what_one_gives(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("OMP_NUM_THREADS", "3")
    cases = [*select("torsion.rectangle.1.2"), *select("rectangle.1.nu0.25")]
    together, alone = run(cases, jobs=2), run(cases, jobs=1)
    assert (
        [record.case_id for record in together] == [record.case_id for record in alone] == [case.id for case in cases]
    )
    assert [record.ours for record in together] == pytest.approx([record.ours for record in alone], rel=1e-9)
    assert os.environ["OMP_NUM_THREADS"] == "3"
