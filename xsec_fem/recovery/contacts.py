"""Which parts touch, and along what length."""

from __future__ import annotations

import numpy as np

from xsec_fem.fem.edge_integrals import edge_lengths
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh


def find_contacts(mesh: Mesh, edges: Edges) -> tuple[tuple[str, str, float], ...]:
    """Return (part, part, length) for every pair of parts that share edges, in the order of the parts [mm]."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    parts = np.sort(mesh.part_of[edges.triangles[inner]], axis=1)
    shared = inner[parts[:, 0] != parts[:, 1]]
    if not len(shared):
        return ()
    pairs = np.sort(mesh.part_of[edges.triangles[shared]], axis=1)
    unique, number = np.unique(pairs, axis=0, return_inverse=True)
    lengths = np.bincount(number.ravel(), edge_lengths(mesh, edges, shared))
    names = mesh.part_names
    return tuple((names[a], names[b], float(length)) for (a, b), length in zip(unique, lengths, strict=True))
