"""One body, and which parts touch: what the mesh says of the parts' connections."""

from __future__ import annotations

import numpy as np

from xsec_fem.errors import Fault, InputError
from xsec_fem.fem.edges import Edges, connected_bodies
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.connections import Connections
from xsec_fem.model.section import Joint, Section
from xsec_fem.recovery.contacts import find_contacts, find_slits
from xsec_fem.results import Contact


def require_one_body(section: Section, mesh: Mesh, edges: Edges) -> None:
    """Raise InputError when the triangles form several bodies; the message names the parts of each."""
    body = connected_bodies(mesh, edges)
    count = int(body.max()) + 1
    if count == 1:
        return
    bodies = [sorted({mesh.part_names[part] for part in np.unique(mesh.part_of[body == k])}) for k in range(count)]
    text = " | ".join(", ".join(names) for names in bodies)
    causes = [joint.name for joint in section.joints if joint.is_slit and _parts_bodies(joint, bodies)]
    if causes:
        text += f"; held together only by the faces that {' and '.join(repr(name) for name in causes)} lets slide"
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


def _parts_bodies(joint: Joint, bodies: list[list[str]]) -> bool:
    """True when the joint's two sides lie in different bodies."""
    where = [{k for k, names in enumerate(bodies) if set(names) & set(side)} for side in (joint.first, joint.second)]
    return len(where[0] | where[1]) > 1


def named_contacts(section: Section, mesh: Mesh, edges: Edges) -> tuple[Contact, ...]:
    """Return the pairs of parts that touch, their length [mm], its unbonded share, and the joint that claims the pair."""
    bonded = {(first, second): length for first, second, length in find_contacts(mesh, edges)}
    slit, connections = find_slits(mesh, edges), Connections.of(section)
    pairs = [
        (first, second)
        for k, first in enumerate(mesh.part_names)
        for second in mesh.part_names[k + 1 :]
        if (first, second) in bonded or (first, second) in slit
    ]
    return tuple(
        Contact(pair, bonded.get(pair, 0.0) + slit.get(pair, 0.0), connections.joint_between(pair), slit.get(pair, 0.0))
        for pair in pairs
    )
