"""Edges: every one once, its two triangles, the free boundary, and bodies."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.edges import connected_bodies, mesh_edges
from xsec_fem.fem.mesh import Mesh

MESHES = {
    "one triangle": (structured.triangle([(0, 0), (1, 0), (0, 1)], 1, 2), 1),
    "rectangle": (structured.rectangle(2, 1, 4, 3, 1), 1),
    "star": (structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 3, 3), 1),
    "ring": (structured.ring_sector(0.5, 1.0, (0, 360), 8, 2, 2), 0),  # vertices - edges + triangles: a hole less
    "slit ring": (structured.ring_sector(0.5, 1.0, (0, 360), 8, 2, 2, closed=False), 1),
}


@pytest.mark.parametrize("name", MESHES)
def test_euler_and_counts(name: str) -> None:
    mesh, characteristic = MESHES[name]
    edges = mesh_edges(mesh)
    vertices = len(np.unique(mesh.triangles[:, :3]))
    assert vertices - len(edges.corners) + len(mesh.triangles) == characteristic
    assert len(np.unique(edges.corners, axis=0)) == len(edges.corners)
    assert (edges.corners[:, 0] < edges.corners[:, 1]).all()
    # every triangle has three sides: free edges count once, inner ones twice
    assert 3 * len(mesh.triangles) == 2 * len(edges.corners) - len(edges.free)


@pytest.mark.parametrize("name", MESHES)
def test_both_tables_say_the_same(name: str) -> None:
    mesh, _ = MESHES[name]
    edges = mesh_edges(mesh)
    for number, (triangles, local) in enumerate(zip(edges.triangles, edges.local, strict=True)):
        for triangle, side in zip(triangles, local, strict=True):
            if triangle < 0:
                assert side == -1
                continue
            assert edges.of_triangle[triangle, side] == number
            ends = mesh.triangles[triangle, [side, (side + 1) % 3]]
            np.testing.assert_array_equal(np.sort(ends), edges.corners[number])


def test_free_edges_of_a_rectangle_lie_on_its_sides() -> None:
    mesh = structured.rectangle(2, 1, 4, 3, 1)
    edges = mesh_edges(mesh)
    assert len(edges.free) == 14
    x = mesh.nodes[edges.corners[edges.free]]
    on_side = [(np.abs(np.abs(x[..., d]) - half) < 1e-12).all(axis=1) for d, half in ((0, 1.0), (1, 0.5))]
    assert (on_side[0] | on_side[1]).all()


def test_an_edge_of_three_triangles_is_named() -> None:
    nodes = np.array([[0.0, 0.0], [1.0, 0.0], [0.5, 1.0], [0.5, 2.0], [0.5, -1.0]])
    mesh = Mesh(nodes, np.array([[0, 1, 2], [0, 1, 3], [1, 0, 4]]), np.zeros(3, int), ("a",))
    with pytest.raises(
        ValueError, match="the edge between nodes 0 and 1 belongs to 3 triangles; at most 2 can share one"
    ):
        mesh_edges(mesh)


def test_connected_bodies() -> None:
    first, second = structured.rectangle(1, 1, 2, 2, 2), structured.star_polygon([1, 1.1, 0.9, 1], 2, 2)
    nodes = np.vstack([first.nodes, second.nodes + 5])
    triangles = np.vstack([first.triangles, second.triangles + len(first.nodes)])
    mesh = Mesh(nodes, triangles, np.zeros(len(triangles), int), ("a",))
    body = connected_bodies(mesh, mesh_edges(mesh))
    assert len(set(body[:8])) == len(set(body[8:])) == 1
    assert body[0] != body[-1]


def test_bodies_that_share_a_node_only_are_two() -> None:
    nodes = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0], [-1.0, 0.0], [0.0, -1.0]])
    mesh = Mesh(nodes, np.array([[0, 1, 2], [0, 3, 4]]), np.zeros(2, int), ("a",))
    assert len(set(connected_bodies(mesh, mesh_edges(mesh)))) == 2


def test_edges_left_out_do_not_connect() -> None:
    mesh = structured.rectangle(2, 1, 2, 1, 2)
    edges = mesh_edges(mesh)
    middle = np.flatnonzero((np.abs(mesh.nodes[edges.corners][..., 0]) < 1e-12).all(axis=1))
    body = connected_bodies(mesh, edges, without=middle)
    centre = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)[:, 0]
    assert len(set(body)) == 2
    assert len(set(body[centre < 0])) == len(set(body[centre > 0])) == 1
    assert len(set(connected_bodies(mesh, edges))) == 1  # the edges themselves are as before
