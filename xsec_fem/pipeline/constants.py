"""From the section's materials to the theory's moduli, and from stiffnesses to the constants over the reference material."""

from __future__ import annotations

import numpy as np

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Material, Section
from xsec_fem.results import Properties
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.moduli import Moduli, rotated_tensor
from xsec_fem.theory.stiffness import ShearStiffness, section_stiffness


def moduli_of(section: Section, mesh: Mesh) -> Moduli:
    """Return E, G and nu per part of the mesh, (P,), (P, 2, 2) and (P, 2, 2) [MPa, -]; nu = 0 when [solve] says so."""
    by_name = {part.name: part for part in section.parts}
    parts = [by_name[name] for name in mesh.part_names]
    materials = [section.materials[part.material] for part in parts]
    moduli = Moduli(
        np.array([material.E for material in materials]),
        np.array([rotated_tensor(m.Gxy, m.Gxz, p.grain_angle) for m, p in zip(materials, parts, strict=True)]),
        np.array([rotated_tensor(m.nu_xy, m.nu_xz, p.grain_angle) for m, p in zip(materials, parts, strict=True)]),
    )
    return moduli if section.solve.nu_effect else moduli.without_nu()


def reference_material(section: Section, mesh: Mesh, area: AreaProperties) -> Material:
    """Return the material that carries the largest share of EA."""
    share: dict[str, float] = {}
    by_name = {part.name: section.materials[part.material] for part in section.parts}
    for name, part_area in zip(mesh.part_names, area.part_areas, strict=True):
        material = by_name[name]
        share[material.name] = share.get(material.name, 0.0) + material.E * float(part_area)
    return section.materials[max(share, key=lambda name: share[name])]


def section_properties(
    section: Section, mesh: Mesh, moduli: Moduli, area: AreaProperties, stiffness: ShearStiffness
) -> Properties:
    """Return the constants over the reference material, in the file's axes [mm, N, MPa]; G_ref = (Gxy + Gxz)/2 if they differ."""
    material = reference_material(section, mesh, area)
    E, G = material.E, (material.Gxy + material.Gxz) / 2
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
        reference_material=material.name,
    )  # fmt: skip
