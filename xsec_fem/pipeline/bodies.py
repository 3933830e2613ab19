"""One body, and which parts touch: what the mesh says of the parts' connections."""

from __future__ import annotations

import numpy as np

from xsec_fem.errors import Fault, InputError
from xsec_fem.fem.edges import Edges, connected_bodies
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Section
from xsec_fem.recovery.contacts import find_contacts
from xsec_fem.results import Contact


def require_one_body(section: Section, mesh: Mesh, edges: Edges) -> None:
    """Raise InputError when the triangles form several bodies; the message names the parts of each."""
    body = connected_bodies(mesh, edges)
    count = int(body.max()) + 1
    if count == 1:
        return
    bodies = [sorted({mesh.part_names[part] for part in np.unique(mesh.part_of[body == k])}) for k in range(count)]
    text = " | ".join(", ".join(names) for names in bodies)
    raise InputError(
        [
            Fault(
                section.path.name if section.path else "",
                "parts",
                f"must form one body, but there are {count} that would bend apart: {text}",
                None,
                "Move the parts so that they touch, or join them",
            )
        ]
    )


def named_contacts(section: Section, mesh: Mesh, edges: Edges) -> tuple[Contact, ...]:
    """Return the pairs of parts that touch, their length [mm] and the joint that claims the pair, if one does."""
    result = []
    for first, second, length in find_contacts(mesh, edges):
        claims = (
            joint.name
            for joint in section.joints
            if (first in joint.first and second in joint.second) or (second in joint.first and first in joint.second)
        )
        result.append(Contact((first, second), length, next(claims, None)))
    return tuple(result)
