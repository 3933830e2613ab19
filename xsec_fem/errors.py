"""Everything the package raises, drawn as a tree.

    XsecError                    base class: catch this one to catch them all
    |-- InputError               the section file (or an argument) is wrong; carries every fault found
    |-- MissingLibraryError      a library that the step needs cannot be loaded on this machine
    |-- MeshingError             the mesher failed, or a mesh is unusable (folded element, loose node)
    `-- SolveError               the linear system is singular, incompatible or not solved to round-off

The command line maps InputError to exit code 2 and the other ones to 3.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


class XsecError(Exception):
    """Base class of all errors of the package."""


@dataclass(frozen=True)
class Fault:
    """One thing that is wrong in the input.

    Attributes
    ----------
    file : name of the file as the user typed it, or "" for an argument.
    place : where in the file, for example 'parts[1] "board 2": height'.
    rule : what must hold, for example "must be > 0".
    value : the offending value as text; None when there is none to show (a missing key).
    remedy : what to do about it, one sentence.
    """

    file: str
    place: str
    rule: str
    value: str | None = None
    remedy: str = ""

    def __str__(self) -> str:
        """One line: 'file: place rule (got value). Remedy.'"""
        head = ": ".join(text for text in (self.file, self.place) if text)
        got = f" (got {self.value})" if self.value is not None else ""
        tail = f". {self.remedy}" if self.remedy else "."
        return f"{head} {self.rule}{got}{tail}"


class InputError(XsecError):
    """Raised when the input breaks a rule; `faults` lists all that were found, not only the first."""

    def __init__(self, faults: Sequence[Fault]) -> None:
        if not faults:
            raise ValueError(f"InputError needs at least one fault (got {faults!r})")
        self.faults = tuple(faults)
        super().__init__("\n".join(str(fault) for fault in self.faults))


class MissingLibraryError(XsecError):
    """Raised when a library cannot be loaded; the message names the command that mends it."""


class MeshingError(XsecError):
    """Raised when the mesher fails, or when a mesh has a folded, flat or dangling element."""


class SolveError(XsecError):
    """Raised when a linear system is incompatible, singular, or its residual is not at round-off."""
