"""From the section's materials to the theory's moduli, and from stiffnesses to the constants over the reference material."""

from __future__ import annotations

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.outline import Line
from xsec_fem.model.section import Material, Section
from xsec_fem.pipeline.solution import Solution
from xsec_fem.results import Certificate, Properties
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.stiffness import section_stiffness


def reference_material(section: Section, mesh: Mesh, area: AreaProperties) -> Material:
    """Return the material that carries the largest share of EA."""
    share: dict[str, float] = {}
    by_name = {part.name: section.materials[part.material] for part in section.parts}
    for name, part_area in zip(mesh.part_names, area.part_areas, strict=True):
        material = by_name[name]
        share[material.name] = share.get(material.name, 0.0) + material.E * float(part_area)
    return section.materials[max(share, key=lambda name: share[name])]


def _reference_moduli(section: Section, solution: Solution) -> tuple[str, float, float]:
    """Name, E and G = (Gxy + Gxz)/2 of the reference material [MPa]."""
    material = reference_material(section, solution.mesh, solution.warping.problem.area)
    return material.name, material.E, (material.Gxy + material.Gxz) / 2


def section_properties(section: Section, solution: Solution) -> Properties:
    """Return the constants over the reference material, in the file's axes [mm, N, MPa]; G_ref = (Gxy + Gxz)/2."""
    name, E, G = _reference_moduli(section, solution)
    area, stiffness = solution.warping.problem.area, solution.stiffness
    alpha, EIu, EIv = area.principal
    yc, zc = (float(value) for value in area.centroid)
    flexibility = stiffness.shear_flexibility
    return Properties(
        A=area.EA / E, yc=yc, zc=zc,
        Iyy=area.EIyy / E, Izz=area.EIzz / E, Iyz=area.EIyz / E, alpha_deg=alpha, Iu=EIu / E, Iv=EIv / E,
        IT=stiffness.GIT / G, Iw=stiffness.EIw / E,
        ysc=yc + float(stiffness.shear_centre[0]), zsc=zc + float(stiffness.shear_centre[1]),
        ysc_trefftz=yc + float(stiffness.trefftz_centre[0]), zsc_trefftz=zc + float(stiffness.trefftz_centre[1]),
        Asy=1 / (G * float(flexibility[0, 0])), Asz=1 / (G * float(flexibility[1, 1])),
        shear_flexibility=tuple(tuple(row) for row in flexibility.tolist()),
        EA=area.EA, EIyy=area.EIyy, EIzz=area.EIzz, EIyz=area.EIyz, GIT=stiffness.GIT, EIw=stiffness.EIw,
        stiffness=tuple(tuple(row) for row in section_stiffness(area, stiffness).tolist()),
        reference_material=name,
    )  # fmt: skip


def _has_curves(section: Section) -> bool:
    """True when a drawn part has an arc in its outline."""
    loops = (loop for part in section.parts if part.face is not None for loop in part.face.loops)
    return any(not isinstance(segment, Line) for loop in loops for segment in loop.segments)


def certificate_over_reference(section: Section, solution: Solution) -> Certificate | None:
    """Return the guaranteed intervals of the constants as `section_properties` gives them [mm, mm², mm⁴]; None without bounds."""
    if solution.bounds is None:
        return None
    _, _, G = _reference_moduli(section, solution)
    proof = solution.bounds.certificate
    reasons = [proof.reason] if proof.reason else []
    if not solution.mesh.curved.any() and _has_curves(section):
        reasons.append("straight-sided triangles stand for curved sides")
    yc, zc = (float(value) for value in solution.warping.problem.area.centroid)

    def over(interval: tuple[float, float]) -> tuple[float, float]:
        return interval[0] / G, interval[1] / G

    def at(interval: tuple[float, float], centroid: float) -> tuple[float, float]:
        return interval[0] + centroid, interval[1] + centroid

    return Certificate(
        dict(proof.energy_error), over(proof.GIT), over(proof.GAsy), over(proof.GAsz), proof.coupling,
        at(proof.ysc_trefftz, yc), at(proof.zsc_trefftz, zc), at(proof.ysc, yc), at(proof.zsc, zc),
        not reasons, "; ".join(reasons),
    )  # fmt: skip
