"""Solved sections, one solve a session; pictures share the triangulation as the command does."""

from __future__ import annotations

from functools import lru_cache

import pytest

from tests.report.more_sections import MORE
from tests.report.sections import ALL
from xsec_fem.model.reader import parse_section
from xsec_fem.pipeline import solve
from xsec_fem.report.drawing_mesh import drawing_mesh
from xsec_fem.report.section_canvas import Canvas
from xsec_fem.results import Result


@lru_cache
def _solved(name: str) -> Result:
    return solve(parse_section({**ALL, **MORE}[name], f"{name}.toml"))


@pytest.fixture(scope="session")
def solved():
    return _solved


@pytest.fixture(scope="session")
def canvas():
    @lru_cache
    def make(name: str) -> Canvas:
        result = _solved(name)
        return Canvas.of(drawing_mesh(result.fields.part_nodes, result.away_from_corners))

    return make
