"""The page of disagreements is the one that the code writes today, and says what it must."""

from __future__ import annotations

import re

import pytest

from validation import disagreements

_NUMBER = re.compile(r"[-+]?\d+(?:\.\d+)?(?:e[-+]?\d+)?")


def same(old: str, new: str) -> bool:
    """Equal text; numbers may differ by what another machine's round-off makes of the last of five digits, shares by 0.1 %."""
    if _NUMBER.sub("#", old) != _NUMBER.sub("#", new):
        return False
    pairs = zip(_NUMBER.findall(old), _NUMBER.findall(new), strict=True)
    return all(abs(float(a) - float(b)) <= max(2e-4 * abs(float(a)), 0.101 if "%" in old else 0.0) for a, b in pairs)


@pytest.mark.slow
def test_page_is_fresh() -> None:
    old, new = disagreements.PAGE.read_text(encoding="utf-8").splitlines(), disagreements.page().splitlines()
    assert len(old) == len(new)
    stale = [line for former, line in zip(old, new, strict=True) if not same(former, line)]
    assert not stale, "run `python -m validation.disagreements`; new lines:\n" + "\n".join(stale)


def test_what_counts_as_the_same() -> None:
    assert same("| 1.0001 | a |", "| 1.0002 | a |")
    assert not same("| 1.000 | a |", "| 1.001 | a |")
    assert not same("| 1.000 | a |", "| 1.000 | b |")


@pytest.mark.parametrize(
    "words",
    [
        "0.54847 | 0.51137 | 0.51137 | 0.5093",
        "| 51.7 |",
        "| 120° | 0.148 | 0.14421 | 0.14421 | +2.6% |",
        "4.723 (+75.9%)",
        "-12.2%",
    ],
)
def test_known_numbers(words: str) -> None:
    assert words in disagreements.PAGE.read_text(encoding="utf-8")
