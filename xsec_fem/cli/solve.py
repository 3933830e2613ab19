"""xsec-fem solve FILE...: the main job."""

from __future__ import annotations

import argparse
import json
import math
import sys
import time
from dataclasses import dataclass, replace
from pathlib import Path

from xsec_fem.cli.exit_codes import FINE, OVER_STRENGTH, report_error
from xsec_fem.cli.output_files import output_folders, write_json, write_numbers, write_sweeps, writing_to
from xsec_fem.cli.progress import step_printer
from xsec_fem.errors import MissingLibraryError, XsecError
from xsec_fem.model.reader import read_section
from xsec_fem.model.section import Section
from xsec_fem.pipeline import solve
from xsec_fem.pipeline.convergence import convergence
from xsec_fem.report.blocks import print_blocks
from xsec_fem.report.picture_files import write_pictures
from xsec_fem.report.summary import over_strength_lines, summary
from xsec_fem.results import Result


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of solve."""
    parser.add_argument(
        "files", nargs="+", metavar="FILE", help="section file (TOML); several are solved one after the other"
    )
    parser.add_argument(
        "--out", type=Path, metavar="DIR", help="folder for the files written (default: out/<file's name>)"
    )
    parser.add_argument(
        "--json", action="store_true", help="print results.json instead of the summary (a list for several files)"
    )
    parser.add_argument("--quiet", action="store_true", help="print nothing but faults")
    drawn = parser.add_mutually_exclusive_group()
    drawn.add_argument("--no-pictures", action="store_true", help="write no pictures")
    drawn.add_argument(
        "--all-pictures", action="store_true", help="draw the joints and the comparison with V S/(I t) too"
    )
    parser.add_argument("--svg", action="store_true", help="write pictures as .svg too")
    parser.add_argument(
        "--order",
        type=int,
        choices=range(1, 6),
        metavar="N",
        help="degree of the triangles, 1 to 5, instead of the file's",
    )
    parser.add_argument(
        "--accuracy",
        type=share,
        metavar="X",
        help="relative energy error to reach, 0.01 for 1 %%, instead of the file's",
    )
    parser.add_argument(
        "--no-certificate", action="store_true", help="no guaranteed bounds: the first mesh is solved as it is"
    )
    parser.add_argument(
        "--convergence",
        action="store_true",
        help="solve a series of meshes too: a table and convergence.png as evidence",
    )
    parser.add_argument("--hand", action="store_true", help="print the hand calculation of every cut, symbol by symbol")


def share(text: str) -> float:
    """Return an argument as a number between 0 and 1, both left out; argparse tells the fault otherwise."""
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not 0 < value < 1:
        raise argparse.ArgumentTypeError(f"must be a number between 0 and 1, such as 0.01 (got {text})")
    return value


@dataclass(frozen=True)
class Solved:
    """A result, the files written, and the exit code so far."""

    result: Result
    files: list[Path]
    code: int


def run(args: argparse.Namespace) -> int:
    """Solve every file and return the worst exit code."""
    codes, results = [FINE], []
    for file, folder in zip(args.files, output_folders([Path(file) for file in args.files], args.out), strict=True):
        try:
            solved = solve_file(file, folder, args)
        except XsecError as error:
            codes.append(report_error(error, file))
            continue
        codes.append(solved.code)
        if args.json:
            results.append(solved.result)
        else:
            _tell(solved, args, first=len(codes) == 2)
    if args.json and results:
        documents = [result.to_dict() for result in results]
        sys.stdout.write(
            results[0].to_json() if len(args.files) == 1 else json.dumps(documents, indent=1, ensure_ascii=False) + "\n"
        )
    return max(codes)


def solve_file(file: str, folder: Path, args: argparse.Namespace) -> Solved:
    """Read, solve and write one section file; raises as the steps do, missing pictures alone do not stop it."""
    start = time.perf_counter()
    section = _as_asked(read_section(file), args)
    read = time.perf_counter() - start
    with writing_to(folder):
        folder.mkdir(parents=True, exist_ok=True)
    result = solve(section, not args.no_certificate, step_printer(section.solve.accuracy, args.quiet))
    if args.convergence:
        result = _with_convergence(result)
    code, pictures = FINE, []
    with writing_to(folder):
        drawing = time.perf_counter()
        if not args.no_pictures:
            try:
                pictures = write_pictures(result, folder, args.svg, two_processes=True, every=args.all_pictures)
            except MissingLibraryError as error:
                code = report_error(error, file)
        now = time.perf_counter()
        result, sweeps = write_sweeps(result, folder)
        files = [*write_numbers(result, folder), *sweeps]
        result = result.with_timings(read=read, pictures=now - drawing, total=time.perf_counter() - start)
        files = [write_json(result, folder), *files, *pictures]
    return Solved(result, files, max(code, OVER_STRENGTH if result.over_strength else FINE))


def _as_asked(section: Section, args: argparse.Namespace) -> Section:
    """The section with what the command line says in place of the file's [solve]."""
    given = {"order": args.order, "accuracy": args.accuracy}
    return replace(section, solve=replace(section.solve, **{key: v for key, v in given.items() if v is not None}))


def _with_convergence(result: Result) -> Result:
    start = time.perf_counter()
    rows = convergence(result)
    return replace(result, convergence=rows).with_timings(convergence=time.perf_counter() - start)


def _tell(solved: Solved, args: argparse.Namespace, first: bool) -> None:
    if args.quiet:
        for line in over_strength_lines(solved.result):
            print(f"over strength: {line}", file=sys.stderr)
        return
    if not first:
        print()
    print_blocks(summary(solved.result, [str(file) for file in solved.files], args.hand), sys.stdout)
