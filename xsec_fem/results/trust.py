"""Checks of a solution and cautions to its reader."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Check:
    """A number that must stay below a limit for the result to be trusted."""

    name: str
    value: float
    limit: float

    @property
    def ok(self) -> bool:
        """True when the value is within the limit."""
        return self.value <= self.limit


@dataclass(frozen=True)
class Caution:
    """Something the reader of the result must know: a short code and a sentence in plain words."""

    code: str
    message: str
