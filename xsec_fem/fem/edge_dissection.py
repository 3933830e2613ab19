"""Nested dissection for unknowns on edges: the same halvings of the triangles as for unknowns at nodes."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.dissection import _LEAF, _bisection_codes
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh

IntArray = npt.NDArray[np.int64]


def edge_numbering(mesh: Mesh, edges: Edges) -> IntArray:
    """Return the place of each edge in the elimination order, a permutation of shape (K,).

    An edge between two sets of triangles comes after both, as in `xsec_fem.fem.dissection`.
    """
    levels = max(0, int(np.floor(np.log2(max(len(mesh.triangles), 1) / _LEAF))))
    codes = _bisection_codes(mesh, levels)
    first = codes[edges.triangles[:, 0]]
    second = np.where(edges.triangles[:, 1] >= 0, codes[edges.triangles[:, 1]], first)
    # bits below the first difference are filled with ones: the edge goes behind everything in the set it separates
    below = np.frexp((first ^ second).astype(np.float64))[1].astype(np.int64)
    last = np.maximum(first, second) | ((np.int64(1) << below) - 1)
    order = np.lexsort((below, last))
    numbering = np.empty(len(order), np.int64)
    numbering[order] = np.arange(len(order))
    return numbering
