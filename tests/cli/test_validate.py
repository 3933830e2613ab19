"""xsec-fem validate: what it prints and writes, its exit codes, and how it finds its library."""

from __future__ import annotations

import json
import sys
from dataclasses import replace
from pathlib import Path
from types import ModuleType
from typing import Any

import pytest

from validation import runner
from validation.families import all_cases
from xsec_fem.cli import validation_library
from xsec_fem.cli.main import main
from xsec_fem.cli.validation_library import in_checkout, validation_module
from xsec_fem.errors import MissingLibraryError

ONE = ["validate", "torsion.rectangle.1.IT", "--jobs", "1"]


def test_table(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(ONE) == 0
    out, err = capsys.readouterr()
    assert out.startswith("Torsion constant\n")
    assert "ok  rectangle, sides 1 and 1  IT [mm⁴]  0.140577015" in out
    assert "1 check in 1 group: 1 within their tolerance, 0 missed" in out
    assert err == ""


def test_words_are_all_wanted(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["validate", "triangle", "torsion", "STRESS", "--jobs", "1", "--json"]) == 0
    ids = [record["case_id"] for record in json.loads(capsys.readouterr().out)["records"]]
    assert "torsion.triangle.stress" in ids
    assert all("triangle" in case_id for case_id in ids)


def test_miss_is_exit_code_1(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> None:
    original = runner.solve

    def softer(section: Any) -> Any:
        result = original(section)
        return replace(result, properties=replace(result.properties, IT=1.01 * result.properties.IT))

    monkeypatch.setattr(runner, "solve", softer)
    assert main(ONE) == 1
    out = capsys.readouterr().out
    assert "MISS  rectangle, sides 1 and 1" in out
    assert "torsion.rectangle.1.IT: differs by" in out


def test_nothing_fits(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["validate", "no such", "--jobs", "0", "--quick"]) == 2
    err = capsys.readouterr().err
    assert "--jobs must be at least 1 (got 0)." in err
    assert "PATTERN must fit at least one case (got no such --quick). Groups are: rectangle, shear stress," in err


def test_readme_of_some_cases_is_refused(capsys: pytest.CaptureFixture[str]) -> None:
    assert main([*ONE, "--write-readme"]) == 2
    assert "--write-readme needs all cases. Leave PATTERN and --quick out." in capsys.readouterr().err


def test_page_and_pictures(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    convergence = validation_module("convergence")
    monkeypatch.setattr(convergence, "DEGREES", (1, 2))
    square = convergence.studies()[3]
    monkeypatch.setattr(convergence, "studies", lambda: [square])
    pictures, html = tmp_path / "new" / "pictures", tmp_path / "page" / "validation.html"
    assert main([*ONE, "--html", str(html), "--pictures", str(pictures)]) == 0
    out = capsys.readouterr().out
    assert [line.split(": ")[1] for line in out.splitlines() if "written" in line] == [
        str(html), str(pictures / "differences.png"), str(pictures / "convergence.png"),
    ]  # fmt: skip
    assert html.read_text(encoding="utf-8").count("data:image/png;base64,") == 2


@pytest.mark.parametrize("option", ["--html", "--pictures"])
def test_place_that_cannot_be_written(
    option: str, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    monkeypatch.setattr(validation_module("convergence"), "all_curves", lambda jobs: [])
    monkeypatch.setattr(validation_module("pictures"), "write_pictures", lambda *_: [])
    blocked = tmp_path / "file"
    blocked.write_text("")
    assert main([*ONE, option, str(blocked / "below")]) == 2
    err = capsys.readouterr().err
    assert f"{option} cannot be written: " in err
    assert "below" in err


def test_library_of_the_checkout() -> None:
    assert in_checkout()
    assert validation_module("families").all_cases()[0].id == all_cases()[0].id


def test_library_inside_the_package_comes_first(monkeypatch: pytest.MonkeyPatch) -> None:
    inside = ModuleType("xsec_fem.validation")
    monkeypatch.setattr(validation_library, "find_spec", lambda name: object())
    monkeypatch.setitem(sys.modules, "xsec_fem.validation", inside)
    monkeypatch.setitem(sys.modules, "xsec_fem.validation.table", ModuleType("xsec_fem.validation.table"))
    assert validation_module("table").__name__ == "xsec_fem.validation.table"
    assert not in_checkout()


def test_no_library(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setattr(validation_library, "__file__", str(tmp_path / "a" / "b" / "c.py"))
    with pytest.raises(MissingLibraryError, match="neither in this installation nor in"):
        validation_module("table")


def test_another_package_of_the_name(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    stranger = ModuleType("validation")
    stranger.__file__ = str(tmp_path / "validation" / "__init__.py")
    monkeypatch.setitem(sys.modules, "validation", stranger)
    with pytest.raises(MissingLibraryError, match="another package named 'validation' hides the library"):
        validation_module("table")
