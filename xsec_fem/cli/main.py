"""The command xsec-fem: one file per command, loaded only when it is called.

A command's module is loaded by name, so that `doctor` runs on a machine where a library of the other ones is missing.
Results go to stdout, messages to stderr. Exit codes stand in `xsec_fem.cli.exit_codes`.
"""

from __future__ import annotations

import argparse
import gc
import os
import sys
from collections.abc import Sequence
from importlib import import_module
from importlib.metadata import PackageNotFoundError, version
from typing import Any

from xsec_fem.cli.exit_codes import INTERRUPTED, NOT_SOLVED, report_error
from xsec_fem.errors import XsecError

# new objects between two searches for unused cycles: loading modules and drawing makes many objects and few cycles; with
# Python's usual 700 the searches take 5 % of a command, with 50,000 a few pictures' worth of memory waits for them
_GC_EVERY = 50_000

COMMANDS = {
    "solve": "mesh and solve section files: properties, stresses, joints, pictures",
    "compare": "where the hand formula V S/(I t) is wrong, and why: verdict, parts, walls, cuts, pictures",
    "sketch": "check a section file and draw it, without solving",
    "starter": "write a commented section file to start from",
    "validate": "compare the program with exact solutions and published values, and print the table",
    "doctor": "test what is installed and print the command that mends what is not",
}

LIMITS = """\
what is not covered: buckling, fatigue, the introduction of loads and supports (look one depth away from them), shear lag,
restrained warping, and the rules of any local code. The numbers are elastic and of Saint-Venant's theory.
A licensed engineer decides what they mean for a structure."""

EXIT_CODES = """\
exit codes: 0 all fine; 1 a part or joint is over its strength, or a check of validate is missed; 2 bad input;
3 meshing, solving or a library failed."""


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command and return its exit code; `argv` None: the command line's own arguments."""
    words = list(sys.argv[1:] if argv is None else argv)
    _survive_narrow_encodings()
    usual = gc.get_threshold()
    gc.set_threshold(_GC_EVERY)
    try:
        return _run(words)
    except BrokenPipeError:
        sys.stdout = open(os.devnull, "w")  # noqa: SIM115 (the reader has gone; nothing is left to say)
        return INTERRUPTED
    except KeyboardInterrupt:
        return INTERRUPTED
    finally:
        gc.set_threshold(*usual)


def _run(words: list[str]) -> int:
    chosen = next((word for word in words if not word.startswith("-")), "")
    try:
        module = import_module(f"xsec_fem.cli.{chosen}") if chosen in COMMANDS else None
    except (ImportError, OSError, TypeError) as error:
        print(
            f"a library cannot be loaded ({error}): run `xsec-fem doctor`, it prints the command that mends it",
            file=sys.stderr,
        )
        return NOT_SOLVED
    try:
        args = build_parser(chosen, module).parse_args(words)
    except SystemExit as stop:  # argparse has printed the help, the version or the fault
        return int(stop.code or 0)
    if module is None:
        build_parser("", None).print_help()
        return 0
    try:
        code = int(module.run(args))
        sys.stdout.flush()
    except XsecError as error:
        return report_error(error)
    return code


def build_parser(chosen: str, module: Any) -> argparse.ArgumentParser:
    """Return the parser of all commands; only the chosen one, whose module is given, knows its arguments."""
    parser = argparse.ArgumentParser(
        prog="xsec-fem",
        description="Exact transverse shear in beam sections built of parts.",
        epilog=f"{LIMITS}\n\n{EXIT_CODES}",
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("--version", action="version", version=f"xsec-fem {_version()}")
    commands = parser.add_subparsers(dest="command", metavar="COMMAND", title="commands")
    for name, text in COMMANDS.items():
        command = commands.add_parser(
            name, help=text, description=text[0].upper() + text[1:] + ".", epilog=f"{LIMITS}\n\n{EXIT_CODES}",
            formatter_class=argparse.RawDescriptionHelpFormatter,
        )  # fmt: skip
        if name == chosen and module is not None:
            module.add_args(command)
    return parser


def _version() -> str:
    try:
        return version("xsec-fem")
    except PackageNotFoundError:
        return "(not installed)"


def _survive_narrow_encodings() -> None:
    """Let letters that a stream cannot show (such as "⁴" in ASCII) appear as escapes instead of ending the program."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="backslashreplace")
