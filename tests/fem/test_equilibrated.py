"""Equilibrium of the fluxes to round-off, in triangles, across edges and on the free boundary; and that they are the best.

Equilibrium is checked through the divergence theorem with values of the field alone, not with the coefficients it is made of.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from tests.chain import Solved, solved
from xsec_fem.errors import SolveError
from xsec_fem.fem.assembly import add_at_nodes, element_loads, stiffness_matrix
from xsec_fem.fem.edges import mesh_edges
from xsec_fem.fem.equilibrated import EquilibratedFlux, FluxProblem, solve_fluxes
from xsec_fem.fem.flux_tables import flux_degree, flux_tables, free_fields, lift_fields, source_degree
from xsec_fem.fem.mapping import Batch, batches, map_points
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials
from xsec_fem.fem.quadrature import Rule, interval_rule, triangle_rule
from xsec_fem.fem.raviart_thomas import raviart_thomas
from xsec_fem.fem.slits import open_slits
from xsec_fem.theory.bounds import equilibrated_stresses
from xsec_fem.theory.moduli import Moduli, rotated_tensor

every_order = pytest.mark.parametrize("order", range(1, 6))
CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])
# sums of some 100 terms in double precision, and condition numbers of 1e3 of the local systems
ROUND_OFF = 1e-11


def slit_square(order: int) -> Mesh:
    """A square with a slit from the middle of a side to the centre."""
    mesh = structured.rectangle(2, 2, 6, 6, order)
    edges = mesh_edges(mesh)
    ends = mesh.nodes[edges.corners]
    return open_slits(
        mesh, edges, np.flatnonzero((np.abs(ends[..., 1]) < 1e-9).all(axis=1) & (ends[..., 0] < 1e-9).all(axis=1))
    )


def random_triangulation(order: int) -> Mesh:
    return structured.star_polygon([1.0, 0.5, 1.3, 0.9, 0.4, 1.1, 0.8], 3, order, seed=order)


MESHES: dict[str, Callable[[int], Mesh]] = {
    "square with a slit": slit_square,
    "star": random_triangulation,
    "eccentric ring": lambda order: structured.eccentric_ring(1.0, 0.4, 0.3, 12, 2, order),
    "half disc": lambda order: structured.half_disc(1.0, 2, order),
    "box": lambda order: structured.box(10, 1.0, order),
}
every_mesh = pytest.mark.parametrize("name", MESHES)


def three_materials(mesh: Mesh) -> Solved:
    """Triangles dealt to three parts at random: timber along two grains, and a stiff isotropic one."""
    count = len(mesh.triangles)
    part_of = np.concatenate([np.arange(3), np.random.default_rng(count).integers(0, 3, count - 3)])
    moduli = Moduli(
        np.array([10.0, 3.0, 50.0]),
        np.stack([rotated_tensor(1.0, 0.1, 30.0), rotated_tensor(0.5, 0.2, -70.0), 20 * np.eye(2)]),
        np.stack([rotated_tensor(0.4, 0.05, 30.0), rotated_tensor(0.3, 0.3, -70.0), 0.3 * np.eye(2)]),
    )
    return Solved(structured.relabelled(mesh, part_of, ("a", "b", "c")), moduli)


def fluxes_of(section: Solved) -> EquilibratedFlux:
    return equilibrated_stresses(section.warping.problem, section.edges)


def at(mesh: Mesh, elements: np.ndarray, rule: Rule) -> Batch:
    """The given triangles, all straight or all curved, at any reference points."""
    straight = not mesh.curved[elements[0]]
    placed = map_points(mesh, elements, rule.points, straight)
    return Batch(elements, mesh.triangles[elements], mesh.part_of[elements], mesh.element, rule, *placed)


def kinds(mesh: Mesh) -> list[np.ndarray]:
    """Numbers of the straight and of the curved triangles, when there are any."""
    return [chosen for chosen in (np.flatnonzero(~mesh.curved), np.flatnonzero(mesh.curved)) if len(chosen)]


def normal_fluxes(flux: EquilibratedFlux, elements: np.ndarray, side: int, s: np.ndarray) -> np.ndarray:
    """sigma . n times the edge's length per parameter, outward, at parameters s of one side: (m, Q, k), from values alone."""
    along = CORNERS[(side + 1) % 3] - CORNERS[side]
    batch = at(flux.problem.mesh, elements, Rule(CORNERS[side] + s[:, None] * along, np.ones(len(s)), 0))
    tangent = batch.jacobian @ along
    normal = np.stack([tangent[..., 1], -tangent[..., 0]], axis=-1)
    return (flux.values(batch) * normal[:, :, None]).sum(axis=-1)


