"""xsec-fem doctor: what is installed, and the one command that mends what is not.

Nothing but the standard library is imported here on loading: it must run where anything else is broken.
"""

from __future__ import annotations

import argparse
import ctypes
import os
import platform
import shlex
import shutil
import subprocess
import sys
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from importlib import import_module
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path

from xsec_fem.cli.exit_codes import FINE, NOT_SOLVED
from xsec_fem.cli.system_packages import GMSH_LIBRARIES, Installer, installer_for, read_os_release

OLDEST_PYTHON = (3, 11)
# module to import, name of its distribution
MODULES = (
    ("numpy", "numpy"), ("scipy.sparse.linalg", "scipy"), ("gmsh", "gmsh"), ("meshio", "meshio"),
    ("matplotlib.figure", "matplotlib"), ("pydantic", "pydantic"), ("rich.console", "rich"), ("shapely", "shapely"),
)  # fmt: skip
_OS_RELEASE = Path("/etc/os-release")


@dataclass(frozen=True)
class Finding:
    """One thing tested: what it is, whether it works, and its version or what is wrong."""

    name: str
    ok: bool
    detail: str


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of doctor."""
    parser.add_argument(
        "--fix", action="store_true", help="run the command that mends what is missing, after printing it"
    )


def run(args: argparse.Namespace) -> int:
    """Test everything, print the findings and the command that mends; exit code 0 when all is fine, 3 otherwise."""
    findings = examine()
    _print(findings)
    if all(finding.ok for finding in findings):
        print("All is fine.")
        return FINE
    command = mending_command(findings)
    if command is None:
        return NOT_SOLVED
    print(f"\nThis command mends it:\n  {command}", flush=True)
    if not args.fix:
        return NOT_SOLVED
    done = subprocess.run(command, shell=True, check=False)  # our own words only, printed above
    if done.returncode:
        print(f"The command failed (exit code {done.returncode}).", file=sys.stderr)
        return NOT_SOLVED
    print("\nAfterwards:")
    return _examine_again()


def _examine_again() -> int:
    """Test once more in a fresh process: this one remembers failed loads."""
    sys.stdout.flush()
    return subprocess.run([sys.executable, "-m", "xsec_fem", "doctor"], check=False).returncode


def examine(
    load: Callable[[str], object] = ctypes.CDLL, bring: Callable[[str], object] = import_module
) -> list[Finding]:
    """Return what was found of Python, the system's libraries and the packages; `load` and `bring` stand in for tests."""
    current = sys.version_info[:2]
    findings = [
        Finding(
            "Python", current >= OLDEST_PYTHON,
            platform.python_version() + ("" if current >= OLDEST_PYTHON else ": 3.11 or newer is needed"),
        )
    ]  # fmt: skip
    if sys.platform == "linux":
        findings += [_library(name, load) for name in GMSH_LIBRARIES]
    return findings + [_package(module, name, bring) for module, name in MODULES]


def _library(name: str, load: Callable[[str], object]) -> Finding:
    try:
        load(name)
    except OSError as error:
        return Finding(name, False, f"missing, needed by gmsh ({error})")
    return Finding(name, True, "found")


def _package(module: str, name: str, bring: Callable[[str], object]) -> Finding:
    try:
        bring(module)
    except (ImportError, OSError, TypeError) as error:
        return Finding(name, False, f"cannot be imported: {' '.join(str(error).split())}")
    try:
        return Finding(name, True, version(name))
    except PackageNotFoundError:
        return Finding(name, True, "found, version unknown")


def mending_command(findings: Sequence[Finding], release_file: Path = _OS_RELEASE) -> str | None:
    """Return the one shell line that mends all that can be mended; None when there is none, the reason told on stderr.

    Packages are installed when they are not there; one that is there but cannot load lacks a system library, and is
    installed anew only when all of these are found.
    """
    missing = [finding.name for finding in findings if not finding.ok]
    if "Python" in missing:
        print("Make a virtual environment with Python 3.11 or newer.", file=sys.stderr)
    steps = _library_step([name for name in missing if name in GMSH_LIBRARIES], release_file)
    broken = [name for _, name in MODULES if name in missing]
    absent = [name for name in broken if not _is_installed(name)]
    pip = f"{shlex.quote(sys.executable)} -m pip install"
    if absent:
        steps.append(f"{pip} {' '.join(absent)}")
    elif broken and not steps:
        steps.append(f"{pip} --force-reinstall {' '.join(broken)}")
    return " && ".join(steps) or None


def _library_step(libraries: Sequence[str], release_file: Path) -> list[str]:
    """The command for the missing system libraries; none, and a sentence on stderr, on an unknown system."""
    if not libraries:
        return []
    installer = _installer(release_file)
    if installer is None:
        print(f"Install the packages of your system that hold {', '.join(libraries)}.", file=sys.stderr)
        return []
    return [installer.line(libraries, _sudo())]


def _installer(release_file: Path) -> Installer | None:
    try:
        return installer_for(read_os_release(release_file.read_text(encoding="utf-8")))
    except OSError:
        return None


def _sudo() -> str:
    return "sudo " if os.geteuid() != 0 and shutil.which("sudo") else ""


def _is_installed(name: str) -> bool:
    try:
        version(name)
    except PackageNotFoundError:
        return False
    return True


def _print(findings: Sequence[Finding]) -> None:
    width = max(len(finding.name) for finding in findings)
    for finding in findings:
        print(f"{'ok     ' if finding.ok else 'MISSING'} {finding.name.ljust(width)}  {finding.detail}")
