"""Files that a section file points to: found beside it, or a fault with the nearest name there."""

from __future__ import annotations

from pathlib import Path

from xsec_fem.model.faults import FaultList
from xsec_fem.model.section import MeshRegion
from xsec_fem.model.shapes.file import FileShape
from xsec_fem.model.wording import did_you_mean, value_text

PART_ENDINGS = (".geo", ".msh", ".vtu")
MESH_ENDINGS = (".msh", ".vtu")


def mesh_region(shape: FileShape, folder: Path, place: str, faults: FaultList) -> MeshRegion | None:
    """Return the region of a mesh or geometry file that a part points to; None, and the faults noted, otherwise."""
    if shape.path.lower().endswith(".dxf"):
        rule = "is a drawing (.dxf), which this version does not read yet"
        remedy = 'Convert it to a mesh or geometry file (.msh, .geo), or type the outline as shape = "outline".'
        faults.add(f"{place}: path", rule, value_text(shape.path), remedy)
        return None
    path = found_file(shape.path, folder, PART_ENDINGS, f"{place}: path", faults)
    return None if path is None else MeshRegion(path, shape.region, shape.scale)


def found_file(name: str, folder: Path, endings: tuple[str, ...], place: str, faults: FaultList) -> Path | None:
    """Return the path of a file named relative to `folder`; None, and the fault noted, when it cannot be used."""
    if Path(name).suffix.lower() not in endings:
        faults.add(place, f"must end in {' or '.join(endings)}", value_text(name))
        return None
    path = folder / name
    try:
        if path.is_file():
            return path
        rule = "is a folder, not a file" if path.is_dir() else "does not exist"
        beside = sorted(p.name for p in path.parent.iterdir() if p.suffix.lower() in endings)
    except (OSError, ValueError):  # no such folder, a name too long, or one with a NUL character
        rule, beside = "does not exist", []
    remedy = did_you_mean(path.name, beside) or f"There is no file with such an ending in {value_text(str(folder))}."
    faults.add(place, rule, value_text(name), remedy)
    return None
