"""A general-purpose library solves the same three Neumann problems on the same mesh, with forms of its own.

Same triangles, same degree, so the same discrete solution: constants must agree to round-off times the condition number.
Nothing but the mesh and the moduli is shared; the weak forms are written from the equations, flexure as one problem, not two.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
import pytest

from tests import structured
from tests.chain import Solved, stacked
from xsec_fem.theory.moduli import Moduli, rotated_tensor

skfem = pytest.importorskip("skfem")

AGREEMENT = 1e-11  # relative; 3e-13 and better is seen


def unsymmetric_section(order: int) -> Solved:
    """An unequal angle with a board of another, anisotropic material on one leg, turned by 17 degrees."""

    def part(y: np.ndarray, z: np.ndarray) -> np.ndarray:
        return np.where(z > 8, 1, np.where((y < 1) | (z < 1.5), 0, -1))

    mesh = structured.grid([0, 1, 3, 5], [0, 0.75, 1.5, 4, 6, 8, 9], order, part, ("angle", "board"))
    mesh = structured.moved(mesh, 17.0, 1.0, (2.0, -1.0))
    board = Moduli(np.array([11.0]), rotated_tensor(0.9, 0.2, 40.0)[None], rotated_tensor(0.4, 0.1, 40.0)[None])
    return Solved(mesh, stacked([Moduli.isotropic(70.0, 0.33), board]))


@dataclass(frozen=True)
class Opinion:
    GIT: float
    flexibility: np.ndarray
    shear_centre: np.ndarray
    trefftz_centre: np.ndarray
    EIw: float


def other_library(section: Solved) -> Opinion:
    """Warping problems on the same vertices by scikit-fem."""
    mesh, moduli = section.mesh, section.moduli
    vertex, renumbered = np.unique(mesh.triangles[:, :3], return_inverse=True)
    corners = renumbered.reshape(-1, 3).T.copy()
    # degrees 3 and 4 of that library need the corners of each triangle sorted; the triangles stay in their order
    other = skfem.MeshTri(mesh.nodes[vertex].T.copy(), corners, sort_t=True, validate=False)
    element = {1: skfem.ElementTriP1, 2: skfem.ElementTriP2, 3: skfem.ElementTriP3, 4: skfem.ElementTriP4}[mesh.order]()
    basis = skfem.CellBasis(other, element, intorder=max(2 * mesh.order, 4))
    E = moduli.E[mesh.part_of][:, None]
    G = moduli.G[mesh.part_of].transpose(1, 2, 0)[..., None]
    N = moduli.nu[mesh.part_of].transpose(1, 2, 0)[..., None]
    x, dx = np.asarray(basis.global_coordinates()), basis.dx

    def over(values: np.ndarray) -> float:
        return float((values * dx).sum())

    EA = over(E * np.ones_like(dx))
    r = x - np.array([over(E * x[0]), over(E * x[1])])[:, None, None] / EA
    EI = np.array([[over(E * r[i] * r[j]) for j in (0, 1)] for i in (0, 1)])

    @skfem.BilinearForm
    def stiffness(u: Any, v: Any, w: Any) -> Any:
        return np.einsum("ij...,j...,i...->...", np.broadcast_to(G, (2, 2, *dx.shape)), u.grad, v.grad)

    K = stiffness.assemble(basis).tocsc()

    def solve(body: np.ndarray, strain: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
        """tau = G (grad u + strain) with div tau = -body; returns u at points, strains and stresses."""

        @skfem.LinearForm
        def load(v: Any, w: Any) -> Any:
            return body * v - np.einsum("ij...,j...,i...->...", G, strain, v.grad)

        u = skfem.solve(*skfem.condense(K, load.assemble(basis), D=np.array([0])))
        field = basis.interpolate(u)
        gamma = np.asarray(field.grad) + strain
        return np.asarray(field), gamma, np.einsum("ij...,j...->i...", G, gamma)

    def flexure(force: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        a = np.linalg.solve(EI, force)
        along = np.einsum("i,i...->...", a, r)
        Nr = np.einsum("ij...,j...->i...", N, r)
        d = along * Nr - 0.5 * (r * Nr).sum(axis=0) * a[:, None, None]
        _, gamma, tau = solve(E * along, -d)
        return gamma, tau

    omega, twist, torsion = solve(np.zeros_like(dx), np.stack([-r[1], r[0]]))
    GIT = over((twist * torsion).sum(axis=0))
    fields = [flexure(np.array([1.0, 0.0])), flexure(np.array([0.0, 1.0])), (twist / GIT, torsion / GIT)]
    flexibility = np.array([[over((g * t).sum(axis=0)) for _, t in fields] for g, _ in fields])
    torque = [over(r[0] * t[1] - r[1] * t[0]) for _, t in fields[:2]]
    omega = omega - over(E * omega) / EA
    zsc, minus_ysc = np.linalg.solve(EI, [over(E * omega * r[0]), over(E * omega * r[1])])
    sectorial = omega - minus_ysc * r[1] - zsc * r[0]
    return Opinion(
        GIT, flexibility, np.array([torque[1], -torque[0]]), np.array([-minus_ysc, zsc]), over(E * sectorial**2)
    )


@pytest.mark.parametrize("order", [1, 2, 3, 4])
def test_same_discrete_solution(order: int) -> None:
    section = unsymmetric_section(order)
    opinion, stiffness = other_library(section), section.stiffness
    assert pytest.approx(opinion.GIT, rel=AGREEMENT) == stiffness.GIT
    assert stiffness.EIw == pytest.approx(opinion.EIw, rel=AGREEMENT)
    scale = np.sqrt(np.outer(*2 * [np.diag(opinion.flexibility)]))
    np.testing.assert_allclose(stiffness.flexibility / scale, opinion.flexibility / scale, atol=AGREEMENT)
    np.testing.assert_allclose(stiffness.shear_centre, opinion.shear_centre, rtol=AGREEMENT)
    np.testing.assert_allclose(stiffness.trefftz_centre, opinion.trefftz_centre, rtol=AGREEMENT)
    # the section is truly unsymmetric, so that no term can hide
    assert np.abs(np.corrcoef(stiffness.shear_flexibility)).min() > 0.01
    assert np.linalg.norm(stiffness.shear_centre - stiffness.trefftz_centre) > 1e-3
