"""xsec-fem validate [PATTERN]: every claim against something outside the project."""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path
from shutil import get_terminal_size
from tempfile import TemporaryDirectory
from typing import Any

from xsec_fem.cli.exit_codes import FINE, OVER_STRENGTH
from xsec_fem.cli.validation_library import in_checkout, validation_module
from xsec_fem.errors import Fault, InputError
from xsec_fem.report.blocks import print_blocks

MISSED = OVER_STRENGTH  # a case outside its tolerance: the command did its work, and the answer is no
_WIDE = 150  # columns of a terminal that has room for the guaranteed intervals too
Progress = Callable[[int, int], None]


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of validate."""
    parser.add_argument(
        "pattern", nargs="*", metavar="PATTERN",
        help="words that a case's id, group, title or quantity must all contain (default: all cases)",
    )  # fmt: skip
    parser.add_argument("--quick", action="store_true", help="only the short cases, a few seconds in all")
    parser.add_argument("--json", action="store_true", help="print the records instead of the table")
    parser.add_argument("--html", type=Path, metavar="FILE", help="write table and pictures as one page")
    parser.add_argument(
        "--pictures", type=Path, metavar="DIR", help="draw differences by group and convergence of six cases there"
    )
    parser.add_argument("--jobs", type=int, metavar="N", help="processes to work with (default: one a core)")
    if in_checkout():
        parser.add_argument(
            "--write-readme", action="store_true", help="write the table of all cases into validation/README.md"
        )


def run(args: argparse.Namespace) -> int:
    """Run the cases, print the table and write what was asked for; exit code 1 when a case is missed."""
    cases = _chosen(args)
    with progress_bar(len(cases)) as progress:
        records = validation_module("runner").run(cases, args.jobs, progress)
    files = _write_files(records, args)
    table = validation_module("table")
    if args.json:
        sys.stdout.write(table.document(records))
    else:
        narrow = sys.stdout.isatty() and get_terminal_size().columns < _WIDE
        print_blocks(table.blocks(records, narrow), sys.stdout)
        for file in files:
            print(f"  written: {file}")
    return FINE if all(record.ok for record in records) else MISSED


def _write_files(records: Sequence[Any], args: argparse.Namespace) -> list[Path]:
    """Draw and write what was asked for; return the files."""
    files: list[Path] = []
    if getattr(args, "write_readme", False):
        readme = validation_module("readme")
        with _writing(readme.README, "--write-readme"):
            readme.README.write_text(readme.readme(records), encoding="utf-8")
        files.append(readme.README)
    if args.pictures is None and args.html is None:
        return files
    studied = validation_module("convergence").all_curves(args.jobs or os.cpu_count() or 1)
    with TemporaryDirectory() as scratch:
        folder = args.pictures or Path(scratch)
        with _writing(folder, "--pictures"):
            folder.mkdir(parents=True, exist_ok=True)
            pictures = validation_module("pictures").write_pictures(folder, records, studied)
        if args.html is not None:
            with _writing(args.html, "--html"):
                args.html.parent.mkdir(parents=True, exist_ok=True)
                args.html.write_text(validation_module("page").page(records, pictures), encoding="utf-8")
            files.append(args.html)
        return [*files, *(pictures if args.pictures else [])]


@contextmanager
def _writing(target: Path, option: str) -> Iterator[None]:
    """Turn any failure to write into one InputError that names the option, the target and the reason."""
    try:
        yield
    except OSError as error:
        reason = (error.strerror or str(error)).lower()
        raise InputError(
            [Fault("", option, f"cannot be written: {reason}", str(target), "Give another place.")]
        ) from error


def _chosen(args: argparse.Namespace) -> Sequence[Any]:
    faults = []
    if args.jobs is not None and args.jobs < 1:
        faults.append(Fault("", "--jobs", "must be at least 1", str(args.jobs)))
    families = validation_module("families")
    cases: Sequence[Any] = families.select(" ".join(args.pattern), args.quick)
    if not cases:
        groups = ", ".join(dict.fromkeys(case.group for case in families.all_cases()))
        text = " ".join(args.pattern) + (" --quick" if args.quick else "")
        faults.append(Fault("", "PATTERN", "must fit at least one case", text, f"Groups are: {groups}."))
    if getattr(args, "write_readme", False) and len(cases) < len(families.all_cases()):
        faults.append(Fault("", "--write-readme", "needs all cases", None, "Leave PATTERN and --quick out."))
    if faults:
        raise InputError(faults)
    return cases


@contextmanager
def progress_bar(total: int) -> Iterator[Progress | None]:
    """Yield a function that moves a bar on stderr, None where stderr is no terminal."""
    if not sys.stderr.isatty():
        yield None
        return
    from rich.console import Console
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeElapsedColumn

    columns = (TextColumn("{task.description}"), BarColumn(), MofNCompleteColumn(), TimeElapsedColumn())
    with Progress(*columns, console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task("checks", total=total)
        yield lambda done, _: bar.update(task, completed=done)
