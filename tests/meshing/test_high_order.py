"""Elevation of triangles: numbering, exactness on polynomial edges, smooth inner nodes, change of order."""

from __future__ import annotations

import numpy as np
import pytest

from tests.meshing.sections import triangle_areas
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.reference_triangle import lagrange_triangle, lattice, node_count
from xsec_fem.meshing.high_order import CurvedEdges, change_order, elevate, folded, triangle_edges

SQUARE = np.array([[0.0, 0.0], [2.0, 0.0], [2.0, 1.0], [0.0, 1.0]])
TWO = np.array([[0, 1, 2], [0, 2, 3]])
ORDERS = [1, 2, 3, 4, 5]


def no_curves(order):
    return CurvedEdges(np.zeros((0, 2), np.int64), np.zeros((0, order - 1, 2)))


def bulged(order, depth, ends=(0, 1)):
    """Nodes on a parabola under the edge from (0, 0) to (2, 0)."""
    s = np.arange(1, order) / order
    nodes = np.column_stack([2 * s, -4 * depth * s * (1 - s)])
    return CurvedEdges(np.array([ends]), (nodes if ends == (0, 1) else nodes[::-1])[None])


@pytest.mark.parametrize("order", ORDERS)
def test_straight_triangles_have_the_lattice_of_their_corners(order):
    nodes, triangles = elevate(SQUARE, TWO, order, no_curves(order))
    assert triangles.shape == (2, node_count(order))
    assert len(np.unique(triangles)) == len(nodes)
    weights = lagrange_triangle(1).values(lattice(order) / order)
    assert nodes[triangles] == pytest.approx(np.einsum("qk,mkd->mqd", weights, SQUARE[TWO]), abs=1e-15)
    # Euler: 4 corners, 5 edges, 2 triangles
    assert len(nodes) == 4 + 5 * (order - 1) + 2 * (order - 1) * (order - 2) // 2


@pytest.mark.parametrize("order", [2, 3, 4, 5])
@pytest.mark.parametrize("ends", [(0, 1), (1, 0)])
@pytest.mark.parametrize("turn", [0, 1, 2])
def test_a_curved_edge_may_be_any_side_and_walk_either_way(order, ends, turn):
    corners = np.array([np.roll([0, 1, 2], turn), [0, 2, 3]])
    nodes, triangles = elevate(SQUARE, corners, order, bulged(order, 0.3, ends))
    mesh = Mesh.build(nodes, triangles, np.zeros(2, int), ("a",))
    assert mesh.curved.tolist() == [True, False]
    # the parabola of depth d under a chord of 2 adds 2/3 * 2 d to the area (Archimedes)
    assert triangle_areas(mesh).sum() == pytest.approx(2 + 2 / 3 * 2 * 0.3, rel=1e-13)


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_blending_gives_back_a_quadratic_bulge_exactly(order):
    # d(e) = c (1 - e²) blends to 4 c l1 l2: known in closed form at every inner node
    nodes, triangles = elevate(SQUARE, TWO[:1], order, bulged(order, 0.3))
    straight, same = elevate(SQUARE, TWO[:1], order, no_curves(order))
    shift = nodes[triangles[0]] - straight[same[0]]
    l1, l2 = 1 - lattice(order).sum(axis=1) / order, lattice(order)[:, 0] / order
    assert shift[:, 0] == pytest.approx(0, abs=1e-14)
    assert shift[:, 1] == pytest.approx(-4 * 0.3 * l1 * l2, abs=1e-14)


