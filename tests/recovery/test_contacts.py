"""Which parts touch, and along what length."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.edges import mesh_edges
from xsec_fem.recovery.contacts import find_contacts

every_order = pytest.mark.parametrize("order", range(1, 6))


@every_order
def test_three_boards(order: int) -> None:
    mesh = structured.grid(
        [0, 1, 2, 4], [0, 1, 2], order, lambda y, z: np.where(z > 1, 2, np.where(y < 1, 0, 1)), ("a", "b", "c")
    )
    assert find_contacts(mesh, mesh_edges(mesh)) == (
        ("a", "b", pytest.approx(1.0)),
        ("a", "c", pytest.approx(1.0)),
        ("b", "c", pytest.approx(3.0)),
    )


def test_one_part_touches_nothing() -> None:
    mesh = structured.rectangle(1, 1, 2, 2, 2)
    assert find_contacts(mesh, mesh_edges(mesh)) == ()


def test_parts_that_meet_in_a_point_do_not_touch() -> None:
    mesh = structured.grid(
        [0, 1, 2], [0, 1, 2], 2, lambda y, z: np.where((y < 1) == (z < 1), (y > 1) * 1, -1), ("a", "b")
    )
    assert find_contacts(mesh, mesh_edges(mesh)) == ()


def test_faces_of_an_open_slit_do_not_touch() -> None:
    mesh = structured.grid([0, 1, 2], [-1, 0, 1], 2, lambda y, z: np.where(z < 0, 0, 1), ("a", "b"))
    slit = structured.opened(mesh, lambda x: (np.abs(x[:, 1]) < 1e-12) & (x[:, 0] < 1 - 1e-9), lambda x: x[:, 1] > 0)
    assert find_contacts(slit, mesh_edges(slit)) == (("a", "b", pytest.approx(1.0)),)


@pytest.mark.parametrize("order", range(2, 6))
def test_length_along_an_arc(order: int) -> None:
    mesh = structured.ring_sector(0.5, 1.5, (0, 90), 6, 2, order)
    inner = np.hypot(*mesh.nodes[mesh.triangles[:, :3]].mean(axis=1).T) < 1.0
    two = structured.relabelled(mesh, np.where(inner, 0, 1), ("core", "sleeve"))
    (contact,) = find_contacts(two, mesh_edges(two))
    # arcs of 15 degrees interpolated at even nodes
    assert contact == ("core", "sleeve", pytest.approx(np.pi / 2, rel=0.26 ** (order + 1)))
