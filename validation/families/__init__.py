"""All families of cases, in the order of the table: a new family is a module here with `cases()`, and a line below."""

from __future__ import annotations

from collections.abc import Callable, Sequence

from ..case import Case
from . import (
    bonded_materials,
    built_up,
    closed_cells,
    conventions,
    exact_shapes,
    fillet_torsion,
    kernel,
    polygons,
    rectangle_flexure,
    rolled_sections,
    round_flexure,
    sandwich,
    sectors,
    singular_corners,
    thin_wall_limits,
    thin_warping,
    torsion,
)

FAMILIES: Sequence[Callable[[], list[Case]]] = (
    rectangle_flexure.cases,
    round_flexure.cases,
    exact_shapes.cases,
    torsion.cases,
    sectors.cases,
    thin_warping.cases,
    polygons.cases,
    fillet_torsion.cases,
    bonded_materials.cases,
    sandwich.cases,
    thin_wall_limits.cases,
    closed_cells.cases,
    built_up.cases,
    rolled_sections.cases,
    singular_corners.cases,
    conventions.cases,
    kernel.cases,
)


def all_cases() -> list[Case]:
    """Return the cases of all families; ValueError when two share an id."""
    cases = [case for family in FAMILIES for case in family()]
    seen: set[str] = set()
    for case in cases:
        if case.id in seen:
            raise ValueError(f"two cases have the id {case.id!r}")
        seen.add(case.id)
    return cases


def select(pattern: str = "", quick: bool = False) -> list[Case]:
    """Return the cases whose id, group or title contains every word of `pattern` (letters' case ignored), in order."""
    words = pattern.lower().split()
    return [
        case
        for case in all_cases()
        if all(word in f"{case.id} {case.group} {case.title} {case.quantity}".lower() for word in words)
        and (case.quick or not quick)
    ]
