"""Solve the sections of the cases, in parallel on the cores, and compare: each section once, each process one gmsh session."""

from __future__ import annotations

import os
import time
from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import BrokenExecutor, Future, ProcessPoolExecutor, as_completed
from contextlib import contextmanager
from dataclasses import replace
from functools import cache
from multiprocessing import get_context

from xsec_fem.model.reader import parse_section
from xsec_fem.pipeline import solve
from xsec_fem.results import Result

from .case import Case, Record, failed, judge
from .families import all_cases

Progress = Callable[[int, int], None]

# Linear algebra must not start threads of its own in processes that already share the cores
_THREAD_VARIABLES = ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS")


def run(cases: Sequence[Case], jobs: int | None = None, progress: Progress | None = None) -> list[Record]:
    """Return the records of the cases, in their order.

    `jobs` processes (None: one a core) share the work; with 1 it is done in this process. Cases for more than one process
    must be those of the families, which each process makes for itself. `progress` is called with the number of cases done
    and their total. A case that cannot be solved gives a record that says why; nothing is raised for it. Raises ValueError
    for jobs < 1.
    """
    if jobs is not None and jobs < 1:
        raise ValueError(f"jobs must be at least 1 (got {jobs})")
    batches = group_by_section(cases)
    workers = min(jobs or os.cpu_count() or 1, len(batches))
    done: dict[str, Record] = {}
    for records in _in_this_process(batches) if workers <= 1 else _in_processes(batches, workers):
        done.update({record.case_id: record for record in records})
        if progress is not None:
            progress(len(done), len(cases))
    return [done[case.id] for case in cases]


def group_by_section(cases: Sequence[Case]) -> list[list[Case]]:
    """Return the cases in batches that have no section in common with each other, each in the order given."""
    batches: list[tuple[set[str], list[Case]]] = []
    for case in cases:
        texts = set(case.sections)
        joined = [batch for batch in batches if batch[0] & texts]
        batches = [batch for batch in batches if not batch[0] & texts]
        merged = [entry for batch in joined for entry in batch[1]] + [case]
        batches.append((texts.union(*(batch[0] for batch in joined)), merged))
    order = {case.id: number for number, case in enumerate(cases)}
    return sorted(
        (sorted(batch[1], key=lambda case: order[case.id]) for batch in batches), key=lambda b: order[b[0].id]
    )


def run_batch(cases: Sequence[Case]) -> list[Record]:
    """Return the records of cases; each section is solved once and forgotten after the last case that needs it."""
    results: dict[str, Result | str] = {}
    records = []
    for number, case in enumerate(cases):
        start = time.perf_counter()
        for text in case.sections:
            if text not in results:
                results[text] = _solved(text)
        record = _judged(case, [results[text] for text in case.sections])
        records.append(_with_seconds(record, time.perf_counter() - start))
        needed = {text for later in cases[number + 1 :] for text in later.sections}
        results = {text: result for text, result in results.items() if text in needed}
    return records


def _solved(text: str) -> Result | str:
    """The result of a section, or what went wrong: one broken section must not end the run."""
    try:
        return solve(parse_section(text, "section.toml"))
    except Exception as error:
        return f"{type(error).__name__}: {error}"


def _judged(case: Case, results: Sequence[Result | str]) -> Record:
    wrong = [result for result in results if isinstance(result, str)]
    if wrong:
        return failed(case, wrong[0])
    try:
        return judge(case, *(result for result in results if isinstance(result, Result)))
    except Exception as error:
        return failed(case, f"{type(error).__name__}: {error}")


def _with_seconds(record: Record, seconds: float) -> Record:
    return replace(record, seconds=seconds)


def _in_this_process(batches: Sequence[Sequence[Case]]) -> Iterator[list[Record]]:
    for batch in batches:
        yield run_batch(batch)


def _in_processes(batches: Sequence[Sequence[Case]], workers: int) -> Iterator[list[Record]]:
    # "spawn": a forked copy of a process with gmsh or threads in it is not safe
    with _one_thread_each(), ProcessPoolExecutor(workers, mp_context=get_context("spawn")) as pool:
        ours: dict[Future[list[Record]], Sequence[Case]] = {
            pool.submit(_run_by_id, tuple(case.id for case in batch)): batch for batch in batches
        }
        for future in as_completed(ours):
            try:
                yield future.result()
            except BrokenExecutor as error:
                yield [failed(case, f"a process ended before its time: {error}") for case in ours[future]]


def _run_by_id(ids: Sequence[str]) -> list[Record]:
    known = _known_cases()
    return run_batch([known[case_id] for case_id in ids])


@cache
def _known_cases() -> dict[str, Case]:
    return {case.id: case for case in all_cases()}


@contextmanager
def _one_thread_each() -> Iterator[None]:
    before = {name: os.environ.get(name) for name in _THREAD_VARIABLES}
    os.environ.update(dict.fromkeys(_THREAD_VARIABLES, "1"))
    try:
        yield
    finally:
        for name, value in before.items():
            if value is None:
                del os.environ[name]
            else:
                os.environ[name] = value
