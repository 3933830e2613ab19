"""What a command leaves behind: the folder, fields.vtu, joints.csv, cuts.csv, sweeps of cuts and, last, results.json."""

from __future__ import annotations

import json
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np

from xsec_fem.errors import Fault, InputError
from xsec_fem.meshing.vtu_fields import write_fields
from xsec_fem.report.cut_table import cuts_csv
from xsec_fem.report.joint_table import joints_csv
from xsec_fem.report.sweep_table import case_sweeps, sweep_csv, sweep_name
from xsec_fem.report.wording import case_prefixes
from xsec_fem.results import CaseResult, Result
from xsec_fem.results.document import comparison_part


def output_folders(files: Sequence[Path], out: Path | None) -> list[Path]:
    """Return one folder a section file: out/<stem>, or `out` itself for a single file, or out/<stem> below it.

    Files of the same stem get folders stem, stem_2, ... so that none overwrites another.
    """
    if out is not None and len(files) == 1:
        return [out]
    folders: list[Path] = []
    for file in files:
        base = folder = (out or Path("out")) / file.stem
        count = 1
        while folder in folders:
            count += 1
            folder = base.with_name(f"{base.name}_{count}")
        folders.append(folder)
    return folders


@contextmanager
def writing_to(folder: Path) -> Iterator[None]:
    """Turn any failure to write into one InputError that names the folder, the reason and the remedy."""
    try:
        yield
    except OSError as error:
        reason = (error.strerror or str(error)).lower()
        remedy = "Give another folder with --out."
        raise InputError(
            [Fault("", f"output folder {folder}", f"cannot be written: {reason}", None, remedy)]
        ) from error


def write_numbers(result: Result, folder: Path) -> list[Path]:
    """Write fields.vtu, and joints.csv and cuts.csv when there are any; return the files. Raises OSError when it cannot."""
    files = [folder / "fields.vtu"]
    write_fields(files[0], result.mesh, vtu_fields(result))
    if any(case.joints for case in result.cases):
        files.append(folder / "joints.csv")
        files[-1].write_text(joints_csv(result), encoding="utf-8")
    return files + write_cuts(result, folder)


def write_cuts(result: Result, folder: Path) -> list[Path]:
    """Write cuts.csv when there are cuts and return it in a list; OSError when it cannot be written."""
    if not any(case.cuts for case in result.cases):
        return []
    file = folder / "cuts.csv"
    file.write_text(cuts_csv(result), encoding="utf-8")
    return [file]


def write_sweeps(result: Result, folder: Path, every: bool = False) -> tuple[Result, list[Path]]:
    """Write the cuts perpendicular to V of each case, with `every` those along the axes too; OSError when that fails.

    Returns the result with the files' names in it, and the files.
    """
    cases, files = [], []
    for case, prefix in zip(result.cases, case_prefixes(result), strict=True):
        names = []
        if case.comparison is not None:
            for sweep in case_sweeps(case.comparison, every):
                names.append(sweep_name(sweep, prefix))
                files.append(folder / names[-1])
                files[-1].write_text(sweep_csv(sweep, case.comparison, result.section.units), encoding="utf-8")
        cases.append(replace(case, sweep_files=tuple(names)))
    return replace(result, cases=tuple(cases)), files


def write_comparison(result: Result, folder: Path) -> tuple[dict[str, Any], Path]:
    """Write comparison.json; return its document and the file. OSError when it cannot be written."""
    document, file = comparison_part(result.to_dict()), folder / "comparison.json"
    text = json.dumps(document, indent=1, allow_nan=False, ensure_ascii=False) + "\n"
    file.write_text(text, encoding="utf-8")
    return document, file


def write_json(result: Result, folder: Path) -> Path:
    """Write results.json and return it; OSError when it cannot be written."""
    file = folder / "results.json"
    file.write_text(result.to_json(), encoding="utf-8")
    return file


def vtu_fields(result: Result) -> dict[str, np.ndarray]:
    """Return the point fields of all cases at the nodes of each triangle, (M, n) or (M, n, 3) [MPa].

    Names: tau_xy, tau_xz, tau, tau_vector, sigma_x, von_mises; behind the case's name when there are several.
    """
    nodes = result.fields.part_nodes.triangles
    prefixes = case_prefixes(result)
    fields: dict[str, np.ndarray] = {}
    for case, prefix in zip(result.cases, prefixes, strict=True):
        for name, values in _fields_of(case).items():
            fields[f"{prefix} {name}".strip()] = values[nodes]
    return fields


def _fields_of(case: CaseResult) -> dict[str, np.ndarray]:
    stress = case.stress
    vector = np.column_stack([stress.tau_components, np.zeros(len(stress.tau))])
    return {
        "tau_xy": stress.tau_xy, "tau_xz": stress.tau_xz, "tau": stress.tau, "tau_vector": vector,
        "sigma_x": stress.sigma_x, "von_mises": stress.von_mises,
    }  # fmt: skip
