"""All records of the library's cases that this run looks at, solved once by all cores."""

from __future__ import annotations

import os
from collections.abc import Callable

import pytest

from validation.case import Case, Record
from validation.families import all_cases
from validation.runner import group_by_section, run


@pytest.fixture(scope="session")
def record_of(request: pytest.FixtureRequest) -> Callable[[Case], Record]:
    """A function from a case to its record: the cases selected in this session are run together before the first is asked for.

    Under pytest-xdist every worker runs only what it is asked for, a section at a time.
    """
    everything = {case.id: case for case in all_cases()}
    batches = {case.id: batch for batch in group_by_section(list(everything.values())) for case in batch}
    chosen = [item.callspec.params["case"] for item in request.session.items if "record_of" in item.fixturenames
              and hasattr(item, "callspec") and "case" in item.callspec.params]  # fmt: skip
    alone = "PYTEST_XDIST_WORKER" in os.environ
    records: dict[str, Record] = {} if alone else {record.case_id: record for record in run(chosen)}

    def find(case: Case) -> Record:
        if case.id not in records:
            records.update({record.case_id: record for record in run(batches[case.id], jobs=1)})
        return records[case.id]

    return find
