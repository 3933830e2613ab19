"""xsec-fem compare FILE...: where V S/(I t) is wrong, and by how much."""

from __future__ import annotations

import argparse
import json
import sys
from pathlib import Path
from typing import Any

from xsec_fem.cli.exit_codes import FINE, report_error
from xsec_fem.cli.output_files import output_folders, write_comparison, write_cuts, write_sweeps, writing_to
from xsec_fem.cli.progress import step_printer
from xsec_fem.cli.solve import share
from xsec_fem.elementary.compare import Limits
from xsec_fem.errors import Fault, InputError, MissingLibraryError, XsecError
from xsec_fem.model.reader import read_section
from xsec_fem.pipeline import solve
from xsec_fem.pipeline.judged import judged
from xsec_fem.report.blocks import print_blocks
from xsec_fem.report.compare_summary import compare_summary
from xsec_fem.report.picture_files import write_comparison_pictures
from xsec_fem.results import Result

_DEFAULT = Limits()


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of compare."""
    parser.add_argument("files", nargs="+", metavar="FILE", help="section file (TOML); several are taken in turn")
    parser.add_argument(
        "--out", type=Path, metavar="DIR", help="folder for the files written (default: out/<file's name>)"
    )
    parser.add_argument(
        "--json", action="store_true", help="print comparison.json instead of the tables (a list for several files)"
    )
    parser.add_argument("--svg", action="store_true", help="write pictures as .svg too")
    parser.add_argument("--no-pictures", action="store_true", help="write no pictures")
    parser.add_argument(
        "--good", type=share, default=_DEFAULT.good, metavar="X",
        help=f"within this share of 1 the formula is good (default: {_DEFAULT.good:g})",
    )  # fmt: skip
    parser.add_argument(
        "--care", type=share, default=_DEFAULT.care, metavar="X",
        help=f"within this share it is to be used with care, beyond it is poor (default: {_DEFAULT.care:g})",
    )  # fmt: skip


def run(args: argparse.Namespace) -> int:
    """Compare every file and return the worst exit code; strength is not looked at."""
    if args.good >= args.care:
        raise InputError([Fault("", "--good", f"must be below --care, {args.care:g}", f"{args.good:g}")])
    codes = [FINE]
    documents: list[dict[str, Any]] = []
    for file, folder in zip(args.files, output_folders([Path(file) for file in args.files], args.out), strict=True):
        try:
            code, document = _compare_file(file, folder, args, first=not documents)
        except XsecError as error:
            codes.append(report_error(error, file))
            continue
        codes.append(code)
        documents.append(document)
    if args.json and documents:
        text = json.dumps(documents[0] if len(args.files) == 1 else documents, indent=1, ensure_ascii=False)
        sys.stdout.write(text + "\n")
    return max(codes)


def _compare_file(file: str, folder: Path, args: argparse.Namespace, first: bool) -> tuple[int, dict[str, Any]]:
    """Read, solve, write and print one file: its exit code and document; raises as the steps do, pictures alone may fail."""
    section = read_section(file)
    with writing_to(folder):
        folder.mkdir(parents=True, exist_ok=True)
    result = judged(solve(section, progress=step_printer(section.solve.accuracy, False)), Limits(args.good, args.care))
    code, pictures = FINE, []
    with writing_to(folder):
        if not args.no_pictures:
            try:
                pictures = write_comparison_pictures(result, folder, args.svg, two_processes=True)
            except MissingLibraryError as error:
                code = report_error(error, file)
        result, tables = write_sweeps(result, folder, every=True)
        document, written = write_comparison(result, folder)
        files = [written, *tables, *write_cuts(result, folder), *pictures]
    if not args.json:
        _tell(result, files, first)
    return code, document


def _tell(result: Result, files: list[Path], first: bool) -> None:
    if not first:
        print()
    print_blocks(compare_summary(result, [str(file) for file in files]), sys.stdout)
