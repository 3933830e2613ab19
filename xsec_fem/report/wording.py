"""Phrases that the pictures and the summary share: actions with units, where the shear acts, names of files."""

from __future__ import annotations

import re
import unicodedata

import numpy as np

from xsec_fem.model.section import Actions
from xsec_fem.report.numbers import number
from xsec_fem.results import CaseResult, Result
from xsec_fem.units import UnitSystem

_FORCES, _MOMENTS = ("N", "Vy", "Vz"), ("T", "My", "Mz")


def actions_text(actions: Actions, units: UnitSystem) -> str:
    """Return "Vz = 18000 N, T = 2000 N mm": the actions that are not zero, with the units of force and moment."""
    given = [(name, getattr(actions, name), units.force) for name in _FORCES]
    given += [(name, getattr(actions, name), units.moment) for name in _MOMENTS]
    return ", ".join(f"{name} = {number(value)} {unit}" for name, value, unit in given if value) or "no actions"


def load_point_text(actions: Actions, units: UnitSystem) -> str:
    """Return where Vy and Vz act, "at (20, 805) mm" or "through the shear centre"; "" without shear force."""
    if not (actions.Vy or actions.Vz):
        return ""
    if actions.load_point is None:
        return "through the shear centre (no load_point given)"
    if isinstance(actions.load_point, str):
        return f"through the {actions.load_point}"
    y, z = actions.load_point
    return f"at ({number(y)}, {number(z)}) {units.length}"


def slug(name: str) -> str:
    """Return a name fit for a file: "support, ULS" becomes "support_uls"; "case" when nothing is left of it."""
    plain = unicodedata.normalize("NFKD", name).encode("ascii", "ignore").decode()
    return re.sub(r"[^a-z0-9]+", "_", plain.lower()).strip("_")[:60].strip("_") or "case"


def unique_slugs(names: list[str]) -> list[str]:
    """Return one slug a name; equal ones get a number, so that no file overwrites another."""
    found: list[str] = []
    for name in names:
        base = text = slug(name)
        count = 1
        while text in found:
            count += 1
            text = f"{base}_{count}"
        found.append(text)
    return found


def is_twisted(result: Result, case: CaseResult) -> bool:
    """Return True when there is a torque about the shear centre beside the shear, more than round-off."""
    shear = abs(case.forces.Vy) + abs(case.forces.Vz)
    return number(case.T_total, scale=shear * section_size(result)) != "0"


def case_prefixes(result: Result) -> list[str]:
    """Return what the files of each case begin with: its name as a slug, "" when there is one case only."""
    return unique_slugs([case.name for case in result.cases]) if len(result.cases) > 1 else [""] * len(result.cases)


def counted(count: int, noun: str) -> str:
    """Return "1 node", "3 nodes"."""
    return f"{count} {noun}" + ("" if count == 1 else "s")


def section_size(result: Result) -> float:
    """Return the larger side of the section's bounding box [mm]; tells round-off from values."""
    return float(np.ptp(result.mesh.nodes, axis=0).max())
