"""The command line as a whole: help, version, quiet ends, narrow encodings."""

from __future__ import annotations

import gc
import os
import subprocess
import sys

import pytest

from tests.report.sections import ALL
from xsec_fem.cli.exit_codes import report_error
from xsec_fem.cli.main import COMMANDS, main
from xsec_fem.errors import Fault, InputError, MeshingError, SolveError

NOT_COVERED = ("buckling", "fatigue", "introduction of loads", "shear lag", "restrained warping", "local code")


def run(*words: str, **settings) -> subprocess.CompletedProcess:
    return subprocess.run(
        [sys.executable, "-m", "xsec_fem", *words], capture_output=True, text=True, check=False, **settings
    )


@pytest.mark.parametrize("words", [[], ["--help"], ["solve", "--help"]])
def test_help_says_what_is_not_covered_and_who_decides(words, capsys):
    assert main(words) == 0
    out = capsys.readouterr().out
    for topic in NOT_COVERED:
        assert topic in out
    assert "A licensed engineer decides" in out
    assert "exit codes: 0 all fine; 1" in out


def test_help_names_every_command(capsys):
    main(["--help"])
    out = capsys.readouterr().out
    assert all(f"    {name} " in out for name in COMMANDS)


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_has_help(command, capsys):
    assert main([command, "--help"]) == 0
    assert capsys.readouterr().out.startswith(f"usage: xsec-fem {command} ")


def test_version(capsys):
    assert main(["--version"]) == 0
    assert capsys.readouterr().out.startswith("xsec-fem 0.")


@pytest.mark.parametrize(
    ("error", "code", "text"),
    [
        (InputError([Fault("a.toml", "x", "must be > 0", "-1"), Fault("a.toml", "y", "is missing")]), 2,
         "a.toml: x must be > 0 (got -1).\na.toml: y is missing.\n"),
        (MeshingError("no triangles"), 3, "f.toml: no triangles\n"),
        (SolveError("singular"), 3, "f.toml: singular\n"),
    ],
)  # fmt: skip
def test_errors_are_told_on_stderr(error, code, text, capsys):
    assert report_error(error, "f.toml") == code
    assert capsys.readouterr() == ("", text)


def test_as_a_module_with_an_ascii_terminal(tmp_path):
    (tmp_path / "boards.toml").write_text(ALL["boards"])
    environment = {**os.environ, "PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    done = run("solve", "boards.toml", "--no-pictures", cwd=tmp_path, env=environment)
    assert (done.returncode, done.stderr) == (0, "")
    assert "mm\\u2074" in done.stdout


def test_a_reader_that_goes_away_is_no_error(tmp_path):
    (tmp_path / "boards.toml").write_text(ALL["boards"])
    command = f"{sys.executable} -m xsec_fem starter i_shape | true; echo ${{PIPESTATUS[0]}}"
    done = subprocess.run(["bash", "-c", command], capture_output=True, text=True, check=False, cwd=tmp_path)
    assert done.stderr == ""
    assert done.stdout in ("130\n", "0\n")  # 0 when all was written before the reader closed


def test_faults_need_no_traceback():
    done = run("solve", "no such file.toml")
    assert done.returncode == 2
    assert done.stderr.startswith("no such file.toml does not exist")
    assert done.stderr.count("\n") == 1


def test_the_process_is_left_as_it_was(capsys):
    before = gc.get_threshold()
    main(["starter"])
    assert gc.get_threshold() == before
