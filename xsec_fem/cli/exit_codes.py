"""Exit codes, and how errors are told to the user: all faults on stderr, one a line, never a traceback."""

from __future__ import annotations

import sys

from xsec_fem.errors import InputError, XsecError

FINE = 0
OVER_STRENGTH = 1
BAD_INPUT = 2
NOT_SOLVED = 3
INTERRUPTED = 130


def report_error(error: XsecError, file: str = "") -> int:
    """Print an error on stderr and return its exit code; `file` goes before what does not name its file itself."""
    if isinstance(error, InputError):
        for fault in error.faults:
            print(fault, file=sys.stderr)
        return BAD_INPUT
    print(f"{file}: {error}" if file else str(error), file=sys.stderr)
    return NOT_SOLVED
