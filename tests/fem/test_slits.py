"""A slit doubles the nodes along it, and nothing else."""

import numpy as np
import pytest

from tests.structured import rectangle
from xsec_fem.fem.edges import connected_bodies, mesh_edges
from xsec_fem.fem.slits import facing_edges, open_slits
from xsec_fem.fem.strip_edges import strip_edges


def edges_on_axis(mesh, edges, from_y=-np.inf, to_y=np.inf):
    ends = mesh.nodes[edges.corners]
    on_axis = (np.abs(ends[..., 1]) < 1e-12).all(axis=1)
    within = (ends[..., 0] > from_y - 1e-12).all(axis=1) & (ends[..., 0] < to_y + 1e-12).all(axis=1)
    return np.flatnonzero(on_axis & within)


@pytest.mark.parametrize("order", range(1, 6))
def test_no_slit_changes_nothing(order):
    mesh = rectangle(2.0, 1.0, 4, 4, order)
    same = open_slits(mesh, mesh_edges(mesh), np.array([], np.int64))
    assert np.array_equal(same.nodes, mesh.nodes)
    assert np.array_equal(same.triangles, mesh.triangles)


@pytest.mark.parametrize("order", range(1, 6))
def test_through_slit_makes_two_bodies(order):
    mesh = rectangle(2.0, 1.0, 4, 4, order)
    edges = mesh_edges(mesh)
    split = open_slits(mesh, edges, edges_on_axis(mesh, edges))
    # 4 edges with both ends on the free boundary: all 4 p + 1 nodes double
    assert len(split.nodes) - len(mesh.nodes) == 4 * order + 1
    assert connected_bodies(split, mesh_edges(split)).max() == 1


@pytest.mark.parametrize("order", range(1, 6))
def test_inner_end_stays_single_and_edge_end_doubles(order):
    mesh = rectangle(2.0, 1.0, 4, 4, order)
    edges = mesh_edges(mesh)
    split = open_slits(mesh, edges, edges_on_axis(mesh, edges, to_y=0.0))
    assert len(split.nodes) - len(mesh.nodes) == 2 * order  # of 2 p + 1 nodes the inner end stays single
    again = mesh_edges(split)
    assert connected_bodies(split, again).max() == 0
    assert len(again.free) == len(edges.free) + 2 * 2
    tip = np.isclose(split.nodes, [0.0, 0.0]).all(axis=1)
    assert tip.sum() == 1


def test_inner_slit_keeps_both_ends_single():
    mesh = rectangle(2.0, 1.0, 4, 4, 3)
    edges = mesh_edges(mesh)
    split = open_slits(mesh, edges, edges_on_axis(mesh, edges, -0.5, 0.5))
    assert len(split.nodes) - len(mesh.nodes) == 2 * 3 - 1


def test_places_and_parts_are_kept():
    mesh = rectangle(2.0, 1.0, 4, 4, 4)
    edges = mesh_edges(mesh)
    split = open_slits(mesh, edges, edges_on_axis(mesh, edges, to_y=0.0))
    assert np.array_equal(split.nodes[split.triangles], mesh.nodes[mesh.triangles])
    assert np.array_equal(split.part_of, mesh.part_of)


def test_free_edges_among_the_slit_do_nothing():
    mesh = rectangle(2.0, 1.0, 2, 2, 2)
    edges = mesh_edges(mesh)
    assert len(open_slits(mesh, edges, edges.free).nodes) == len(mesh.nodes)


@pytest.mark.parametrize("order", range(1, 6))
def test_faces_of_a_slit_are_found_again(order):
    mesh = rectangle(2.0, 1.0, 4, 4, order)
    edges = mesh_edges(mesh)
    assert len(facing_edges(mesh, edges)) == 0
    split = open_slits(mesh, edges, edges_on_axis(mesh, edges, to_y=0.0))
    again = mesh_edges(split)
    pairs = facing_edges(split, again)
    assert len(pairs) == 2
    assert (pairs[:, 0] < pairs[:, 1]).all()
    ends = split.nodes[again.corners[pairs]]
    assert np.allclose(np.sort(ends[:, 0], axis=1), np.sort(ends[:, 1], axis=1), atol=0)


def test_edges_on_a_strip():
    mesh = rectangle(2.0, 1.0, 4, 4, 2)
    edges = mesh_edges(mesh)
    on_axis = edges_on_axis(mesh, edges)
    chosen = strip_edges(mesh, edges, np.arange(len(edges.corners)), ((0.0, 0.0), (1.0, 0.0)))
    assert set(chosen) == {e for e in on_axis if mesh.nodes[edges.corners[e]].mean(axis=0)[0] > 0}
