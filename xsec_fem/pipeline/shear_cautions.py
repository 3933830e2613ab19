"""What the reader must know of the shear stress itself: which nominal stress a web's allowable is for, sums that never occur."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

import numpy as np

from xsec_fem.model.section import Part, Section, Wall
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.stress_field import SectionForces, UnitFields
from xsec_fem.results import CaseResult, Caution

_WEBBED = ("i_shape", "channel")
_UPRIGHT_DEG = 1.0  # a web leaning more than this is not that of a beam under Vz
_MAINLY = 0.1  # Vy over Vz below which V counts as that of the web
# share by which the sum of the two largest exceeds the largest of the sum, and by which torsion or shear matters at all: less is
# within what a reader would round away (common practice, no source)
_WORTH = 0.05


def shear_cautions(
    section: Section, cases: Sequence[CaseResult], fields: UnitFields, corners: Sequence[Corner]
) -> Iterator[Caution]:
    """Yield the cautions of all cases [MPa]; stresses within the stated distance of `corners` do not count."""
    cases_of: dict[str, list[str]] = {}
    for case in cases:
        sentence = _nominal_shear(section, case)
        if sentence:
            cases_of.setdefault(sentence, []).append(case.name)
    for sentence, names in cases_of.items():
        yield Caution("nominal shear", f"{', '.join(names)}: {sentence}")
    for case in cases:
        yield from _sum_of_magnitudes(section, case, fields, corners)


def _nominal_shear(section: Section, case: CaseResult) -> str:
    """V/(d t), V/(hw t) and the elastic peak differ: an allowable belongs to one of them. "" where none of them is asked for."""
    found = _the_web(section)
    Vz, Vy = abs(case.forces.Vz), abs(case.forces.Vy)
    if found is None or case.comparison is None or Vy > _MAINLY * Vz:
        return ""
    part, web = found
    tables = [wall.table for wall in case.comparison.walls if wall.name == f"{part.name}/{web.name}"]
    if not tables or tables[0] is None or part.face is None:
        return ""
    bounds, t, unit = part.face.bounds(), web.thickness, section.units.stress
    depth = bounds[3] - bounds[1]
    clear = depth - sum(wall.thickness for wall in part.walls if wall.name.endswith("flange"))
    peak = float(np.nanmax(tables[0].largest))
    return (
        f"V/(d t) = {Vz / (depth * t):.3g} {unit}, V/(hw t) = {Vz / (clear * t):.3g} {unit}, elastic peak in "
        f"{part.name}/{web.name} {peak:.3g} {unit}: say which one the allowable belongs to."
    )


def _the_web(section: Section) -> tuple[Part, Wall] | None:
    """The upright web of the only rolled part; None when there are more parts, which share V, or another shape."""
    if len(section.parts) != 1 or section.parts[0].shape not in _WEBBED:
        return None
    part = section.parts[0]
    for wall in part.walls:
        (y0, z0), (y1, z1) = wall.points[0], wall.points[-1]
        lean = math.degrees(math.atan2(abs(y1 - y0), abs(z1 - z0)))
        if wall.name == "web" and lean < _UPRIGHT_DEG:
            return part, wall
    return None


def _sum_of_magnitudes(
    section: Section, case: CaseResult, fields: UnitFields, corners: Sequence[Corner]
) -> Iterator[Caution]:
    """The largest of shear and of torsion lie at different places: their sum occurs nowhere."""
    forces = case.forces
    if not forces.T or not (forces.Vy or forces.Vz):
        return
    clear = corner_mask(fields.part_nodes.positions, corners)
    clear = clear if clear.any() else ~clear
    shear, torsion, both = (
        float(fields.combine(part).tau[clear].max())
        for part in (SectionForces(Vy=forces.Vy, Vz=forces.Vz), SectionForces(T=forces.T), forces)
    )
    if min(shear, torsion) <= _WORTH * max(shear, torsion) or shear + torsion <= (1 + _WORTH) * both:
        return
    yield Caution(
        "sum of magnitudes",
        f"{case.name}: largest |tau_V| + |tau_T| would be {shear + torsion:.3g} {section.units.stress}; the true combined largest "
        f"is {both:.3g} {section.units.stress} (different places, or other directions there).",
    )
