"""From the [materials.NAME] tables to `Material` objects."""

from __future__ import annotations

from collections.abc import Mapping

from xsec_fem.model.faults import FaultList
from xsec_fem.model.schema import IsotropicTable, OrthotropicTable
from xsec_fem.model.section import Material
from xsec_fem.model.wording import key_text, listed

_ORTHOTROPIC_KEYS = ("Gxy", "Gxz", "nu_xy", "nu_xz")
_ISOTROPIC_KEYS = ("G", "nu")


def read_materials(table: object, faults: FaultList) -> dict[str, Material]:
    """Return the materials that can be used, by name, in the file's order; every fault is noted in `faults`."""
    remedy = "Write [materials.steel] with E and nu below it."
    if not table:
        faults.add("", "needs at least one material", None, remedy)
        return {}
    if not isinstance(table, Mapping):
        faults.add("materials", "must be tables with a name", None, remedy)
        return {}
    loose = [str(name) for name, value in table.items() if not isinstance(value, Mapping)]
    if loose:
        faults.add("materials", f"holds {listed(loose)} outside of a material", None, remedy)
    read = {name: _read_material(name, table[name], faults) for name in material_names(table)}
    return {name: material for name, material in read.items() if material is not None}


def material_names(table: object) -> list[str]:
    """Return the names of the materials as typed, whether or not their tables have faults."""
    return (
        [str(name) for name, value in table.items() if isinstance(value, Mapping)] if isinstance(table, Mapping) else []
    )


def material_place(name: str) -> str:
    """Return where a material stands in the file, 'materials.board' or 'materials."glue line"'."""
    return f"materials.{key_text(name)}"


def _read_material(name: str, table: Mapping[str, object], faults: FaultList) -> Material | None:
    place = material_place(name)
    if not name.strip() or not name.isprintable():
        faults.add(place, "needs a name of printable text", None, "Write [materials.steel].")
        return None
    if any(key in table for key in _ORTHOTROPIC_KEYS):
        return _orthotropic(name, table, place, faults)
    read = faults.read(IsotropicTable, table, place, "an isotropic material", _ORTHOTROPIC_KEYS)
    if read is None:
        return None
    shear = read.G if read.G is not None else read.E / (2 * (1 + read.nu))
    given = read.G is not None
    return Material(name, read.E, shear, shear, read.nu, read.nu, read.shear_strength, read.strength, given)


def _orthotropic(name: str, table: Mapping[str, object], place: str, faults: FaultList) -> Material | None:
    mixed = [key for key in _ISOTROPIC_KEYS if key in table]
    if mixed:
        remedy = "Give either G and nu, or all of Gxy, Gxz, nu_xy and nu_xz."
        faults.add(place, f"mixes {listed(mixed)} with the numbers of an orthotropic material", None, remedy)
    rest = {key: value for key, value in table.items() if key not in mixed}
    read = faults.read(OrthotropicTable, rest, place, "an orthotropic material")
    if read is None or mixed:
        return None
    return Material(
        name, read.E, read.Gxy, read.Gxz, read.nu_xy, read.nu_xz, read.shear_strength, read.strength
    )  # fmt: skip
