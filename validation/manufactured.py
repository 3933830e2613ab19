"""Manufactured solutions for the kernel: u is given, the load is ∫ q . grad v with q = G grad u (and ∫ s v for a source s).

Any u that is continuous solves its own problem, whatever G jumps; so u has a kink where two materials meet. Nothing here knows
the theory of beams. Orders: P. J. Roache, Code verification by the method of manufactured solutions, J. Fluids Eng. 124, 2002;
p + 1 in L2 and p in the energy norm for degree p (any text on finite elements).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.assembly import add_at_nodes, element_loads, stiffness_matrix
from xsec_fem.fem.dissection import dissection_numbering
from xsec_fem.fem.linear_solve import factorise
from xsec_fem.fem.mapping import batches, map_points, physical_gradients
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import triangle_rule
from xsec_fem.theory.moduli import rotated_tensor

from . import structured_meshes

FloatArray = npt.NDArray[np.float64]
Field = Callable[[FloatArray], FloatArray]  # points (..., 2) -> (...) or (..., 2)

TENSOR = rotated_tensor(3.0, 0.8, 25.0)
SOFTER = rotated_tensor(0.9, 0.3, -40.0)


def wave(x: FloatArray) -> FloatArray:
    """sin(1.3 y + 0.4) exp(0.7 z)."""
    return np.asarray(np.sin(1.3 * x[..., 0] + 0.4) * np.exp(0.7 * x[..., 1]))


def wave_gradient(x: FloatArray) -> FloatArray:
    """Its gradient, (..., 2)."""
    s, c, e = np.sin(1.3 * x[..., 0] + 0.4), np.cos(1.3 * x[..., 0] + 0.4), np.exp(0.7 * x[..., 1])
    return np.stack([1.3 * c * e, 0.7 * s * e], axis=-1)


def kinked(x: FloatArray) -> FloatArray:
    """The wave, and y cos(2 z) on the right of y = 0 only."""
    return wave(x) + np.where(x[..., 0] > 0, x[..., 0] * np.cos(2 * x[..., 1]), 0.0)


def kinked_gradient(x: FloatArray) -> FloatArray:
    """Its gradient on either side."""
    right = np.stack([np.cos(2 * x[..., 1]), -2 * x[..., 0] * np.sin(2 * x[..., 1])], axis=-1)
    return wave_gradient(x) + np.where(x[..., :1] > 0, right, 0.0)


@dataclass(frozen=True)
class Problem:
    """Meshes of n cells a side and degree p, G of each part (P, 2, 2), u and its gradient."""

    name: str
    mesh: Callable[[int, int], Mesh]
    G: FloatArray
    u: Field
    gradient: Field


def _ring(n: int, p: int) -> Mesh:
    return structured_meshes.ring_sector(0.5, 1.2, (10, 100), n, n, p)


def _two_parts(n: int, p: int) -> Mesh:
    lines = np.linspace(-0.8, 0.8, 2 * n + 1)

    def side(y: FloatArray, z: FloatArray) -> FloatArray:
        return np.where(y > 0, 1, 0)

    return structured_meshes.grid(lines, np.linspace(-0.6, 0.6, n + 1), p, side, ("left", "right"))


def _turned(n: int, p: int) -> Mesh:
    return structured_meshes.moved(structured_meshes.rectangle(1.5, 1.0, n, n, p), 20, 1.0, (0.3, -0.2))


PROBLEMS = (
    Problem("straight sides, one tensor G", _turned, TENSOR[None], wave, wave_gradient),
    Problem("curved sides, one tensor G", _ring, TENSOR[None], wave, wave_gradient),
    Problem("two materials, a tensor each", _two_parts, np.stack([TENSOR, SOFTER]), kinked, kinked_gradient),
)


def solution(mesh: Mesh, G: FloatArray, flux: Field | None = None, source: Field | None = None) -> FloatArray:
    """Return u_h (N, 1) for G (P, 2, 2), G grad u as `flux` and -div as `source`."""
    loads = np.zeros((len(mesh.nodes), 1))
    for batch in batches(mesh):
        scalar = None if source is None else source(batch.points)[..., None]
        vector = None
        if flux is not None:
            vector = np.einsum("mij,mqj->mqi", G[batch.part], flux(batch.points))[:, :, None]
        add_at_nodes(loads, batch.nodes, element_loads(batch, scalar, vector))
    # a source need not cancel to round-off under quadrature; the difference is of the order of the error
    loads -= loads.mean()
    numbering = dissection_numbering(mesh)
    factor = factorise(stiffness_matrix(mesh, G, numbering), numbering, 0)
    return factor.solve(loads, np.abs(loads).sum(axis=0), ("manufactured",))[0]


def errors(mesh: Mesh, u_h: FloatArray, u: Field, gradient: Field) -> tuple[float, float]:
    """Return the L2 error up to a constant and the L2 error of the gradient, by a rule of degree 2p + 6."""
    rule = triangle_rule(2 * mesh.order + 6)
    elements = np.arange(len(mesh.triangles))
    x, jacobian, det = map_points(mesh, elements, rule.points, straight=False)
    weights = rule.weights * det
    values = u_h[mesh.triangles][..., 0] @ mesh.element.values(rule.points).T
    slopes = physical_gradients(mesh.element, rule.points, u_h[mesh.triangles], jacobian, det)[:, :, 0]
    difference = values - u(x)
    difference -= (weights * difference).sum() / weights.sum()
    square = ((slopes - gradient(x)) ** 2).sum(axis=-1)
    return float(np.sqrt((weights * difference**2).sum())), float(np.sqrt((weights * square).sum()))


def observed_orders(problem: Problem, order: int, cells: Sequence[int]) -> FloatArray:
    """Return the orders in L2 and in the energy norm between two meshes of cells[0] and cells[1] a side."""
    found = []
    for n in cells:
        mesh = problem.mesh(n, order)
        found.append(errors(mesh, solution(mesh, problem.G, flux=problem.gradient), problem.u, problem.gradient))
    return np.asarray(np.log(np.divide(found[0], found[1])) / np.log(cells[1] / cells[0]))
