"""xsec-fem doctor: what it finds and what it says mends it, with libraries taken away."""

from __future__ import annotations

import argparse
import subprocess
import sys

import pytest

from xsec_fem.cli import doctor
from xsec_fem.cli.doctor import Finding, examine, mending_command
from xsec_fem.cli.main import main
from xsec_fem.cli.system_packages import GMSH_LIBRARIES, INSTALLERS, installer_for, read_os_release

DEBIAN = 'PRETTY_NAME="Debian GNU/Linux 12"\nID=debian\n# a comment\n'
DERIVED = 'ID=mint\nID_LIKE="ubuntu debian"\n'


@pytest.fixture
def release(tmp_path):
    def write(text: str):
        file = tmp_path / "os-release"
        file.write_text(text)
        return file

    return write


@pytest.fixture(autouse=True)
def root(monkeypatch):
    monkeypatch.setattr(doctor.os, "geteuid", lambda: 0)


def failing(*names: str, error: type[Exception] = OSError):
    def load(name: str) -> object:
        if name in names:
            raise error(f"{name}: cannot open shared object file")
        return object()

    return load


def test_all_fine(capsys):
    assert main(["doctor"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    assert out.endswith("All is fine.\n")
    lines = out.splitlines()[:-1]
    assert all(line.startswith("ok ") for line in lines)
    assert [line.split()[1] for line in lines] == ["Python", *GMSH_LIBRARIES, *(name for _, name in doctor.MODULES)]


@pytest.mark.parametrize("library", GMSH_LIBRARIES)
def test_a_missing_library_is_found_and_its_package_named(library, release):
    findings = examine(load=failing(library))
    assert [finding.name for finding in findings if not finding.ok] == [library]
    command = mending_command(findings, release(DEBIAN))
    assert command is not None
    head, package = command.rsplit(" ", 1)
    assert head == "apt-get update && apt-get install -y --no-install-recommends"
    assert package.startswith("lib")


def test_all_libraries_of_a_bare_container(release):
    findings = examine(load=failing(*GMSH_LIBRARIES), bring=failing("gmsh"))
    # the packages that bring these libraries, as in Debian 12's archive
    assert mending_command(findings, release(DEBIAN)) == (
        "apt-get update && apt-get install -y --no-install-recommends libglu1-mesa libgl1 libxrender1 libxcursor1 "
        "libxfixes3 libxext6 libxft2 libfontconfig1 libxinerama1 libx11-6 libgomp1"
    )


@pytest.mark.parametrize("error", [ImportError, OSError, TypeError])
def test_whatever_an_import_raises_is_one_line(error):
    findings = examine(bring=failing("gmsh", error=error))
    (finding,) = [finding for finding in findings if not finding.ok]
    assert finding.name == "gmsh"
    assert finding.detail == "cannot be imported: gmsh: cannot open shared object file"


def test_a_package_that_is_not_there_is_installed(monkeypatch):
    monkeypatch.setattr(doctor, "_is_installed", lambda name: name != "meshio")
    command = mending_command([Finding("meshio", False, ""), Finding("numpy", True, "2")])
    assert command == f"{sys.executable} -m pip install meshio"


def test_a_package_that_is_there_but_broken_is_installed_anew():
    assert mending_command([Finding("shapely", False, "")]) == (
        f"{sys.executable} -m pip install --force-reinstall shapely"
    )


def test_sudo_for_users_who_have_it(release, monkeypatch):
    monkeypatch.setattr(doctor.os, "geteuid", lambda: 1000)
    monkeypatch.setattr(doctor.shutil, "which", lambda name: "/usr/bin/sudo" if name == "sudo" else None)
    command = mending_command(examine(load=failing("libX11.so.6")), release(DERIVED))
    assert command == "sudo apt-get update && sudo apt-get install -y --no-install-recommends libx11-6"
    monkeypatch.setattr(doctor.shutil, "which", lambda name: None)
    command = mending_command(examine(load=failing("libX11.so.6")), release(DERIVED))
    assert command == "apt-get update && apt-get install -y --no-install-recommends libx11-6"


def test_an_unknown_system_is_told_which_libraries(release, capsys):
    assert mending_command(examine(load=failing("libX11.so.6")), release("ID=plan9\n")) is None
    assert capsys.readouterr().err == "Install the packages of your system that hold libX11.so.6.\n"


def test_an_old_python(capsys):
    assert mending_command([Finding("Python", False, "3.9.2: 3.11 or newer is needed")]) is None
    assert capsys.readouterr().err == "Make a virtual environment with Python 3.11 or newer.\n"


@pytest.mark.parametrize(
    ("text", "manager"),
    [
        (DEBIAN, "apt-get"), (DERIVED, "apt-get"), ("ID=fedora\n", "dnf"), ('ID="rocky"\nID_LIKE="rhel fedora"\n', "dnf"),
        ("ID=arch\n", "pacman"), ('ID="opensuse-leap"\nID_LIKE="suse opensuse"\n', "zypper"), ("ID=alpine\n", "apk"),
    ],
)  # fmt: skip
def test_package_managers(text, manager):
    installer = installer_for(read_os_release(text))
    assert installer is not None
    assert manager in installer.line(["libGL.so.1"], "")


@pytest.mark.parametrize("system", INSTALLERS)
def test_every_library_has_a_package(system):
    assert len(INSTALLERS[system].packages) == len(GMSH_LIBRARIES)
    assert all(INSTALLERS[system].packages)


def missing_one(monkeypatch, command: str):
    monkeypatch.setattr(doctor, "examine", lambda: [Finding("libX11.so.6", False, "missing, needed by gmsh")])
    monkeypatch.setattr(doctor, "mending_command", lambda findings: command)


def test_the_command_is_printed_and_not_run(monkeypatch, capsys):
    missing_one(monkeypatch, "exit 9")
    assert main(["doctor"]) == 3
    assert capsys.readouterr() == (
        "MISSING libX11.so.6  missing, needed by gmsh\n\nThis command mends it:\n  exit 9\n", "",
    )  # fmt: skip


def test_fix_runs_it_and_says_when_it_fails(monkeypatch, capsys):
    missing_one(monkeypatch, "exit 9")
    assert doctor.run(argparse.Namespace(fix=True)) == 3
    assert capsys.readouterr().err == "The command failed (exit code 9).\n"


def test_fix_looks_again_afterwards(monkeypatch, capfd, tmp_path):
    missing_one(monkeypatch, f"touch {tmp_path / 'mended'}")
    assert doctor.run(argparse.Namespace(fix=True)) == 0
    assert (tmp_path / "mended").exists()
    out = capfd.readouterr().out
    assert "\nAfterwards:\nok " in out
    assert out.endswith("All is fine.\n")


def test_it_runs_where_nothing_else_can_be_imported():
    code = (
        "import sys\n"
        "for name in ('numpy', 'scipy', 'gmsh', 'meshio', 'matplotlib', 'pydantic', 'rich', 'shapely'):\n"
        "    sys.modules[name] = None\n"
        "from xsec_fem.cli.main import main\n"
        "assert main(['doctor']) == 3\n"
        "assert main(['solve', 'x.toml']) == 3\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    assert done.stdout.count("MISSING") == 8
    assert "pip install --force-reinstall numpy scipy gmsh" in done.stdout
    assert done.stderr.startswith("a library cannot be loaded (")
    assert done.stderr.count("\n") == 1
