"""Which parts touch, and along what length."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edge_integrals import edge_lengths
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.slits import facing_edges

IntArray = npt.NDArray[np.int64]


def find_contacts(mesh: Mesh, edges: Edges) -> tuple[tuple[str, str, float], ...]:
    """Return (part, part, length) for every pair of parts that share edges, in the order of the parts [mm]."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    found = _lengths(mesh, edges, inner, mesh.part_of[edges.triangles[inner]])
    return tuple((a, b, length) for (a, b), length in found.items())


def find_slits(mesh: Mesh, edges: Edges) -> dict[tuple[str, str], float]:
    """Return the length along which pairs of parts lie on each other without being bonded, in the order of the parts [mm]."""
    pairs = facing_edges(mesh, edges)
    return _lengths(mesh, edges, pairs[:, 0], mesh.part_of[edges.triangles[pairs, 0]])


def _lengths(mesh: Mesh, edges: Edges, chosen: IntArray, parts: IntArray) -> dict[tuple[str, str], float]:
    """Total length of the chosen edges (K,) by the parts (K, 2) on their two sides, two different ones."""
    differ = parts[:, 0] != parts[:, 1]
    if not differ.any():
        return {}
    unique, number = np.unique(np.sort(parts[differ], axis=1), axis=0, return_inverse=True)
    lengths = np.bincount(number.ravel(), edge_lengths(mesh, edges, chosen[differ]))
    names = mesh.part_names
    return {(names[a], names[b]): float(length) for (a, b), length in zip(unique, lengths, strict=True)}
