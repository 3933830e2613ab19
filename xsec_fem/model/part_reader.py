"""From the [[parts]] tables, with their shapes and holes, to `Part` objects in the section's axes."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TypeVar

import numpy as np

from xsec_fem.model.faults import FaultList
from xsec_fem.model.mesh_region import mesh_region
from xsec_fem.model.outline import Face, Isometry, Loop
from xsec_fem.model.placement import moved_walls, placement, turned_grain
from xsec_fem.model.schema import HoleTable, PartTable, PlacementTable
from xsec_fem.model.section import Part
from xsec_fem.model.shapes import SHAPES, ShapeSpec
from xsec_fem.model.shapes.file import FileShape
from xsec_fem.model.wording import did_you_mean, listed, named, quoted, text_with_unit, value_text

_FARTHEST = 1e-6  # least size over coordinates: of 16 digits, 10 are left for the shape itself
PlacementT = TypeVar("PlacementT", bound=PlacementTable)


@dataclass(frozen=True)
class PlacedPart:
    """A part, where it stands in the file, and where each of its holes does ("" for a hole of the shape itself).

    `grain_given` is True when the file gives a grain angle.
    """

    part: Part
    place: str
    hole_places: tuple[str, ...] = ()
    grain_given: bool = False


def read_parts(tables: list[object], folder: Path, faults: FaultList) -> list[PlacedPart | None]:
    """Return one entry per table of [[parts]]: the part, or None when it has a fault (noted in `faults`)."""
    return [_read_part(index, table, folder, faults) for index, table in enumerate(tables)]


def _read_part(index: int, table: object, folder: Path, faults: FaultList) -> PlacedPart | None:
    place = f"parts[{index}]"
    if not isinstance(table, Mapping):
        faults.add(place, "must be a table", value_text(table), "Write [[parts]] above each part's keys.")
        return None
    place = named(place, table.get("name"))
    common, spec = _split(table, PartTable, place, faults)
    holes = _read_holes(table.get("holes", []), place, faults)
    if common is None or spec is None or holes is None:
        return None
    if isinstance(spec, FileShape):
        return _file_part(common, spec, bool(holes), folder, place, faults)
    face, move = _placed_face(spec, common, place, faults)
    if face is None:
        return None
    part = Part(
        common.name,
        common.material,
        _word(table),
        Face(face.outer, face.holes + tuple(loop for loop, _ in holes)),
        embedded_in=common.embedded_in,
        grain_angle=turned_grain(common.grain_angle, common.rotate, common.mirror),
        walls=moved_walls(spec.walls(), move),
    )
    hole_places = ("",) * len(face.holes) + tuple(where for _, where in holes)
    return PlacedPart(part, place, hole_places, "grain_angle" in common.model_fields_set)


def _word(table: Mapping[str, object]) -> str:
    return str(table.get("shape"))


def _split(
    table: Mapping[str, object], model: type[PlacementT], place: str, faults: FaultList
) -> tuple[PlacementT | None, ShapeSpec | None]:
    """Read the common keys and the shape's numbers, which stand in one table."""
    own = set(model.model_fields)
    common = faults.read(model, {key: value for key, value in table.items() if key in own}, place, "a part")
    skipped = own | {"shape", "holes"} if model is PartTable else own | {"shape"}
    numbers = {str(key): value for key, value in table.items() if key not in skipped}
    shape_class = _shape_class(table, place, faults)
    if shape_class is None:
        return common, None
    word = _word(table)
    spec = faults.read(shape_class, numbers, place, f"shape {quoted(word)}", sorted(skipped))
    if spec is None:
        return common, None
    try:
        problems = spec.problems()
    except (ArithmeticError, ValueError):
        faults.add(place, "has sizes too far apart to work with", None, "Check the numbers of the shape and of at.")
        return common, None
    for problem in problems:
        value = text_with_unit(problem.value, problem.key, faults.units)
        faults.add(f"{place}: {problem.key}", problem.rule, value, problem.remedy)
    return common, None if problems else spec


def _shape_class(table: Mapping[str, object], place: str, faults: FaultList) -> type[ShapeSpec] | None:
    word = table.get("shape")
    if word is None:
        faults.add(place, "needs shape", None, f"Give one of {', '.join(SHAPES)}.")
    elif not isinstance(word, str) or word not in SHAPES:
        faults.add(f"{place}: shape", "is not a known shape", value_text(word), did_you_mean(word, SHAPES))
    else:
        return SHAPES[word]
    return None


def _placed_face(spec: ShapeSpec, where: PlacementTable, place: str, faults: FaultList) -> tuple[Face | None, Isometry]:
    try:
        face = spec.face()
        move = placement(face, where.anchor or spec.default_anchor, where.at, where.rotate, where.mirror)
        placed = face.moved(move)
        outline, *_ = [loop.polyline() for loop in placed.loops]  # all of them: each must be drawable
    except (ArithmeticError, ValueError):
        faults.add(place, "has sizes too far apart to work with", None, "Check the numbers of the shape and of at.")
        return None, Isometry()
    if np.ptp(outline, axis=0).max() < _FARTHEST * np.abs(outline).max():
        remedy = "Put it nearer to the origin, or check its numbers and their units."
        faults.add(place, f"is too far from the origin for its size, at {value_text(where.at)}", None, remedy)
        return None, Isometry()
    return placed, move


def _read_holes(tables: object, place: str, faults: FaultList) -> list[tuple[Loop, str]] | None:
    """Return the loops of the holes with their places in the file; None when one has a fault."""
    if not isinstance(tables, list):
        faults.add(f"{place}: holes", "must be a list of tables", value_text(tables), "Write [[parts.holes]].")
        return None
    read = [_read_hole(table, f"{place}: holes[{index}]", faults) for index, table in enumerate(tables)]
    return None if None in read else [hole for hole in read if hole is not None]


def _read_hole(table: object, place: str, faults: FaultList) -> tuple[Loop, str] | None:
    if not isinstance(table, Mapping):
        faults.add(place, "must be a table", value_text(table), "Write [[parts.holes]] above each hole's keys.")
        return None
    common, spec = _split(table, HoleTable, place, faults)
    if common is None or spec is None:
        return None
    if isinstance(spec, FileShape):
        faults.add(f"{place}: shape", "cannot be a hole", value_text("file"), "Give the hole's outline as a shape.")
        return None
    face, _ = _placed_face(spec, common, place, faults)
    if face is None:
        return None
    if face.holes:
        remedy = "Give a solid shape for the hole, and another part for what stands inside it."
        faults.add(f"{place}: shape", "is hollow and would leave a loose core", value_text(_word(table)), remedy)
        return None
    return face.outer, place


def _file_part(
    common: PartTable, spec: FileShape, has_holes: bool, folder: Path, place: str, faults: FaultList
) -> PlacedPart | None:
    """A region of a mesh file stands where the file says: keys that would move or cut it are faults, never ignored."""
    unused: list[str] = [key for key in ("at", "anchor", "rotate", "mirror") if key in common.model_fields_set]
    unused += ["holes"] if has_holes else []
    unused += ["embedded_in"] if common.embedded_in is not None else []
    if unused:
        rule = f'cannot have {listed(unused)} with shape "file": the mesh stays where its file puts it'
        faults.add(place, rule, None, "Leave it out, or move and cut the mesh in its own file.")
    region = mesh_region(spec, folder, place, faults)
    if region is None or unused:
        return None
    part = Part(common.name, common.material, "file", mesh_region=region, grain_angle=common.grain_angle)
    return PlacedPart(part, place, grain_given="grain_angle" in common.model_fields_set)
