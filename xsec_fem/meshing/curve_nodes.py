"""Nodes of the elevated edges on the exact curves, by gmsh's own parametrisation of each curve."""

from __future__ import annotations

from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.meshing.high_order import CurvedEdges

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


def curved_edges(gmsh: Any, number_of: IntArray, order: int) -> CurvedEdges:
    """Return the edges on curves that are not straight lines, with nodes at equal steps of the curve's parameter.

    Arrays are shaped as in CurvedEdges, coordinates are gmsh's. `number_of` maps a gmsh node tag to a node number, -1 for a
    node that no triangle uses. Raises MeshingError when gmsh's nodes do not follow a curve's parameter.
    """
    ends, nodes = [np.zeros((0, 2), np.int64)], [np.zeros((0, order - 1, 2))]
    for _, curve in gmsh.model.getEntities(1):
        if order > 1 and gmsh.model.getType(1, curve) != "Line":
            pairs, parameters = _edge_parameters(gmsh, curve)
            if len(pairs) and (number_of[pairs] >= 0).all():
                ends.append(number_of[pairs])
                nodes.append(_evaluate(gmsh, curve, parameters, order))
    return CurvedEdges(np.vstack(ends), np.vstack(nodes))


def _edge_parameters(gmsh: Any, curve: int) -> tuple[IntArray, FloatArray]:
    """Node tags (E, 2) and parameters (E, 2) of the line elements of one curve; gmsh lets them walk along it.

    Only the nodes inside the curve tell their parameter. An end is where the curve's range begins or stops, which
    also settles the two parameters of the vertex of a closed curve.
    """
    pairs = np.asarray(gmsh.model.mesh.getElementsByType(1, curve)[1], np.int64).reshape(-1, 2)
    tags, _, at = gmsh.model.mesh.getNodes(1, curve, includeBoundary=False, returnParametricCoord=True)
    inner = np.asarray(tags, np.int64)
    order = np.argsort(inner, kind="stable")
    (low,), (high,) = gmsh.model.getParametrizationBounds(1, curve)
    parameters = np.broadcast_to([low, high], pairs.shape).copy()
    inside = np.isin(pairs, inner)
    parameters[inside] = np.asarray(at, float)[order][np.searchsorted(inner[order], pairs[inside])]
    if (parameters[:, 0] >= parameters[:, 1]).any():
        raise MeshingError(f"gmsh's nodes on curve {curve} do not follow its parameter from {low:.6g} to {high:.6g}")
    return pairs, parameters


def _evaluate(gmsh: Any, curve: int, parameters: FloatArray, order: int) -> FloatArray:
    steps = np.arange(1, order) / order
    at = parameters[:, :1] + steps * (parameters[:, 1:] - parameters[:, :1])
    values = np.asarray(gmsh.model.getValue(1, curve, at.ravel())).reshape(-1, 3)
    return values[:, :2].reshape(len(at), order - 1, 2)
