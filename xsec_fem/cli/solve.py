"""xsec-fem solve FILE...: the main job."""

from __future__ import annotations

import argparse
import json
import sys
import time
from dataclasses import dataclass, replace
from pathlib import Path

from xsec_fem.cli.exit_codes import FINE, OVER_STRENGTH, report_error
from xsec_fem.cli.output_files import output_folders, write_json, write_numbers, writing_to
from xsec_fem.errors import MissingLibraryError, XsecError
from xsec_fem.model.reader import read_section
from xsec_fem.pipeline import solve
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
    parser.add_argument("--no-pictures", action="store_true", help="write no pictures")
    parser.add_argument("--svg", action="store_true", help="write pictures as .svg too")
    parser.add_argument(
        "--order",
        type=int,
        choices=range(1, 6),
        metavar="N",
        help="degree of the triangles, 1 to 5, instead of the file's",
    )


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
            _tell(solved, args.quiet, first=len(codes) == 2)
    if args.json and results:
        documents = [result.to_dict() for result in results]
        sys.stdout.write(
            results[0].to_json() if len(args.files) == 1 else json.dumps(documents, indent=1, ensure_ascii=False) + "\n"
        )
    return max(codes)


def solve_file(file: str, folder: Path, args: argparse.Namespace) -> Solved:
    """Read, solve and write one section file; raises as the steps do, missing pictures alone do not stop it."""
    start = time.perf_counter()
    section = read_section(file)
    read = time.perf_counter() - start
    if args.order is not None:
        section = replace(section, solve=replace(section.solve, order=args.order))
    with writing_to(folder):
        folder.mkdir(parents=True, exist_ok=True)
    result, code, pictures = solve(section), FINE, []
    with writing_to(folder):
        drawing = time.perf_counter()
        if not args.no_pictures:
            try:
                pictures = write_pictures(result, folder, args.svg, two_processes=True)
            except MissingLibraryError as error:
                code = report_error(error, file)
        now = time.perf_counter()
        files = write_numbers(result, folder)
        result = result.with_timings(read=read, pictures=now - drawing, total=time.perf_counter() - start)
        files = [write_json(result, folder), *files, *pictures]
    return Solved(result, files, max(code, OVER_STRENGTH if result.over_strength else FINE))


def _tell(solved: Solved, quiet: bool, first: bool) -> None:
    if quiet:
        for line in over_strength_lines(solved.result):
            print(f"over strength: {line}", file=sys.stderr)
        return
    if not first:
        print()
    print_blocks(summary(solved.result, [str(file) for file in solved.files]), sys.stdout)
