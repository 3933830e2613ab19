"""xsec-fem starter SHAPE: a commented section file to start from."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from xsec_fem.cli.exit_codes import BAD_INPUT, FINE, report_error
from xsec_fem.errors import Fault, InputError
from xsec_fem.model.starter import BUILT_UP, starter_text
from xsec_fem.model.starter_examples import EXAMPLES
from xsec_fem.units import UNIT_SYSTEMS


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of starter."""
    parser.add_argument("shape", nargs="?", metavar="SHAPE", help=f"one of: {', '.join(shapes())}")
    parser.add_argument(
        "--units", default="N mm", metavar="UNITS", help=f"one of: {', '.join(UNIT_SYSTEMS)} (default: N mm)"
    )
    parser.add_argument(
        "-o", "--output", type=Path, metavar="FILE", help="write to FILE, which must not exist (default: stdout)"
    )


def shapes() -> list[str]:
    """Return the words that starter knows."""
    return [*EXAMPLES, BUILT_UP]


def run(args: argparse.Namespace) -> int:
    """Print or write the starter and return the exit code; the list of shapes when the word is missing or unknown."""
    if args.shape is None:
        print("\n".join(shapes()))
        print("Name one of these shapes: xsec-fem starter SHAPE", file=sys.stderr)
        return BAD_INPUT
    try:
        text = starter_text(args.shape, args.units)
    except InputError as error:
        code = report_error(error)
        if args.shape not in shapes():
            print(f"Shapes: {', '.join(shapes())}", file=sys.stderr)
        return code
    if args.output is None:
        print(text, end="")
        return FINE
    try:
        with args.output.open("x", encoding="utf-8") as file:
            file.write(text)
    except FileExistsError as error:
        raise InputError([Fault(str(args.output), "", "exists already", None, "Give another name with -o.")]) from error
    except OSError as error:
        raise InputError([Fault(str(args.output), "", f"cannot be written: {str(error.strerror).lower()}")]) from error
    print(f"{args.output} written; xsec-fem sketch {args.output} draws it", file=sys.stderr)
    return FINE
