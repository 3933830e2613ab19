"""Files that a section file points to: found beside it, or a fault with the nearest name there."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path

from xsec_fem.model.faults import FaultList
from xsec_fem.model.section import MeshRegion, Part
from xsec_fem.model.shapes.file import FileShape
from xsec_fem.model.wording import did_you_mean, number_text, quoted, value_text

PART_ENDINGS = (".geo", ".msh", ".vtu")
MESH_ENDINGS = (".msh", ".vtu")


def mesh_region(shape: FileShape, folder: Path, place: str, faults: FaultList) -> MeshRegion | None:
    """Return the region of a mesh or geometry file that a part points to; None, and the faults noted, otherwise."""
    if shape.path.lower().endswith(".dxf"):
        rule = "is a drawing (.dxf), which this version does not read yet"
        remedy = 'Convert it to a mesh or geometry file (.msh, .geo), or type the outline as shape = "outline".'
        faults.add(f"{place}: path", rule, value_text(shape.path), remedy)
        return None
    path = _existing(shape.path, folder, f"{place}: path", faults)
    return None if path is None else MeshRegion(path, shape.region, shape.scale)


def check_one_file(parts: Sequence[tuple[str, Part]], faults: FaultList) -> None:
    """Note parts, given with their places, that are not all drawn or all regions of one file at one scale."""
    from_file = [(place, part.mesh_region) for place, part in parts if part.mesh_region is not None]
    if not from_file:
        return
    for place, part in parts:
        if part.mesh_region is None:
            rule = f"is drawn, but {from_file[0][0]} comes from a mesh file"
            faults.add(place, rule, None, "Draw all parts here, or put all of them into one file.")
    first = from_file[0][1]
    for place, region in from_file[1:]:
        if region.path != first.path:
            rule = f"must be the file of all parts, {quoted(first.path.name)}"
            faults.add(f"{place}: path", rule, quoted(region.path.name), "Put all parts into one file.")
        elif region.scale != first.scale:
            rule = f"must be the same for all parts of the file, {number_text(first.scale)}"
            faults.add(f"{place}: scale", rule, number_text(region.scale))


def mesh_output(name: str, folder: Path, sources: Sequence[Path], place: str, faults: FaultList) -> Path | None:
    """Return where the mesh is to be kept, `name` relative to `folder`; None, and the fault noted, when it cannot be.

    `sources` are files that the parts come from, not to be written over.
    """
    path = folder / name
    remedy = "Give the name of a file to write, beside the section file."
    if path.suffix.lower() not in MESH_ENDINGS:
        faults.add(place, f"must end in {' or '.join(MESH_ENDINGS)}", value_text(name), remedy)
    elif path in sources:
        faults.add(place, "would write over the file that the parts come from", value_text(name), remedy)
    elif not _is(Path.is_dir, path.parent):
        faults.add(place, "is in a folder that does not exist", value_text(name), "Make the folder first.")
    elif _is(Path.is_dir, path):
        faults.add(place, "is a folder, not a file", value_text(name), remedy)
    else:
        return path
    return None


def _existing(name: str, folder: Path, place: str, faults: FaultList) -> Path | None:
    path = folder / name
    if _is(Path.is_file, path):
        return path
    rule = "is a folder, not a file" if _is(Path.is_dir, path) else "does not exist"
    beside = []
    if _is(Path.is_dir, path.parent):
        files = (found for found in path.parent.iterdir() if found.is_file())
        beside = sorted(found.name for found in files if found.suffix.lower() in PART_ENDINGS)
    remedy = did_you_mean(path.name, beside) or f"There is no {', '.join(PART_ENDINGS)} file in that folder."
    faults.add(place, rule, value_text(name), remedy)
    return None


def _is(test: Callable[[Path], bool], path: Path) -> bool:
    """The answer of is_file or is_dir; False for names that no file can have (too long, a NUL character)."""
    try:
        return test(path)
    except (OSError, ValueError):
        return False
