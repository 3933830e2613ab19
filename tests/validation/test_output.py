"""The table, the JSON document, the page and the README: complete, escaped, and stable."""

from __future__ import annotations

import json
import re
from dataclasses import replace
from html.parser import HTMLParser
from pathlib import Path

import pytest

from tests.validation.samples import sample
from validation.case import Record, failed
from validation.page import page
from validation.readme import readme, stale_lines
from validation.table import blocks, document, row_cells, summary_line
from xsec_fem.report.blocks import plain_text


def record(**changes: object) -> Record:
    good = replace(
        failed(sample(), ""),
        ours=0.140577065,
        difference=5.04e-8,
        ok=True,
        interval=(0.140576963, 0.140577066),
        strict=True,
    )
    return replace(good, **changes)  # type: ignore[arg-type]


MISS = record(
    case_id="sample.miss", ours=0.2, difference=0.0594, ok=False, message="differs by 0.0594, allowed are 1.41e-06"
)
NONE = failed(sample(id="sample.none", group="other"), "MeshingError: no mesh")


def test_row() -> None:
    assert row_cells(record()) == (
        "ok", "square", "IT [mm⁴]", "0.140577015", "0.140577065", "[0.140576963, 0.140577066]", "3.6e-07", "1.0e-05",
    )  # fmt: skip


def test_row_of_a_miss_and_of_nothing() -> None:
    assert row_cells(MISS)[0] == "MISS"
    assert row_cells(NONE)[4:7] == ("none", "", "")


def test_interval_that_is_not_strict_has_a_mark() -> None:
    assert row_cells(record(strict=False))[5].endswith("] *")
    assert "marked * are not strict" in summary_line([record(strict=False)])
    assert "*" not in summary_line([record()])


def test_absolute_difference_has_a_mark() -> None:
    assert row_cells(record(relative=False, allowed=1e-3))[6:] == ("5.0e-08 u", "1.0e-03 u")


def test_table_names_misses_and_sums_up() -> None:
    text = plain_text(blocks([record(), MISS, NONE]))
    assert "Samples\n" in text
    assert "Other\n" in text
    assert "1.0e-05  [1] computed\n" in text
    assert "\nSources\n  [1] A. Author, A Book, 1999, table 1\n" in text
    assert "sample.miss: differs by 0.0594, allowed are 1.41e-06" in text
    assert "sample.none: MeshingError: no mesh" in text
    assert "3 checks in 2 groups: 1 within their tolerance, 2 missed; 1 reference lies in" in text


def test_narrow_table_has_no_intervals() -> None:
    assert "[0.140576963, 0.140577066]" in plain_text(blocks([record()]))
    narrow = plain_text(blocks([record()], narrow=True))
    assert "0.140576963" not in narrow
    assert re.search(r"3\.6e-07 +1\.0e-05 +\[1\] computed", narrow)


def test_document() -> None:
    loaded = json.loads(document([record(), NONE]))
    assert loaded["schema"] == "xsec_fem validation 1"
    assert (loaded["checks"], loaded["missed"]) == (2, 1)
    assert loaded["records"][0]["reason"] == "rounded in the table"
    assert "ours" not in loaded["records"][1]


class _Links(HTMLParser):
    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.loaded: list[str] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.loaded += [value or "" for name, value in attrs if name in ("src", "href")]
        if tag not in ("meta", "img"):
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag


def test_page_stands_alone_and_is_escaped(tmp_path: Path) -> None:
    png = tmp_path / "differences.png"
    png.write_bytes(b"\x89PNG")
    text = page([record(title="<b>a & b</b>"), MISS, NONE], [png])
    reader = _Links()
    reader.feed(text)
    assert reader.open == []
    assert all(link.startswith(("#", "data:image/png;base64,")) for link in reader.loaded)
    assert "&lt;b&gt;a &amp; b&lt;/b&gt;" in text
    assert "<b>" not in text
    assert "sample.none: MeshingError: no mesh" in text
    assert text.count("class=miss") == 2


def test_readme_table() -> None:
    text = readme([record(), record(relative=False, allowed=1e-3, title="a | b")])
    assert "| square | IT [mm⁴] | 0.140577 | 0.140577 | 1e-6 | 1e-05 | [1](#sources) | computed |" in text
    assert "| a \\| b | IT [mm⁴] | 0.140577 | 0.140577 | 1e-7 u | 0.001 u | [1](#sources) | computed |" in text
    assert "1. A. Author, A Book, 1999, table 1" in text


def test_readme_shows_no_noise() -> None:
    assert "| < 1e-10 |" in readme([record(difference=3e-14)])
    assert "| 0 | 0 |" in readme([record(reference=0.0, ours=3e-9, difference=3e-9, relative=False, allowed=1e-3)])


def test_readme_is_the_same_on_another_machine() -> None:
    old = readme([record()])
    for ours, difference in ((0.1405773, 5.1e-8), (0.140577065, 5.04e-9)):
        assert stale_lines(old, readme([record(ours=ours, difference=difference)])) == []


@pytest.mark.parametrize(
    "changes",
    [
        {"ours": 0.14058},
        {"difference": 6e-6},
        {"reference": 0.140576},
        {"allowed": 1e-4},
        {"title": "x"},
        {"ours": None},
    ],
)
def test_stale_readme(changes: dict[str, object]) -> None:
    stale = stale_lines(readme([record()]), readme([record(**changes)]))
    assert len(stale) == 1
    assert re.match(r"\| (square|x) \|", stale[0])


def test_readme_with_a_case_missing() -> None:
    [message] = stale_lines(readme([record()]), readme([record(), record()]))
    assert re.fullmatch(r"\d+ lines where there are now \d+", message)
