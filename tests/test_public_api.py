"""Every public name is in one sorted list, loads, and is documented."""

import subprocess
import sys

import pytest

import xsec_fem


def test_list_is_sorted_and_complete():
    assert xsec_fem.__all__ == sorted(xsec_fem.__all__)
    assert set(xsec_fem.__all__) == set(xsec_fem._HOMES)
    assert dir(xsec_fem) == xsec_fem.__all__


@pytest.mark.parametrize("name", xsec_fem.__all__)
def test_name_loads_from_its_home_and_is_documented(name):
    value = getattr(xsec_fem, name)
    assert value.__module__.startswith(xsec_fem._HOMES[name])
    assert value.__doc__


def test_unknown_name():
    with pytest.raises(AttributeError, match="module 'xsec_fem' has no attribute 'solv'"):
        xsec_fem.solv  # noqa: B018


@pytest.mark.parametrize("library", ["numpy", "scipy", "gmsh", "meshio", "matplotlib", "pydantic", "rich", "shapely"])
def test_import_of_the_package_is_light(library):
    code = f"import sys, xsec_fem; sys.exit('{library}' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code]).returncode == 0


@pytest.mark.parametrize(
    ("command", "library"),
    [
        (["starter", "rectangle"], "scipy"),
        (["starter", "rectangle"], "gmsh"),
        (["starter", "rectangle"], "matplotlib"),
        (["sketch", "meshes/five_boards.toml", "--out", "TMP"], "gmsh"),
    ],
)
def test_commands_load_what_they_use_only(command, library, tmp_path):
    command = [word.replace("TMP", str(tmp_path)) for word in command]
    code = f"import sys; from xsec_fem.cli.main import main; main({command!r}); sys.exit(10 * ('{library}' in sys.modules))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert "unrecognized arguments" not in done.stderr
    assert done.returncode == 0, done.stderr
