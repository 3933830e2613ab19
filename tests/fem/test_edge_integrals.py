"""Integrals along edges: lengths, weights, mass matrices and normals, straight and curved."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.edge_integrals import (
    edge_lengths,
    edge_mass_matrix,
    edge_nodes,
    edge_weights,
    line_basis,
    local_edge_nodes,
)
from xsec_fem.fem.edges import mesh_edges

every_order = pytest.mark.parametrize("order", range(1, 6))


@every_order
def test_local_edge_nodes_lie_on_their_edge_in_walking_order(order: int) -> None:
    nodes = structured.lattice(order)
    for side, numbers in enumerate(local_edge_nodes(order)):
        start, end = nodes[side], nodes[(side + 1) % 3]
        expected = start + np.arange(order + 1)[:, None] * (end - start) // order
        np.testing.assert_array_equal(nodes[numbers], expected)


@every_order
def test_line_basis(order: int) -> None:
    weights, values, slopes = line_basis(order, 2 * order)
    powers = np.arange(order + 1)
    even = powers / order
    # interpolates every power, and its derivative, at all points of the rule
    s = values @ even
    for k in powers:
        np.testing.assert_allclose(values @ even**k, s**k, atol=1e-12)
        np.testing.assert_allclose(slopes @ even**k, k * s ** max(k - 1, 0), atol=1e-11)
        assert weights @ s**k == pytest.approx(1 / (k + 1), rel=1e-13)


@every_order
def test_perimeter_of_a_polygon(order: int) -> None:
    radii = [1, 0.7, 1.2, 0.9, 1.1]
    mesh = structured.star_polygon(radii, 3, order)
    corner = structured.star_polygon(radii, 1, 1).nodes[1:]
    perimeter = np.linalg.norm(corner - np.roll(corner, -1, axis=0), axis=1).sum()
    edges = mesh_edges(mesh)
    assert edge_lengths(mesh, edges, edges.free).sum() == pytest.approx(perimeter, rel=1e-13)


@pytest.mark.parametrize("order", range(1, 6))
def test_perimeter_of_a_circle_converges(order: int) -> None:
    errors = []
    for n in (1, 2):
        mesh = structured.disc(1.0, n, order)
        edges = mesh_edges(mesh)
        errors.append(abs(edge_lengths(mesh, edges, edges.free).sum() - 2 * np.pi))
    # length of an interpolated curve: order p + 1 (odd p) or p + 2 (even p) like the area; 2 for chords
    assert np.log2(errors[0] / errors[1]) > order + 1 + (order % 2 == 0) - 0.5


@every_order
def test_weights_integrate_polynomials_along_a_line(order: int) -> None:
    mesh = structured.moved(structured.rectangle(2, 1, 3, 2, order), 30)
    edges = mesh_edges(mesh)
    along = np.array([np.cos(np.radians(30)), np.sin(np.radians(30))])
    across = np.array([-along[1], along[0]])
    bottom = edges.free[(mesh.nodes[edges.corners[edges.free]] @ across < -0.5 + 1e-9).all(axis=1)]
    weights, length = edge_weights(mesh, edges, bottom)
    assert length == pytest.approx(2.0, rel=1e-13)
    s = mesh.nodes @ along
    for k in range(order + 1):
        assert weights @ s**k == pytest.approx((1 - (-1) ** (k + 1)) / (k + 1), abs=1e-13)
    off = np.abs(mesh.nodes @ across + 0.5) > 1e-9
    assert not weights[off].any()


@every_order
def test_mass_matrix(order: int) -> None:
    mesh = structured.rectangle(2, 1, 3, 2, order)
    edges = mesh_edges(mesh)
    bottom = edges.free[(mesh.nodes[edges.corners[edges.free]][..., 1] < -0.5 + 1e-9).all(axis=1)]
    nodes = np.unique(edge_nodes(mesh, edges, bottom))
    M = edge_mass_matrix(mesh, edges, bottom, nodes)
    y = mesh.nodes[nodes, 0]
    np.testing.assert_allclose(M, M.T, atol=1e-15)
    assert np.linalg.eigvalsh(M).min() > 0
    weights, _ = edge_weights(mesh, edges, bottom)
    np.testing.assert_allclose(M.sum(axis=1), weights[nodes], atol=1e-14)
    for i in range(order + 1):
        for j in range(order + 1):
            assert y**i @ M @ y**j == pytest.approx((1 - (-1) ** (i + j + 1)) / (i + j + 1), abs=1e-13)


@every_order
def test_nodes_walk_round_the_triangle_they_are_asked_of(order: int) -> None:
    mesh = structured.star_polygon([1, 0.8, 1.2, 0.9], 2, order)
    edges = mesh_edges(mesh)
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    here = edge_nodes(mesh, edges, inner)
    there, _ = edge_nodes(mesh, edges, inner, of=edges.triangles[inner, 1], with_normals=True)
    np.testing.assert_array_equal(here, there[:, ::-1])


@every_order
def test_normals_point_out(order: int) -> None:
    mesh = structured.disc(1.0, 2, order)
    edges = mesh_edges(mesh)
    nodes, normals = edge_nodes(mesh, edges, edges.free, of=edges.triangles[edges.free, 0], with_normals=True)
    np.testing.assert_allclose(np.linalg.norm(normals, axis=-1), 1, rtol=1e-14)
    # the slope of an interpolated arc of 45 degrees is off by about (pi/8)^p / 4
    radial = mesh.nodes[nodes] / np.linalg.norm(mesh.nodes[nodes], axis=-1, keepdims=True)
    assert (normals * radial).sum(axis=-1).min() > np.cos((np.pi / 8) ** order) - 1e-12


@every_order
def test_normals_of_the_two_sides_are_opposite(order: int) -> None:
    mesh = structured.ring_sector(0.5, 1.0, (0, 120), 3, 2, order)
    edges = mesh_edges(mesh)
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    sides = [edge_nodes(mesh, edges, inner, of=edges.triangles[inner, k], with_normals=True)[1] for k in (0, 1)]
    np.testing.assert_allclose(sides[0], -sides[1][:, ::-1], atol=1e-12)
