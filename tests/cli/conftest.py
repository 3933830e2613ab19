"""Section files in an empty folder that is the current one."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.report.sections import ALL


@pytest.fixture
def here(tmp_path, monkeypatch) -> Path:
    """An empty current folder."""
    monkeypatch.chdir(tmp_path)
    return tmp_path


@pytest.fixture
def boards(here) -> Path:
    file = here / "boards.toml"
    file.write_text(ALL["boards"])
    return file.relative_to(here)


@pytest.fixture
def tee(here) -> Path:
    file = here / "tee.toml"
    file.write_text(ALL["tee"])
    return file.relative_to(here)
