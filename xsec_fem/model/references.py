"""Names: none used twice, none that points nowhere."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence

from xsec_fem.model.faults import FaultList
from xsec_fem.model.material_reader import material_place
from xsec_fem.model.part_reader import PlacedPart
from xsec_fem.model.schema import JointTable
from xsec_fem.model.section import Joint, Material
from xsec_fem.model.wording import did_you_mean, named, quoted, value_text

_UNNAMED = {"cuts": "cut", "probes": "probe", "actions": "case"}


def default_name(kind: str, index: int) -> str:
    """Return the name of a cut, probe or load case that was given none: "cut 1" for index 0."""
    return f"{_UNNAMED[kind]} {index + 1}"


def names_in(tables: Sequence[object]) -> list[str]:
    """Return the names in a list of tables as typed, each once, whether or not the tables have other faults."""
    names = (table.get("name") for table in tables if isinstance(table, Mapping))
    return list(dict.fromkeys(name for name in names if isinstance(name, str)))


def check_names_once(kind: str, tables: Sequence[object], faults: FaultList) -> None:
    """Note every name that a second table of one kind ("parts") repeats; tables as typed."""
    seen: dict[str, int] = {}
    for index, table in enumerate(tables):
        unnamed = default_name(kind, index) if kind in _UNNAMED else None
        name = table.get("name", unnamed) if isinstance(table, Mapping) else None
        if not isinstance(name, str):
            continue
        if name in seen:
            rule = f"has the same name as {kind}[{seen[name]}]"
            faults.add(named(f"{kind}[{index}]", name), rule, None, "Give each a name of its own.")
        seen.setdefault(name, index)


def check_part_references(tables: Sequence[object], material_names: Iterable[str], faults: FaultList) -> None:
    """Note unknown materials, and embedded_in that names no part, itself, or a part that is embedded too.

    Tables as typed, so that a part with another fault is looked at as well.
    """
    parts = [(named(f"parts[{k}]", t.get("name")), t) for k, t in enumerate(tables) if isinstance(t, Mapping)]
    hosts = {table.get("name"): table.get("embedded_in") for _, table in parts if isinstance(table.get("name"), str)}
    known = list(material_names)
    for place, table in parts:
        material, host = table.get("material"), table.get("embedded_in")
        if isinstance(material, str) and known and material not in known:
            remedy = did_you_mean(material, known)
            faults.add(f"{place}: material", "is not in [materials]", value_text(material), remedy)
        if isinstance(host, str):
            _check_host(host, table.get("name"), hosts, f"{place}: embedded_in", faults)


def _check_host(host: str, name: object, hosts: Mapping[object, object], place: str, faults: FaultList) -> None:
    others = [other for other in hosts if isinstance(other, str) and other != name]
    above = hosts.get(host)
    if host == name:
        faults.add(place, "must name another part", value_text(host), did_you_mean(None, others))
    elif host not in hosts:
        faults.add(place, "is not the name of a part", value_text(host), did_you_mean(host, others))
    elif isinstance(above, str):
        rule = f"must name a part that is not embedded itself, but {quoted(host)} is embedded in {quoted(above)}"
        faults.add(place, rule, None, "Embed both in the outer part, side by side, or cut a hole instead.")


def check_joint(joint: JointTable, place: str, part_names: Sequence[str], faults: FaultList) -> None:
    """Note names in `between` that are not parts, and parts named twice."""
    for side, names in enumerate(joint.between):
        for name in names:
            if name not in part_names:
                where = f"{place}: between[{side}]"
                faults.add(where, "is not the name of a part", value_text(name), did_you_mean(name, part_names))
    for name, count in Counter(name for names in joint.between for name in names).items():
        if count > 1 and name in part_names:
            faults.add(
                f"{place}: between", f"names {quoted(name)} twice", None, "A joint lies between different parts."
            )


def check_pairs_once(joints: Sequence[tuple[str, Joint]], faults: FaultList) -> None:
    """Note every pair of parts that two joints claim; joints with their places."""
    claimed: dict[frozenset[str], str] = {}
    for place, joint in joints:
        for pair in (frozenset((a, b)) for a in joint.first for b in joint.second if a != b):
            if pair in claimed:
                a, b = sorted(pair)
                rule = f"claims {quoted(a)} and {quoted(b)}, which {claimed[pair]} joins already"
                faults.add(f"{place}: between", rule, None, "One joint holds a pair of parts: merge the two.")
            claimed.setdefault(pair, place)


def check_use(
    parts: Sequence[PlacedPart], materials: Mapping[str, Material], faults: FaultList, also: Iterable[str | None] = ()
) -> None:
    """Caution about materials that no part uses (nor a weld, `also`), and a grain angle on a material without grain."""
    used = {placed.part.material for placed in parts} | set(also)
    for name in materials:
        if name not in used:
            faults.caution("unused material", f"{material_place(name)} is not used by any part.")
    for placed in parts:
        material = materials.get(placed.part.material)
        if placed.grain_given and material is not None and material.isotropic:
            message = f"{placed.place}: grain_angle has no effect, since material {quoted(material.name)} is isotropic."
            faults.caution("grain angle", message)
