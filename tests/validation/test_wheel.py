"""The wheel carries the validation library: built, installed into a fresh environment, and run from elsewhere."""

from __future__ import annotations

import json
import subprocess
import sys
import venv
from importlib.util import find_spec
from pathlib import Path

import numpy as np
import pytest

CHECKOUT = Path(__file__).parents[2]

pytestmark = [
    pytest.mark.slow,
    pytest.mark.skipif(find_spec("pip") is None or find_spec("hatchling") is None, reason="needs pip and hatchling"),
]


@pytest.fixture(scope="module")
def python(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The interpreter of an environment with the wheel, and the libraries of this one but not its xsec_fem."""
    folder = tmp_path_factory.mktemp("wheel")
    pip = [sys.executable, "-m", "pip", "--disable-pip-version-check"]
    build = [
        *pip,
        "wheel",
        "--quiet",
        "--no-deps",
        "--no-build-isolation",
        "--no-index",
        "-w",
        str(folder),
        str(CHECKOUT),
    ]
    subprocess.run(build, check=True, cwd=folder)
    home = folder / "environment"
    venv.create(home, with_pip=False, symlinks=sys.platform != "win32")
    python = home / ("Scripts/python.exe" if sys.platform == "win32" else "bin/python")
    found = subprocess.run(
        [python, "-c", "import sysconfig; print(sysconfig.get_path('purelib'))"],
        check=True,
        capture_output=True,
        text=True,
    )
    # behind the environment's own packages; .pth files of an editable xsec_fem there are not followed
    (Path(found.stdout.strip()) / "shared.pth").write_text(str(Path(np.__file__).parents[1]) + "\n")
    [wheel] = folder.glob("*.whl")
    subprocess.run(
        [*pip, "--python", str(python), "install", "--quiet", "--no-deps", "--no-index", str(wheel)], check=True
    )
    return python


def test_installed_command_validates(python: Path, tmp_path: Path) -> None:
    command = [python, "-m", "xsec_fem", "validate", "torsion", "triangle", "--json", "--jobs", "2"]
    done = subprocess.run(command, capture_output=True, text=True, cwd=tmp_path, check=False)
    assert done.returncode == 0, done.stderr
    assert json.loads(done.stdout)["missed"] == 0


def test_installed_library_is_inside_the_package(python: Path, tmp_path: Path) -> None:
    script = (
        "from xsec_fem.cli.validation_library import in_checkout, validation_module\n"
        "print(validation_module('families').__name__, len(validation_module('families').all_cases()), in_checkout())"
    )
    done = subprocess.run([python, "-c", script], capture_output=True, text=True, cwd=tmp_path, check=True)
    name, count, in_checkout = done.stdout.split()
    assert name == "xsec_fem.validation.families"
    assert int(count) >= 120
    assert in_checkout == "False"


def test_installed_command_has_no_readme_to_write(python: Path, tmp_path: Path) -> None:
    done = subprocess.run(
        [python, "-m", "xsec_fem", "validate", "--help"], capture_output=True, text=True, cwd=tmp_path, check=True
    )
    assert "--write-readme" not in done.stdout
    assert "--quick" in done.stdout
