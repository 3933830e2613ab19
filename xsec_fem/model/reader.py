"""From a section file to a `Section`: the one door for user input. All faults are found before any is raised."""

from __future__ import annotations

import hashlib
import os
from collections.abc import Mapping, Sequence
from dataclasses import replace
from pathlib import Path

from xsec_fem.model.cautions import add_cautions
from xsec_fem.model.faults import FaultList
from xsec_fem.model.geometry_checks import check_geometry
from xsec_fem.model.joint_geometry import with_joint_geometry
from xsec_fem.model.material_reader import material_names, read_materials
from xsec_fem.model.mesh_region import check_one_file, mesh_output
from xsec_fem.model.part_reader import PlacedPart, read_parts
from xsec_fem.model.references import check_names_once, check_part_references, check_use, names_in
from xsec_fem.model.request_reader import read_actions, read_cuts, read_joints, read_probes
from xsec_fem.model.schema import HeadTable, SolveTable
from xsec_fem.model.section import Material, Part, Section, SolveSettings
from xsec_fem.model.section_text import parse_tables, read_text
from xsec_fem.model.wording import did_you_mean, key_text
from xsec_fem.units import UNIT_SYSTEMS, UnitSystem

_LISTS = ("parts", "joints", "cuts", "probes", "actions")
_KEYS = ("title", "units", "materials", *_LISTS, "solve")


def read_section(path: str | os.PathLike[str]) -> Section:
    """Read a section file (TOML); paths in it are relative to its folder.

    Raises
    ------
    InputError
        With every fault of the file: it cannot be read, is not TOML, breaks the schema, names what is not there, has
        shapes that cannot be made, or parts that overlap or do not hold together.
    """
    file = os.fspath(path)
    text, raw = read_text(Path(file), file)
    section = parse_section(text, file, Path(file).parent)
    return replace(section, path=Path(file), sha256=hashlib.sha256(raw).hexdigest())


def parse_section(text: str, name: str = "", folder: str | os.PathLike[str] = ".") -> Section:
    """Return the section of a TOML text; `name` stands for the file in messages, `folder` is where its paths start.

    Raises InputError as `read_section` does.
    """
    return section_from_tables(parse_tables(text, name), name, Path(folder))


def section_from_tables(tables: Mapping[str, object], name: str, folder: Path) -> Section:
    """Return the section of tables as the TOML parser gives them; raises InputError as `read_section` does."""
    faults = FaultList(name)
    title, units = _read_head(tables, faults)
    lists = {key: _list_of_tables(tables, key, faults) for key in _LISTS}
    for key in _LISTS:
        check_names_once(key, lists[key], faults)
    materials = read_materials(tables.get("materials", {}), faults)
    placed = _read_parts(tables, lists["parts"], folder, faults)
    known_materials = material_names(tables.get("materials"))
    joints = read_joints(lists["joints"], names_in(lists["parts"]), known_materials, faults)
    cuts, probes = read_cuts(lists["cuts"], faults), read_probes(lists["probes"], faults)
    actions = read_actions(lists["actions"], faults)
    whole = [part for part in placed if part is not None]
    sources = [part.part.mesh_region.path for part in whole if part.part.mesh_region is not None]
    solve = _read_solve(tables.get("solve", {}), folder, sources, faults)
    check_one_file([(part.place, part.part) for part in whole], faults)
    check_geometry(placed, joints, probes, faults)
    faults.raise_if_any()
    check_use(whole, materials, faults, [joint.weld.material for _, joint in joints if joint.weld is not None])
    section = Section(
        title=title or Path(name).stem,
        units=units,
        materials=materials,
        parts=tuple(_without_idle_grain(part.part, materials) for part in whole),
        joints=tuple(joint for _, joint in joints),
        cuts=cuts,
        probes=tuple(probe for _, probe in probes),
        actions=actions,
        solve=solve,
    )
    section = with_joint_geometry(section, faults)
    faults.raise_if_any()
    add_cautions(section, faults)
    return replace(section, cautions=tuple(faults.cautions))


def _read_head(tables: Mapping[str, object], faults: FaultList) -> tuple[str, UnitSystem]:
    """Return title and units; any system stands in for units with a fault, which is raised before they are used."""
    head = faults.read(HeadTable, {key: tables[key] for key in ("title", "units") if key in tables}, "", "the file")
    faults.units = UNIT_SYSTEMS[head.units] if head else None
    for key in tables:
        if key not in _KEYS:
            faults.add(key_text(str(key)), "is not a key or table of a section file", None, did_you_mean(key, _KEYS))
    return (head.title, UNIT_SYSTEMS[head.units]) if head else ("", next(iter(UNIT_SYSTEMS.values())))


def _list_of_tables(tables: Mapping[str, object], key: str, faults: FaultList) -> list[object]:
    value = tables.get(key, [])
    if isinstance(value, list):
        return value
    faults.add(key, "must be a list of tables", None, f"Write [[{key}]] with two brackets above each.")
    return []


def _read_parts(
    tables: Mapping[str, object], part_tables: list[object], folder: Path, faults: FaultList
) -> list[PlacedPart | None]:
    if not part_tables and isinstance(tables.get("parts", []), list):
        remedy = "Write [[parts]] with name, material, shape and the shape's numbers below it."
        faults.add("", "needs at least one part", None, remedy)
    check_part_references(part_tables, material_names(tables.get("materials")), faults)
    return read_parts(part_tables, folder, faults)


def _read_solve(table: object, folder: Path, sources: Sequence[Path], faults: FaultList) -> SolveSettings:
    if not isinstance(table, Mapping):
        faults.add("solve", "must be a table", None, "Write [solve] with one bracket.")
        return SolveSettings()
    read = faults.read(SolveTable, table, "solve", "[solve]")
    if read is None:
        return SolveSettings()
    mesh_file = None
    if read.mesh_file is not None:
        mesh_file = mesh_output(read.mesh_file, folder, sources, "solve: mesh_file", faults)
    return SolveSettings(read.accuracy, read.order, read.nu_effect, mesh_file, read.corner_distance, read.try_radius)


def _without_idle_grain(part: Part, materials: Mapping[str, Material]) -> Part:
    """An isotropic part has no grain, however it is turned."""
    return replace(part, grain_angle=0.0) if materials[part.material].isotropic else part