@every_order
@every_mesh
def test_divergence_of_every_triangle(name: str, order: int) -> None:
    """∫ sigma . grad q + ∫ (-source) q = ∮ sigma . n q for every polynomial q up to the degree the divergence could have."""
    section = three_materials(MESHES[name](order))
    flux, mesh = fluxes_of(section), section.mesh
    for elements in kinds(mesh):
        degree = source_degree(order, bool(mesh.curved[elements[0]])) + 1
        rule, line = triangle_rule(2 * degree + 2 * order), interval_rule(2 * degree + 2 * order)
        batch = at(mesh, elements, rule)
        q, gradient = orthonormal_polynomials(degree, rule.points)
        # ∫ sigma . grad q dA = ∫ (adj J sigma) . (reference gradient of q)
        pulled = batch.flux(flux.values(batch))
        inside = np.einsum("q,mqkd,qtd->mtk", rule.weights, pulled, gradient)
        source = flux.problem.source(batch.part, batch.points) * batch.det[..., None]
        inside -= np.einsum("q,mqk,qt->mtk", rule.weights, source, q)
        outside = np.zeros_like(inside)
        for side in range(3):
            s = line.points[:, 0]
            points = CORNERS[side] + s[:, None] * (CORNERS[(side + 1) % 3] - CORNERS[side])
            on_side, _ = orthonormal_polynomials(degree, points)
            outside += np.einsum("q,mqk,qt->mtk", line.weights, normal_fluxes(flux, elements, side, s), on_side)
        # the tests q grow like their degree, the field's values times the triangle's size set the scale
        scale = np.abs(pulled).max(axis=(0, 1, 3)) * degree**2
        assert (np.abs(inside - outside).max(axis=(0, 1)) < ROUND_OFF * scale).all()


@every_order
@every_mesh
def test_flux_is_continuous_across_edges_and_zero_on_the_boundary(name: str, order: int) -> None:
    """Also where materials meet: at points that are not the Gauss points of the multipliers."""
    section = three_materials(MESHES[name](order))
    flux, mesh, edges = fluxes_of(section), section.mesh, section.edges
    s = np.array([0.0, 0.13, 0.4, 0.6, 0.87, 1.0])  # symmetric: the neighbour walks the other way
    outward = np.zeros((len(mesh.triangles), 3, len(s), 5))
    for elements in kinds(mesh):
        for side in range(3):
            outward[elements, side] = normal_fluxes(flux, elements, side, s)
    first, second = edges.triangles.T
    sums = outward[first, edges.local[:, 0]]
    inner = second >= 0
    sums[inner] += outward[second[inner], edges.local[inner, 1]][:, ::-1]
    scale = np.abs(outward).max(axis=(0, 1, 2))
    assert (np.abs(sums).max(axis=(0, 1)) < ROUND_OFF * scale).all()
    assert (np.abs(sums[~inner]).max(axis=(0, 1)) < ROUND_OFF * scale).all()
    # the same through the coefficients: fluxes at the Gauss points, Gauss weights included
    gauss = interval_rule(2 * flux.problem.degree + 1)
    for batch in batches(mesh):
        stated = flux.edge_fluxes(batch).reshape(len(batch.elements), 3, -1, 5)
        for side in range(3):
            found = normal_fluxes(flux, batch.elements, side, gauss.points[:, 0]) * gauss.weights[:, None]
            np.testing.assert_allclose(stated[:, side], found, atol=ROUND_OFF * scale.max())


