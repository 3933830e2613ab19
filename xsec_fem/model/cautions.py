"""Numbers that can be read, but look like a slip: wrong units, a shear modulus that the material does not have."""

from __future__ import annotations

from xsec_fem.model.faults import FaultList
from xsec_fem.model.material_reader import material_place
from xsec_fem.model.section import Material, Section
from xsec_fem.model.wording import number_text, quoted
from xsec_fem.units import UnitSystem

# one unit of stress in MPa: 1 lbf = 4.4482216152605 N, 1 in = 25.4 mm (both exact, international yard and pound, 1959)
_MPA = {"GPa": 1e3, "MPa": 1.0, "kPa": 1e-3, "Pa": 1e-6, "ksi": 6.894757293168361, "psi": 6.894757293168361e-3}
_MM = {"mm": 1.0, "m": 1e3, "in": 25.4}
_SOFTEST, _STIFFEST = 1.0, 1.2e6  # [MPa] soft foam and single-crystal diamond, rounded; common knowledge, no source
_USUAL = (1e3, 1e6)  # [MPa] plastics to carbon fibre: where the material that was meant is looked for
# [MPa] a number in these ranges, without a G beside it, is the usual GPa number of a metal, and is also the modulus of
# some foams and rubbers: steel 190-215, aluminium 68-73, titanium 105-120 GPa (common knowledge, no source)
_METAL_NUMBERS = ((190.0, 215.0), (68.0, 73.0), (105.0, 120.0))
_TIMBER = (5e3, 20e3)  # [MPa] E along the grain of structural softwood and hardwood; EN 338:2016 has 7e3 to 24e3
_SMALLEST, _LARGEST = 1.0, 50e3  # [mm] section sizes that are built: a spring wire, a ship's hull


def add_cautions(section: Section, faults: FaultList) -> None:
    """Note what looks like a slip in a section that has no faults."""
    for material in section.materials.values():
        _check_modulus(material, section.units, faults)
        _check_shear_modulus(material, section.units, faults)
    _check_size(section, faults)


def _check_modulus(material: Material, units: UnitSystem, faults: FaultList) -> None:
    value = material.E * _MPA[units.stress]
    metal = not material.G_given and any(low <= value <= high for low, high in _METAL_NUMBERS)
    if _SOFTEST <= value <= _STIFFEST and not metal:
        return
    meant = _meant_unit(material.E, units)
    question = f"{meant}?" if meant else "is that so?"
    message = f"{material_place(material.name)}: E = {number_text(material.E)} {units.stress}: {question}"
    faults.caution("modulus", message)


def _meant_unit(value: float, units: UnitSystem) -> str:
    """The unit in which the number would be that of a usual material; those of the file's own family come first."""
    metric = ("GPa", "MPa", "kPa", "Pa")
    order = (*metric, "ksi", "psi") if units.stress in metric else ("psi", "ksi", *metric)
    usual = (unit for unit in order if unit != units.stress and _USUAL[0] <= value * _MPA[unit] <= _USUAL[1])
    return next(usual, "")


def _check_shear_modulus(material: Material, units: UnitSystem, faults: FaultList) -> None:
    value = material.E * _MPA[units.stress]
    if material.G_given or not _TIMBER[0] <= value <= _TIMBER[1]:
        return
    softwood = float(
        f"{650 / _MPA[units.stress]:.2g}"
    )  # [MPa] mean G of strength class C22 is 630, of C24 690 (EN 338)
    message = (
        f"G of {quoted(material.name)} is E/(2(1+nu)) = {material.Gxy:.4g} {units.stress}; "
        f"softwood is near {number_text(softwood)}. Give G."
    )
    faults.caution("shear modulus", message)


def _check_size(section: Section, faults: FaultList) -> None:
    boxes = [part.face.bounds() for part in section.parts if part.face is not None]
    if not boxes:
        return
    width = max(box[2] for box in boxes) - min(box[0] for box in boxes)
    height = max(box[3] for box in boxes) - min(box[1] for box in boxes)
    unit = section.units.length
    largest = max(width, height) * _MM[unit]
    if _SMALLEST <= largest <= _LARGEST:
        return
    meant = {"mm": "metres", "m": "millimetres", "in": "metres or millimetres"}[unit]
    message = f"The section is {width:.3g} x {height:.3g} in {unit}: {meant}?"
    faults.caution("size", message)
