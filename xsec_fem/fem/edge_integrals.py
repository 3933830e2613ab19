"""Integrals along edges of the mesh: lengths, nodal weights and the mass matrix of a line of edges, curved ones included."""

from __future__ import annotations

from functools import lru_cache
from typing import Literal, overload

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import interval_rule

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@lru_cache
def local_edge_nodes(order: int) -> IntArray:
    """Return the places of the nodes of edge 0, 1, 2 in a triangle's list, shape (3, p+1), walking counter-clockwise."""
    inner = [list(range(3 + e * (order - 1), 3 + (e + 1) * (order - 1))) for e in range(3)]
    return np.array([[e, *inner[e], (e + 1) % 3] for e in range(3)])


@lru_cache
def line_basis(order: int, degree: int) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Return weights (Q,), values and derivatives, each of shape (Q, p+1), of the edge's basis at a rule of that degree [-].

    The derivatives are by the edge's parameter, 0 to 1.
    """
    rule = interval_rule(degree)
    powers = np.arange(order + 1)
    inverse = np.linalg.inv((powers[:, None] / order) ** powers)
    s = rule.points
    slopes = powers * s ** np.maximum(powers - 1, 0)
    return rule.weights, s**powers @ inverse, slopes @ inverse


@overload
def edge_nodes(mesh: Mesh, edges: Edges, chosen: IntArray) -> IntArray: ...
@overload
def edge_nodes(
    mesh: Mesh, edges: Edges, chosen: IntArray, of: IntArray, with_normals: Literal[True]
) -> tuple[IntArray, FloatArray]: ...
def edge_nodes(
    mesh: Mesh, edges: Edges, chosen: IntArray, of: IntArray | None = None, with_normals: bool = False
) -> IntArray | tuple[IntArray, FloatArray]:
    """Return the node numbers of the chosen edges (K,), shape (K, p+1), walking counter-clockwise round the triangle `of` (K,).

    `of` is one of each edge's two triangles (the first by default). With normals: also the unit normals (K, p+1, 2) at
    the nodes, out of that triangle [-].
    """
    owner = edges.triangles[chosen, 0] if of is None else of
    local = np.where(edges.triangles[chosen, 0] == owner, edges.local[chosen, 0], edges.local[chosen, 1])
    nodes: IntArray = mesh.triangles[owner[:, None], local_edge_nodes(mesh.order)[local]]
    if not with_normals:
        return nodes
    powers = np.arange(mesh.order + 1)
    inverse = np.linalg.inv((powers[:, None] / mesh.order) ** powers)
    s = powers[:, None] / mesh.order
    tangents = ((powers * s ** np.maximum(powers - 1, 0)) @ inverse) @ mesh.nodes[nodes]
    normals = np.stack([tangents[..., 1], -tangents[..., 0]], axis=-1)
    return nodes, normals / np.linalg.norm(normals, axis=-1, keepdims=True)


def _products(mesh: Mesh, nodes: IntArray) -> tuple[FloatArray, FloatArray]:
    """Lengths per quadrature point (K, Q) and the basis there (Q, p+1)."""
    weights, values, slopes = line_basis(mesh.order, 4 * mesh.order)
    speed = np.linalg.norm(slopes @ mesh.nodes[nodes], axis=-1)
    return weights * speed, values


def edge_lengths(mesh: Mesh, edges: Edges, chosen: IntArray) -> FloatArray:
    """Return the lengths of the chosen edges (K,) along their curves, shape (K,) [mm]."""
    ds, _ = _products(mesh, edge_nodes(mesh, edges, chosen))
    result: FloatArray = ds.sum(axis=1)
    return result


def edge_weights(mesh: Mesh, edges: Edges, chosen: IntArray) -> tuple[FloatArray, float]:
    """Return ∫ v_i over the chosen edges for every node (N,) [mm], and their total length [mm]."""
    nodes = edge_nodes(mesh, edges, chosen)
    ds, values = _products(mesh, nodes)
    weights = np.bincount(nodes.ravel(), (ds @ values).ravel(), minlength=len(mesh.nodes)).astype(np.float64)
    return weights, float(ds.sum())


def edge_mass_matrix(mesh: Mesh, edges: Edges, chosen: IntArray, order: IntArray) -> FloatArray:
    """Return ∫ v_i v_j over the chosen edges, shape (L, L), rows and columns by the sorted node numbers `order` (L,) [mm]."""
    nodes = edge_nodes(mesh, edges, chosen)
    ds, values = _products(mesh, nodes)
    local = np.einsum("kq,qi,qj->kij", ds, values, values)
    place = np.searchsorted(order, nodes)
    matrix = np.zeros((len(order), len(order)))
    np.add.at(matrix, (place[:, :, None], place[:, None, :]), local)
    return matrix