@every_order
@every_mesh
def test_stated_divergence_is_minus_the_source(name: str, order: int) -> None:
    section = three_materials(MESHES[name](order))
    flux = fluxes_of(section)
    for batch in batches(section.mesh):
        source = flux.problem.source(batch.part, batch.points)
        scale = np.abs(source).max()
        np.testing.assert_allclose(flux.divergence(batch), -source, atol=1e-10 * scale)  # degree 13 at order 5


@given(
    radii=st.lists(st.floats(0.15, 1.0), min_size=4, max_size=8),
    rings=st.integers(1, 4),
    order=st.integers(1, 5),
    seed=st.integers(0, 1000),
)
@settings(max_examples=25, deadline=None)
def test_equilibrium_on_random_triangulations(radii: list[float], rings: int, order: int, seed: int) -> None:
    section = three_materials(structured.star_polygon(radii, rings, order, seed))
    flux, edges = fluxes_of(section), section.edges
    batch = next(batches(section.mesh))
    fluxes = flux.edge_fluxes(batch).reshape(-1, 3, flux.problem.degree + 1, 5)
    order_back = np.argsort(batch.elements)
    fluxes = fluxes[order_back]
    sums = fluxes[edges.triangles[:, 0], edges.local[:, 0]]
    inner = edges.triangles[:, 1] >= 0
    sums[inner] += fluxes[edges.triangles[inner, 1], edges.local[inner, 1]][:, ::-1]
    # slender triangles (corners at 0.15 beside 1.0): condition up to 1e4
    assert (np.abs(sums).max(axis=(0, 1)) < 1e-10 * np.abs(fluxes).max(axis=(0, 1, 2))).all()


# --- the best of all equilibrated fields --------------------------------------------------------------------------------


def energy(flux: EquilibratedFlux) -> tuple[np.ndarray, np.ndarray]:
    """∫ sigma . G^-1 sigma and ∫ g . sigma of every column."""
    own, work = np.zeros(5), np.zeros(5)
    for batch in batches(flux.problem.mesh):
        sigma, inverse = flux.values(batch), flux.problem.inverse_G[batch.part]
        own += np.einsum("mqkd,mde,mqke,mq->k", sigma, inverse, sigma, batch.weights)
        work += np.einsum("mqkd,mqkd,mq->k", flux.problem.prescribed(batch.part, batch.points), sigma, batch.weights)
    return own, work


@every_order
@every_mesh
def test_divergence_free_columns_have_energy_equal_to_work(name: str, order: int) -> None:
    """At the minimum of |s|²/2 - ∫ g . s over a linear space both are equal."""
    own, work = energy(fluxes_of(three_materials(MESHES[name](order))))
    for column in (0, 3, 4):
        assert own[column] == pytest.approx(work[column], rel=1e-10)


@every_order
@pytest.mark.parametrize("name", ["square with a slit", "star"])
def test_torsion_against_a_stream_function(name: str, order: int) -> None:
    """Without holes sigma = curl phi, phi of degree k + 1 and zero on the boundary (L. Prandtl): same space, other method."""
    mesh = MESHES[name](order)
    flux = fluxes_of(solved(mesh))
    corners = mesh.triangles[:, :3]
    stream = structured.straight(mesh.nodes[: corners.max() + 1], corners, flux_degree(order) + 1)
    loads = np.zeros((len(stream.nodes), 1))
    for batch in batches(stream):
        add_at_nodes(loads, batch.nodes, element_loads(batch, np.full((*batch.weights.shape, 1), 2.0), None))
    K = stiffness_matrix(stream, np.eye(2)[None], np.arange(len(stream.nodes))).toarray()
    edges = mesh_edges(stream)
    sides = np.array(
        [[e, (e + 1) % 3, *range(3 + e * (stream.order - 1), 3 + (e + 1) * (stream.order - 1))] for e in range(3)]
    )
    fixed = stream.triangles[edges.triangles[edges.free, 0][:, None], sides[edges.local[edges.free, 0]]]
    free = np.setdiff1d(np.arange(len(stream.nodes)), fixed)
    phi = np.linalg.solve(K[np.ix_(free, free)], loads[free, 0])
    assert energy(flux)[0][0] == pytest.approx(float(phi @ loads[free, 0]), rel=1e-9)


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_exact_when_the_stress_is_in_the_space(order: int) -> None:
    """Torsion of an equilateral triangle: the stress is quadratic and without divergence, in RT_k from k = 2."""
    corners = [(-np.sqrt(3), -1), (np.sqrt(3), -1), (0, 2)]
    flux = fluxes_of(solved(structured.triangle(corners, 3, order)))
    exact = np.sqrt(3) * (2 * np.sqrt(3)) ** 4 / 80  # T&G
    own = energy(flux)[0][0]
    assert own == pytest.approx(exact, rel=1e-12) if order >= 3 else own < exact * (1 - 1e-4)


