"""A small case whose parts can be replaced."""

from dataclasses import replace
from typing import Any

from validation.case import Case, Source, Tolerance
from validation.reading import bounds, constant
from validation.section_text import section_text

SQUARE = section_text("square", [{"shape": "rectangle", "width": 1, "height": 1}])
BASE = Case(
    "sample.IT", "samples", "square", "IT", (SQUARE,), constant("IT"), 0.140577014955,
    Source("A. Author", "A Book", "1999", "table 1"), "computed", Tolerance(1e-5, "rounded in the table"), "mm⁴",
    bounds("IT"), quick=True,
)  # fmt: skip


def sample(**changes: Any) -> Case:
    return replace(BASE, **changes)
