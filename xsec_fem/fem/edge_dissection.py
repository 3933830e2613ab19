"""Nested dissection for unknowns on edges: the same halvings of the triangles as for unknowns at nodes."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.dissection import bisection_codes, place_behind_sets
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh

IntArray = npt.NDArray[np.int64]


def edge_numbering(mesh: Mesh, edges: Edges) -> IntArray:
    """Return the place of each edge in the elimination order, a permutation of shape (K,).

    An edge between two sets of triangles comes after both, as in `xsec_fem.fem.dissection`.
    """
    codes = bisection_codes(mesh)
    first = codes[edges.triangles[:, 0]]
    second = np.where(edges.triangles[:, 1] >= 0, codes[edges.triangles[:, 1]], first)
    return place_behind_sets(np.minimum(first, second), np.maximum(first, second))
