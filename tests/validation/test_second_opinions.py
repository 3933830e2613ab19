"""Two general-purpose libraries on the same meshes: the same constants to round-off; what is said when one is not installed."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import pytest

from validation import second_opinions
from validation.second_opinions import LIBRARIES, Opinion, Section, angle_with_board, ours, sections

AGREEMENT = 1e-10  # relative; 1e-11 and better is seen, least on the angle with small triangles in its corner
NAMES = [section.name for section in sections(1)]


def opinion_of(library: str) -> Callable[[Section], Opinion]:
    module, _, opinion = LIBRARIES[library]
    pytest.importorskip(module, reason=f"{library} is not installed")
    return opinion


@pytest.mark.parametrize("library", LIBRARIES)
@pytest.mark.parametrize("number", range(6), ids=NAMES)
def test_six_sections(library: str, number: int) -> None:
    opinion, section = opinion_of(library), sections()[number]
    assert ours(section).furthest(opinion(section)) < AGREEMENT


@pytest.mark.parametrize("library", LIBRARIES)
@pytest.mark.parametrize("order", [1, 2, 3])
def test_other_degrees_on_the_section_without_symmetry(library: str, order: int) -> None:
    opinion, section = opinion_of(library), angle_with_board(order)
    assert ours(section).furthest(opinion(section)) < AGREEMENT


def test_a_difference_is_seen() -> None:
    own = ours(angle_with_board(2))
    assert own.furthest(own) == 0
    for other in (
        replace(own, GIT=own.GIT * 1.001), replace(own, EIw=own.EIw * 1.001), replace(own, flexibility=own.flexibility * 1.001),
        replace(own, shear_centre=own.shear_centre * 1.001), replace(own, trefftz_centre=own.trefftz_centre * 1.001),
    ):  # fmt: skip
        assert own.furthest(other) > 1e-4


def test_a_library_that_is_missing_is_named_with_its_remedy(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(second_opinions, "find_spec", lambda module: None)
    assert second_opinions.missing()["NGSolve"] == 'NGSolve is not installed; pip install "xsec-fem[second]" gets it'
    page = second_opinions.page()
    assert "NGSolve is not installed" in page
    assert "scikit-fem is not installed" in page


def test_page_names_every_section() -> None:
    page = second_opinions.PAGE.read_text(encoding="utf-8")
    for name in NAMES:
        assert name in page
