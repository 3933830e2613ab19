"""Section files as text, for cases: a few keys from Python values to TOML."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

Table = Mapping[str, Any]  # of numbers, texts, lists of them and tables; `toml` refuses anything else

E_UNIT = 2.0  # E of the sections whose results do not depend on it


def section_text(
    title: str,
    parts: Sequence[Table],
    *,
    nu: float = 0.0,
    E: float = E_UNIT,
    G: float | None = None,
    materials: Mapping[str, Table] | None = None,
    actions: Sequence[Table] = (),
    solve: Table | None = None,
    units: str = "N mm",
    **lists: Sequence[Table],
) -> str:
    """Return a section file.

    Parts get the name "part 1", ... and the material "m" where they give none; "m" has E, nu and, when given, G, unless
    `materials` stand for themselves. `lists` are joints, cuts or probes. Lengths and forces in the file's units.
    """
    given = materials or {"m": {"E": E, "nu": nu} | ({} if G is None else {"G": G})}
    lines = [f"title = {toml(title)}", f"units = {toml(units)}", ""]
    for name, table in given.items():
        lines += _table(f"[materials.{toml(name)}]", table)
    first = next(iter(given))
    for number, part in enumerate(parts, 1):
        lines += _table("[[parts]]", {"name": f"part {number}", "material": first, **part})
    for key, tables in {**lists, "actions": actions}.items():
        for table in tables:
            lines += _table(f"[[{key}]]", table)
    if solve:
        lines += _table("[solve]", solve)
    return "\n".join(lines)


def shear(name: str = "V", *, Vy: float = 0.0, Vz: float = 0.0) -> Table:
    """Return a load case of shear through the shear centre [N]; it has no twist at the mean."""
    return {"name": name, "Vy": Vy, "Vz": Vz, "load_point": "shear centre"}


def twist(T: float = 1.0, name: str = "T") -> Table:
    """Return a load case of torsion [N mm]."""
    return {"name": name, "T": T}


def toml(value: object) -> str:
    """Return a value as TOML; numbers keep all their digits. Raises TypeError for what a section file cannot hold."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        return '"' + value.replace("\\", "\\\\").replace('"', '\\"') + '"'
    if isinstance(value, int | float):
        return repr(float(value) if isinstance(value, float) else int(value))
    if isinstance(value, Mapping):
        return "{" + ", ".join(f"{key} = {toml(entry)}" for key, entry in value.items()) + "}"
    if isinstance(value, Sequence):
        return "[" + ", ".join(toml(entry) for entry in value) + "]"
    raise TypeError(f"cannot be written in a section file: {value!r}")


def _table(head: str, table: Table) -> list[str]:
    return [head, *(f"{key} = {toml(value)}" for key, value in table.items()), ""]
