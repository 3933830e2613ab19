"""From [[joints]], [[cuts]], [[probes]] and [[actions]] to what is to be looked at, and under which loads."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import TypeVar

from xsec_fem.model.faults import FaultList
from xsec_fem.model.references import check_joint, default_name
from xsec_fem.model.schema import ActionsTable, CutTable, JointTable, ProbeTable, Table
from xsec_fem.model.section import Actions, Cut, Joint, Probe
from xsec_fem.model.wording import did_you_mean, named, quoted, value_text

_LATER_KINDS = ("contact", "fillet weld", "fasteners")
_KINDS = ("glue", *_LATER_KINDS)
TableT = TypeVar("TableT", bound=Table)


def read_joints(tables: list[object], part_names: Sequence[str], faults: FaultList) -> list[tuple[str, Joint]]:
    """Return the joints that can be used with their places in the file; every fault is noted in `faults`."""
    found = []
    for place, table in _tables("joints", tables, faults):
        if not _known_kind(table, place, faults):
            continue
        read = faults.read(JointTable, table, place, "a glue joint")
        if read is not None:
            check_joint(read, place, part_names, faults)
            found.append((place, Joint(read.name, read.between[0], read.between[1], read.kind, read.strength)))
    return found


def read_cuts(tables: list[object], faults: FaultList) -> tuple[Cut, ...]:
    """Return the cuts that can be used; every fault is noted in `faults`."""
    found = []
    for index, (place, read) in enumerate(_read_all(CutTable, "cuts", "a cut", tables, faults)):
        if read.start == read.end:
            faults.add(place, "must have two different ends", f"from = to = {value_text(read.start)}")
        found.append(Cut(read.name or default_name("cuts", index), read.start, read.end))
    if found:
        message = (
            f"Cuts are read and drawn, but not evaluated in this version: {', '.join(quoted(c.name) for c in found)}."
        )
        faults.caution("cuts", message)
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


def _known_kind(table: Mapping[str, object], place: str, faults: FaultList) -> bool:
    """A kind of later versions is one fault: its other keys are not looked at."""
    kind = table.get("kind")
    if kind is None or kind == "glue":
        return True
    if kind in _LATER_KINDS:
        rule = 'is not in this version: only "glue" joints are solved'
        remedy = "Leave the joint out to bond the parts, or keep a gap between them."
        faults.add(f"{place}: kind {quoted(str(kind))}", rule, None, remedy)
    else:
        faults.add(f"{place}: kind", "is not a known kind of joint", value_text(kind), did_you_mean(kind, _KINDS))
    return False
