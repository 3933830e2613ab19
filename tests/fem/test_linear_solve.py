"""The Neumann system: null space owned, incompatible and singular systems raised."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.sparse as sp

from tests import structured
from xsec_fem.errors import SolveError
from xsec_fem.fem.assembly import stiffness_matrix
from xsec_fem.fem.dissection import dissection_numbering
from xsec_fem.fem.linear_solve import RESIDUAL_LIMIT, NeumannFactor, factorise
from xsec_fem.fem.mesh import Mesh

IDENTITY = np.eye(2)[None]


def factor_of(mesh: Mesh, pinned: int = 0) -> NeumannFactor:
    numbering = dissection_numbering(mesh)
    return factorise(stiffness_matrix(mesh, IDENTITY, numbering), numbering, pinned)


def compatible_loads(count: int, columns: int = 3) -> np.ndarray:
    loads = np.random.default_rng(0).normal(size=(count, columns))
    return loads - loads.mean(axis=0)


def sizes(loads: np.ndarray) -> np.ndarray:
    return np.asarray(np.abs(loads).sum(axis=0))


@pytest.mark.parametrize("order", range(1, 6))
@pytest.mark.parametrize("pinned", [0, 7, -1])
def test_solution_satisfies_every_equation(order: int, pinned: int) -> None:
    mesh = structured.disc(1.0, 2, order)
    pinned %= len(mesh.nodes)
    factor = factor_of(mesh, pinned)
    loads = compatible_loads(len(mesh.nodes))
    solution, load_sum, residual = factor.solve(loads, sizes(loads), ("a", "b", "c"))
    plain = stiffness_matrix(mesh, IDENTITY, np.arange(len(mesh.nodes)))
    # backward stable: round-off times the matrix's condition number, some 1e4 on so coarse a mesh
    np.testing.assert_allclose(plain @ solution, loads, atol=1e-11 * np.abs(loads).max())
    assert residual < 1e-13
    assert load_sum < 1e-14
    assert np.abs(solution[pinned]).max() < 1e-12 * np.abs(solution).max()


def test_pinned_node_does_not_matter_beyond_a_constant() -> None:
    mesh = structured.disc(1.0, 2, 3)
    loads = compatible_loads(len(mesh.nodes), 1)
    first, second = (factor_of(mesh, pinned).solve(loads, sizes(loads), ("a",))[0] for pinned in (0, 20))
    difference = first - second
    assert np.ptp(difference) < 1e-12 * np.ptp(first)


def test_incompatible_load_raises_and_names_the_problem() -> None:
    mesh = structured.rectangle(1, 1, 2, 2, 2)
    loads = compatible_loads(len(mesh.nodes), 2)
    loads[3, 1] += 1e-6
    with pytest.raises(SolveError, match=r"the load of 'flexure' does not sum to zero \(relative sum \d"):
        factor_of(mesh).solve(loads, sizes(loads), ("torsion", "flexure"))


def test_load_that_is_not_a_number_raises() -> None:
    mesh = structured.rectangle(1, 1, 2, 2, 2)
    loads = compatible_loads(len(mesh.nodes), 1)
    loads[2] = np.nan
    with pytest.raises(SolveError, match="the load of 'torsion' does not sum to zero"):
        factor_of(mesh).solve(loads, sizes(loads), ("torsion",))


def test_zero_load_gives_zero() -> None:
    mesh = structured.rectangle(1, 1, 2, 2, 1)
    solution, load_sum, residual = factor_of(mesh).solve(np.zeros((len(mesh.nodes), 1)), np.zeros(1), ("nothing",))
    assert not solution.any()
    assert load_sum == residual == 0


@pytest.mark.parametrize("order", [1, 2, 4])
@pytest.mark.parametrize("seed", range(4))
def test_two_bodies_raise(order: int, seed: int) -> None:
    """Round-off in the last pivot hides the second body's constants from the factorisation: it must be looked for."""
    rng = np.random.default_rng(seed)
    first = structured.star_polygon(rng.uniform(0.5, 1.5, 7), 2, order, seed)
    second = structured.star_polygon(rng.uniform(0.5, 1.5, 6), 2, order, seed)
    nodes = np.vstack([first.nodes, second.nodes + np.array([4.0, rng.uniform()])])
    triangles = np.vstack([first.triangles, second.triangles + len(first.nodes)])
    mesh = Mesh(nodes, triangles, np.zeros(len(triangles), int), ("both",))
    with pytest.raises(SolveError, match=rf"matrix of {len(nodes)} unknowns is singular: the mesh falls into 2 bodies"):
        factor_of(mesh)


def test_exactly_singular_matrix_raises() -> None:
    # connected, the diagonal's largest entry 1: with the spring at row 0 the rows are (1, 1) and (1, 1)
    matrix = sp.csc_matrix(np.array([[0.0, 1.0], [1.0, 1.0]]))
    with pytest.raises(SolveError, match="stiffness matrix of 2 unknowns is singular"):
        factorise(matrix, np.arange(2), 0)


def test_a_wrong_factor_is_noticed() -> None:
    """The residual is measured with the matrix itself, so a factor of another matrix cannot pass."""
    mesh = structured.rectangle(1, 1, 3, 3, 2)
    factor = factor_of(mesh)
    wrong = NeumannFactor(factor.matrix * 1.001, factor.numbering, factor.lu)
    loads = compatible_loads(len(mesh.nodes))
    with pytest.raises(SolveError, match=r"not solved to round-off: relative residual \d"):
        wrong.solve(loads, sizes(loads), ("a", "b", "c"))
    assert RESIDUAL_LIMIT < 1e-6
