"""From the section's materials to the theory's moduli, part by part."""

from __future__ import annotations

import numpy as np

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Section
from xsec_fem.theory.moduli import Moduli, rotated_tensor


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