# --- reference fields -----------------------------------------------------------------------------------------------------


@every_order
@pytest.mark.parametrize("curved", [False, True])
def test_lift_has_one_polynomial_each_as_divergence_and_no_flux(order: int, curved: bool) -> None:
    degree, source = flux_degree(order), source_degree(order, curved)
    rule = triangle_rule(2 * source + 2)
    q, gradient = orthonormal_polynomials(source, rule.points)
    lift = lift_fields(degree, source, rule.points)
    assert len(lift) == q.shape[1]
    line = interval_rule(source + 3)
    outside = np.zeros((q.shape[1], len(lift)))
    for side in range(3):
        a, b = CORNERS[side], CORNERS[(side + 1) % 3]
        points = a + line.points * (b - a)
        fluxes = np.einsum("ldq,d->lq", lift_fields(degree, source, points), [b[1] - a[1], a[0] - b[0]])
        np.testing.assert_allclose(fluxes[1:], 0, atol=1e-10)
        np.testing.assert_allclose(fluxes[0], np.sqrt(2) / 6, rtol=1e-12)
        outside += np.einsum("q,qt,lq->tl", line.weights, orthonormal_polynomials(source, points)[0], fluxes)
    divergence = outside - np.einsum("q,ldq,qtd->tl", rule.weights, lift, gradient)
    np.testing.assert_allclose(divergence, np.eye(len(lift)), atol=1e-10)


@every_order
def test_free_fields_are_all_of_rt_k_without_divergence(order: int) -> None:
    degree = flux_degree(order)
    points = triangle_rule(2 * degree + 2).points
    free, element = free_fields(degree, points), raviart_thomas(degree)
    assert (
        len(free) == (degree + 1) * (degree + 4) // 2 == element.values(points).shape[1] - element.divergence_count - 1
    )
    assert np.linalg.matrix_rank(free.reshape(len(free), -1)) == len(free)
    tables = flux_tables(order, False)
    assert tables.products.shape == (3, len(free) ** 2)


# --- errors -----------------------------------------------------------------------------------------------------------------


def test_sources_that_do_not_balance_are_named() -> None:
    mesh = structured.rectangle(1, 2, 2, 4, 2)

    def source(part: np.ndarray, points: np.ndarray) -> np.ndarray:
        return points  # z has mean zero, and so has y until it is shifted

    def shifted(part: np.ndarray, points: np.ndarray) -> np.ndarray:
        return points + np.array([0.0, 0.5])

    def nothing(part: np.ndarray, points: np.ndarray) -> np.ndarray:
        return np.zeros((*points.shape[:2], 2, 2))

    G = np.eye(2)[None]
    found = solve_fluxes(FluxProblem(mesh, mesh_edges(mesh), G, source, nothing), ("in y", "in z"))
    assert found.residual < 1e-12
    with pytest.raises(SolveError, match="the load of 'in z' does not sum to zero"):
        solve_fluxes(FluxProblem(mesh, mesh_edges(mesh), G, shifted, nothing), ("in y", "in z"))
