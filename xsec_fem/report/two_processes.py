"""Independent jobs on two cores: half of them in a forked copy of the process, where the system can do that safely."""

from __future__ import annotations

import os
import sys
import threading
import warnings
from collections.abc import Callable, Sequence

Job = Callable[[], None]


def run_jobs(jobs: Sequence[Job], two_processes: bool) -> None:
    """Run all jobs; with `two_processes` every second one in a copy of this process. A job must only write files.

    What the copy fails to do is done again here, so that its error is raised here. Forking is left out where it is not
    safe or useful: outside Linux, with threads running, with one core, for a single job.
    """
    ours, theirs = (jobs[0::2], jobs[1::2]) if two_processes and _can_fork() else (jobs, [])
    child = _start(theirs) if theirs else 0
    failed = False
    try:
        for job in ours:
            job()
    finally:
        failed = bool(child) and os.waitpid(child, 0)[1] != 0
    if failed:
        for job in theirs:
            job()


def _can_fork() -> bool:
    return sys.platform == "linux" and threading.active_count() == 1 and len(os.sched_getaffinity(0)) > 1


def _start(jobs: Sequence[Job]) -> int:
    """Fork, and return the copy's process number; the copy never returns."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)  # newer Pythons warn of BLAS's own, idle, threads
        child = os.fork()
    if child:
        return child
    code = 1
    try:
        for job in jobs:
            job()
        code = 0
    finally:
        os._exit(code)  # no clean-up here: files, buffers and terminal belong to the parent
