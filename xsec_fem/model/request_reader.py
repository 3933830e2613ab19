"""From [[joints]], [[cuts]], [[probes]] and [[actions]] to what is to be looked at, and under which loads."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import TypeVar

from xsec_fem.model.faults import FaultList
from xsec_fem.model.references import check_joint, check_pairs_once, default_name
from xsec_fem.model.schema import (
    ActionsTable,
    ContactTable,
    CutTable,
    FastenersTable,
    GlueTable,
    JointTable,
    ProbeTable,
    Table,
    WeldTable,
)
from xsec_fem.model.section import Actions, Cut, Fasteners, FilletWeld, Joint, Probe
from xsec_fem.model.wording import did_you_mean, named, value_text

_TABLES: dict[str, type[JointTable]] = {
    "glue": GlueTable,
    "contact": ContactTable,
    "fillet weld": WeldTable,
    "fasteners": FastenersTable,
}
_KIND_NAMES = {
    "glue": "a glue joint", "contact": "a contact joint", "fillet weld": "a fillet weld", "fasteners": "a fastener joint",
}  # fmt: skip
TableT = TypeVar("TableT", bound=Table)


def read_joints(
    tables: list[object], part_names: Sequence[str], material_names: Sequence[str], faults: FaultList
) -> list[tuple[str, Joint]]:
    """Return the joints that can be used with their places in the file; every fault is noted in `faults`."""
    found = []
    for place, table in _tables("joints", tables, faults):
        kind = table.get("kind", "glue")
        if not isinstance(kind, str) or kind not in _TABLES:
            faults.add(f"{place}: kind", "is not a known kind of joint", value_text(kind), did_you_mean(kind, _TABLES))
            continue
        read = faults.read(_TABLES[kind], table, place, _KIND_NAMES[kind])
        if read is None:
            continue
        check_joint(read, place, part_names, faults)
        joint = _joint(read, place, material_names, faults)
        if joint is not None:
            found.append((place, joint))
    check_pairs_once(found, faults)
    return found


def _joint(read: JointTable, place: str, material_names: Sequence[str], faults: FaultList) -> Joint | None:
    joint = Joint(read.name, read.between[0], read.between[1], read.kind)
    if isinstance(read, GlueTable):
        return replace(joint, strength=read.strength)
    if isinstance(read, FastenersTable):
        fasteners = Fasteners(read.rows, read.diameter, read.capacity, read.spacing)
        return replace(joint, fasteners=fasteners)
    if not isinstance(read, WeldTable):
        return joint
    if (read.throat is None) == (read.leg is None):
        rule = "needs throat or leg" if read.throat is None else "must give throat or leg, not both"
        faults.add(place, rule, None, "The throat of a fillet between faces at 90 degrees is 0.707 times its leg.")
        return None
    if read.material is not None and material_names and read.material not in material_names:
        remedy = did_you_mean(read.material, material_names)
        faults.add(f"{place}: material", "is not in [materials]", value_text(read.material), remedy)
    weld = FilletWeld(read.throat, read.leg, read.sides, read.penetration, read.material)
    return replace(joint, strength=read.strength, weld=weld)


def read_cuts(tables: list[object], faults: FaultList) -> tuple[Cut, ...]:
    """Return the cuts that can be used; every fault is noted in `faults`."""
    found = []
    for index, (place, read) in enumerate(_read_all(CutTable, "cuts", "a cut", tables, faults)):
        if read.start == read.end:
            faults.add(place, "must have two different ends", f"from = to = {value_text(read.start)}")
        found.append(Cut(read.name or default_name("cuts", index), read.start, read.end))
    return tuple(found)


def read_probes(tables: list[object], faults: FaultList) -> list[tuple[str, Probe]]:
    """Return the probes that can be used with their places in the file; every fault is noted in `faults`."""
    read = _read_all(ProbeTable, "probes", "a probe", tables, faults)
    return [(place, Probe(probe.name or default_name("probes", k), probe.at)) for k, (place, probe) in enumerate(read)]


def read_actions(tables: list[object], faults: FaultList) -> tuple[Actions, ...]:
    """Return the load cases that can be used; every fault is noted in `faults`."""
    read = [table for _, table in _read_all(ActionsTable, "actions", "a load case", tables, faults)]
    return tuple(
        Actions(a.name or default_name("actions", k), a.N, a.Vy, a.Vz, a.T, a.My, a.Mz, a.load_point)
        for k, a in enumerate(read)
    )


def _tables(kind: str, tables: list[object], faults: FaultList) -> list[tuple[str, Mapping[str, object]]]:
    found = []
    for index, table in enumerate(tables):
        place = f"{kind}[{index}]"
        if isinstance(table, Mapping):
            found.append((named(place, table.get("name")), table))
        else:
            faults.add(place, "must be a table", value_text(table), f"Write [[{kind}]] above each one's keys.")
    return found


def _read_all(
    model: type[TableT], key: str, kind: str, tables: list[object], faults: FaultList
) -> list[tuple[str, TableT]]:
    read = [(place, faults.read(model, table, place, kind)) for place, table in _tables(key, tables, faults)]
    return [(place, table) for place, table in read if table is not None]
