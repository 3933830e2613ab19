"""Assembly of the one matrix, ∫ G grad u . grad v, and of load vectors, ∫ s v + ∫ q . grad v.

The element matrices of a batch are one matrix product: C (m, 3Q) @ S (3Q, n²) with C = w det J^-1 G J^-T at the points
(one integrated S when the sides are straight), S the products of reference gradients.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt
import scipy.sparse as sp

from xsec_fem.fem.mapping import Batch, batches
from xsec_fem.fem.mesh import Mesh

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


def _gradient_products(batch: Batch) -> FloatArray:
    """(Q, 3, n²): products of reference gradients for the components yy, yz + zy, zz of C."""
    g = batch.element.gradients(batch.rule.points)
    outer = np.einsum("qia,qjb->qabij", g, g)
    products = np.stack([outer[:, 0, 0], outer[:, 0, 1] + outer[:, 1, 0], outer[:, 1, 1]], axis=1)
    return products.reshape(len(g), 3, -1)


def element_stiffness(batch: Batch, G: FloatArray) -> FloatArray:
    """Return the element matrices ∫ G grad v_i . grad v_j of a batch, shape (m, n²); G (P, 2, 2) per part [MPa]."""
    products = _gradient_products(batch)
    j, g = batch.jacobian, G[batch.part][:, None]
    # rows of adj(J): r0 = (J11, -J01), r1 = (-J10, J00); C_ab = r_a . G r_b / det
    r0 = (j[..., 1, 1], -j[..., 0, 1])
    r1 = (-j[..., 1, 0], j[..., 0, 0])

    def form(a: tuple[FloatArray, FloatArray], b: tuple[FloatArray, FloatArray]) -> FloatArray:
        result: FloatArray = (
            a[0] * (g[..., 0, 0] * b[0] + g[..., 0, 1] * b[1]) + a[1] * (g[..., 1, 0] * b[0] + g[..., 1, 1] * b[1])
        ) / batch.det
        return result

    c = np.stack([form(r0, r0), form(r0, r1), form(r1, r1)], axis=-1)  # (m, Q or 1, 3)
    weighted = batch.rule.weights[:, None, None] * products
    table = weighted.sum(axis=0) if c.shape[1] == 1 else weighted.reshape(-1, products.shape[2])
    result: FloatArray = c.reshape(len(c), -1) @ table
    return result


def stiffness_matrix(mesh: Mesh, G: FloatArray, numbering: IntArray) -> sp.csc_matrix:
    """Return ∫ G grad u . grad v over the mesh as an (N, N) sparse matrix; G (P, 2, 2) per part [MPa].

    Row and column of node i are numbering[i], so that the matrix comes out in the order it will be factorised in.
    """
    n = mesh.triangles.shape[1]
    index = numbering.astype(np.int32)
    rows = np.empty((len(mesh.triangles), n * n), np.int32)
    cols = np.empty_like(rows)
    data = np.empty(rows.shape)
    start = 0
    for batch in batches(mesh):
        stop = start + len(batch.elements)
        nodes = index[batch.nodes]
        rows[start:stop] = np.repeat(nodes, n, axis=1)
        cols[start:stop] = np.tile(nodes, n)
        data[start:stop] = element_stiffness(batch, G)
        start = stop
    size = len(mesh.nodes)
    return sp.coo_matrix((data.ravel(), (rows.ravel(), cols.ravel())), shape=(size, size)).tocsc()


def element_loads(batch: Batch, scalar: FloatArray | None, flux: FloatArray | None) -> FloatArray:
    """Return ∫ s v_i + ∫ q . grad v_i of a batch, shape (m, n, k) [unit of q times mm].

    scalar : (m, Q, k) values of s at the rule's points [unit of q per mm], or None for zero.
    flux : (m, Q, k, 2) values of q there, or None for zero. ValueError when both are None.
    """
    parts: list[FloatArray] = []
    weights = batch.rule.weights
    if scalar is not None:
        parts.append((batch.shape_values.T * weights) @ (scalar * batch.det[:, :, None]))
    if flux is not None:
        q = batch.flux(flux)
        gradients = (batch.element.gradients(batch.rule.points) * weights[:, None, None]).transpose(
            2, 1, 0
        )  # (2, n, Q)
        parts.append(gradients[0] @ q[..., 0] + gradients[1] @ q[..., 1])
    if not parts:
        raise ValueError(f"a load needs a scalar or a flux (got {scalar!r} and {flux!r})")
    return parts[0] if len(parts) == 1 else parts[0] + parts[1]


def add_at_nodes(total: FloatArray, nodes: IntArray, values: FloatArray) -> None:
    """Add element values (m, n, k) into nodal totals (N, k), in place; `nodes` (m, n) are their numbers."""
    where = nodes.ravel()
    for column in range(total.shape[1]):
        total[:, column] += np.bincount(where, values[..., column].ravel(), minlength=len(total))
