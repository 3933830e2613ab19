"""Regions of a mesh or geometry file, and which part of the section each of their pieces becomes."""

from __future__ import annotations

import difflib
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.section import MeshRegion, Part, Section

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_SHOWN = 8  # names listed in a message


@dataclass(frozen=True)
class Region:
    """A named or numbered set of pieces (triangles of a mesh, surfaces of a geometry): indices (k,)."""

    number: int | None
    name: str | None
    pieces: IntArray

    @property
    def label(self) -> str:
        """The region as a user writes it: "web" or 3."""
        return f'"{self.name}"' if self.name else str(self.number)

    def answers(self, wish: str | int) -> bool:
        """Return whether a part means this region by that name or number."""
        return wish == self.name if isinstance(wish, str) else wish == self.number


@dataclass(frozen=True)
class FileMesh:
    """What a mesh file holds: nodes (N, 2) in its own units, triangles (M, n) in gmsh's numbering, regions."""

    nodes: FloatArray
    triangles: IntArray
    regions: tuple[Region, ...]


def common_file(section: Section) -> MeshRegion:
    """Return the file and scale that all parts of the section share; InputError when they do not."""
    regions = [part.mesh_region for part in section.parts if part.mesh_region is not None]
    first = regions[0]
    faults = []
    for part in section.parts:
        region = part.mesh_region
        if region is None:
            continue
        if region.path != first.path:
            rule = f"must be the same for all parts, {str(first.path)!r}"
            faults.append(_fault(section, part, "path", rule, repr(str(region.path)), "Put all parts in one file"))
        elif region.scale != first.scale:
            rule = f"must be the same for all parts of the file, {first.scale:g}"
            faults.append(_fault(section, part, "scale", rule, f"{region.scale:g}"))
    if faults:
        raise InputError(faults)
    return first


def assign_regions(section: Section, regions: Sequence[Region], count: int, piece: str) -> IntArray:
    """Return the part of each piece of the file, shape (count,); `piece` is what to call one, "triangle" or "surface".

    Raises InputError when a part names no region of the file, two parts name the same piece, or a piece is left over.
    """
    owner = np.full(count, -1, np.int64)
    faults = []
    for number, part in enumerate(section.parts):
        wish = part.mesh_region.region if part.mesh_region else None
        found = [region for region in regions if wish is not None and region.answers(wish)]
        if wish is not None and not found:
            faults.append(_unknown(section, part, wish, regions))
            continue
        pieces = np.arange(count) if wish is None else np.unique(np.concatenate([region.pieces for region in found]))
        taken = pieces[owner[pieces] >= 0]
        if len(taken):
            other = section.parts[owner[taken[0]]].name
            rule = f'must not hold pieces of another part: {len(taken)} {piece}s are also in part "{other}"'
            faults.append(_fault(section, part, "region", rule, _text(wish), "Name disjoint regions"))
        owner[pieces] = number
    faults = faults or _left_over(section, regions, owner, piece)
    if faults:
        raise InputError(faults)
    return owner


def _left_over(section: Section, regions: Sequence[Region], owner: IntArray, piece: str) -> list[Fault]:
    """One fault when pieces belong to no part; it lists the regions that hold them."""
    free = np.flatnonzero(owner < 0)
    if not len(free):
        return []
    holding = [region.label for region in regions if np.isin(region.pieces, free).any()]
    where = f"in region {_listed(holding)}" if holding else "outside every region"
    rule = f"must name every region of {_file(section)}: {len(free)} of {len(owner)} {piece}s {where} belong to no part"
    remedy = "Add a part for each, or leave the regions out of the file"
    return [Fault(str(section.path or ""), "parts", rule, None, remedy)]


def _unknown(section: Section, part: Part, wish: str | int, regions: Sequence[Region]) -> Fault:
    rule = f"must be a region of {_file(section)}"
    if not regions:
        remedy = "The file has no named or numbered regions: leave region out to take all of it"
        return _fault(section, part, "region", rule, _text(wish), remedy)
    near = difflib.get_close_matches(str(wish), [str(r.name or r.number) for r in regions], n=1)
    hint = f"Did you mean {near[0]!r}? " if near else ""
    return _fault(section, part, "region", rule, _text(wish), f"{hint}It has {_listed([r.label for r in regions])}")


def _listed(labels: Sequence[str]) -> str:
    more = f" and {len(labels) - _SHOWN} more" if len(labels) > _SHOWN else ""
    return ", ".join(labels[:_SHOWN]) + more


def _text(wish: str | int | None) -> str:
    return "none, the whole file" if wish is None else repr(wish)


def _file(section: Section) -> str:
    return next((part.mesh_region.path.name for part in section.parts if part.mesh_region), "the file")


def _fault(section: Section, part: Part, key: str, rule: str, value: str, remedy: str = "") -> Fault:
    return Fault(str(section.path or ""), f'part "{part.name}": {key}', rule, value, remedy)


def file_error(path: Path, rule: str, remedy: str, value: str | None = None) -> InputError:
    """Return the error for a mesh or geometry file that cannot be used."""
    return InputError([Fault(str(path), "", rule, value, remedy)])