@pytest.mark.parametrize("order", [3, 4, 5])
def test_inner_nodes_follow_small_elements_with_the_power_of_their_size(order):
    def second_derivative(h):
        """Largest second difference of the map of a triangle of size h on the unit circle, over h."""
        angles = np.array([0.0, h])
        corners = np.vstack([np.column_stack([np.cos(angles), np.sin(angles)]), [[1 - h, h / 2]]])
        between = np.linspace(0, h, order + 1)[1:-1]
        curve = np.column_stack([np.cos(between), np.sin(between)])
        nodes, triangles = elevate(corners, np.array([[0, 1, 2]]), order, CurvedEdges(np.array([[0, 1]]), curve[None]))
        local = nodes[triangles[0]]
        basis = lagrange_triangle(order)
        eps, points = 1e-3, np.array([[0.3, 0.3], [0.1, 0.5], [0.5, 0.1]])
        worst = 0.0
        for d in (np.array([eps, 0]), np.array([0, eps]), np.array([eps, -eps])):
            worst = max(worst, np.abs(_second(basis, local, points, d)).max() / eps**2)
        return worst / h

    # optimal order of curved elements needs second derivatives of the map to be O(h²): halving h halves them over h
    assert second_derivative(0.1) < 0.6 * second_derivative(0.2)


def _second(basis, local, points, d):
    return (basis.values(points + d) - 2 * basis.values(points) + basis.values(points - d)) @ local


@pytest.mark.parametrize("own", ORDERS)
@pytest.mark.parametrize("wanted", ORDERS)
def test_change_of_order_follows_the_map_of_the_mesh(own, wanted):
    nodes, triangles = elevate(SQUARE, TWO, own, bulged(own, 0.2) if own > 1 else no_curves(own))
    raised, numbered = change_order(nodes, triangles, wanted)
    assert numbered.shape == (2, node_count(wanted))
    assert len(np.unique(numbered)) == len(np.unique(elevate(SQUARE, TWO, wanted, no_curves(wanted))[1]))
    values = lagrange_triangle(own).values(lattice(wanted) / wanted)
    # the basis of degree 5 is known to 1e-12 (condition of its Vandermonde matrix 7e3)
    assert raised[numbered] == pytest.approx(np.einsum("qk,mkd->mqd", values, nodes[triangles]), abs=1e-12)
    if wanted >= own:
        back, again = change_order(raised, numbered, own)
        assert back[again] == pytest.approx(nodes[triangles], abs=1e-12)


def test_a_slit_one_edge_long_stays_open():
    # two triangles above and below the edge 0-1 with mid nodes of their own
    nodes = np.array(
        [[0, 0], [2, 0], [1, 1], [1, -1], [1, 0.1], [1, -0.1], [1.5, 0.5], [0.5, 0.5], [0.5, -0.5], [1.5, -0.5]]
    )
    triangles = np.array([[0, 1, 2, 4, 6, 7], [1, 0, 3, 5, 8, 9]])
    raised, numbered = change_order(nodes.astype(float), triangles, 4)
    assert len(np.intersect1d(*numbered)) == 2
    assert len(raised) >= len(np.unique(numbered))


def test_edges_are_found_once_with_their_directions():
    ends, edge_of, forward = triangle_edges(TWO)
    assert ends.tolist() == [[0, 1], [0, 2], [0, 3], [1, 2], [2, 3]]
    assert edge_of.tolist() == [[0, 3, 1], [1, 4, 2]]
    assert forward.tolist() == [[True, True, False], [True, True, False]]


def test_a_curve_on_no_edge_is_refused():
    with pytest.raises(ValueError, match=r"no triangle has the edge \[1, 3\]"):
        elevate(SQUARE, TWO, 2, CurvedEdges(np.array([[1, 3]]), np.zeros((1, 1, 2))))


@pytest.mark.parametrize(("depth", "expected"), [(-0.12, [False]), (-0.13, [True])])
def test_folded_finds_a_bulge_through_the_opposite_side(depth, expected):
    # derived here: a bulge d into the triangle (0,0), (2,0), (2,1/2) has det J = 1 - 8 d l1, zero at a corner for d = 1/8
    flat = SQUARE * [1, 0.5]
    nodes, triangles = elevate(flat, TWO[:1], 2, bulged(2, depth))
    assert folded(nodes, triangles).tolist() == expected
