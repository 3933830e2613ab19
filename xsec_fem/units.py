"""The four unit systems of a section file: names to print beside numbers. Nothing is ever converted."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class UnitSystem:
    """One consistent set of units.

    Attributes
    ----------
    name : as written in the section file, "N mm".
    length, force : the two base units.
    stress : force per length squared under its trade name (N/mm² is MPa).
    moment : force times length.
    """

    name: str
    length: str
    force: str
    stress: str
    moment: str

    def power(self, exponent: int) -> str:
        """Return the unit of length to a power, for example 'mm⁴' (exponent 1 to 6)."""
        return self.length + ("" if exponent == 1 else "⁰¹²³⁴⁵⁶"[exponent])

    @property
    def flow(self) -> str:
        """Unit of a shear flow, force per length."""
        return f"{self.force}/{self.length}"


UNIT_SYSTEMS: dict[str, UnitSystem] = {
    system.name: system
    for system in (
        UnitSystem("N mm", "mm", "N", "MPa", "N mm"),
        UnitSystem("kN m", "m", "kN", "kPa", "kN m"),
        UnitSystem("lbf in", "in", "lbf", "psi", "lbf in"),
        UnitSystem("kip in", "in", "kip", "ksi", "kip in"),
    )
}
