"""Jobs in two processes: all are done, errors come back."""

from __future__ import annotations

import os
from functools import partial

import pytest

from xsec_fem.report import two_processes
from xsec_fem.report.two_processes import run_jobs


@pytest.fixture
def forking(monkeypatch):
    """Let it fork although the test runner has threads."""
    monkeypatch.setattr(two_processes, "_can_fork", lambda: True)


def write(path, text):
    path.write_text(f"{text} {os.getpid()}")


@pytest.mark.parametrize("count", [0, 1, 2, 5])
def test_every_job_is_done_once(tmp_path, forking, count):
    run_jobs([partial(write, tmp_path / str(k), k) for k in range(count)], True)
    written = {path.name: path.read_text().split() for path in tmp_path.iterdir()}
    assert {name: text for name, (text, _) in written.items()} == {str(k): str(k) for k in range(count)}
    assert len({process for _, process in written.values()}) == min(count, 2)


def test_one_process_when_asked(tmp_path):
    run_jobs([partial(write, tmp_path / str(k), k) for k in range(4)], False)
    assert {path.read_text().split()[1] for path in tmp_path.iterdir()} == {str(os.getpid())}


@pytest.mark.parametrize("failing", [0, 1])
def test_an_error_of_either_process_is_raised(tmp_path, forking, failing):
    jobs = [partial(write, tmp_path / "0", 0), partial(write, tmp_path / "1", 1)]
    jobs[failing] = partial(write, tmp_path / "no folder" / "x", 0)
    with pytest.raises(FileNotFoundError, match="no folder"):
        run_jobs(jobs, True)
    assert (tmp_path / str(1 - failing)).exists()
