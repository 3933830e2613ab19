"""Points are found in the triangles that hold them, by the inverse of the map."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.fem.locate import find_triangles, reference_coordinates
from xsec_fem.fem.mesh import Mesh

every_order = pytest.mark.parametrize("order", range(1, 6))
INSIDE = np.array([[0.2, 0.3], [0.05, 0.9], [1 / 3, 1 / 3], [0.6, 0.02]])

MESHES = {
    "star": lambda p: structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 2, p),
    "disc": lambda p: structured.disc(1.0, 2, p),
    "coarse ring": lambda p: structured.ring_sector(0.5, 1.0, (0, 360), 6, 1, p),
    "thin ring": lambda p: structured.ring_sector(0.98, 1.0, (0, 360), 24, 1, p),
    "far away": lambda p: structured.moved(structured.disc(1.0, 2, p), shift=(1e4, -1e4)),
}


def round_off(mesh: Mesh) -> float:
    """1e-12 of a degree-5 basis, times coordinates, over the shortest side; 1e-10 where the coordinates are near 1."""
    corner = mesh.nodes[mesh.triangles[:, :3]]
    side = np.linalg.norm(corner - np.roll(corner, 1, axis=1), axis=-1).min()
    return float(1e-12 * np.abs(mesh.nodes).max() / side)


@every_order
@pytest.mark.parametrize("name", MESHES)
def test_the_map_is_inverted(name: str, order: int) -> None:
    mesh = MESHES[name](order)
    for xi in INSIDE:
        points = np.einsum("n,mnd->md", mesh.element.values(xi[None])[0], mesh.nodes[mesh.triangles])
        found = reference_coordinates(mesh, np.arange(len(mesh.triangles)), points)
        np.testing.assert_allclose(found, np.broadcast_to(xi, found.shape), atol=round_off(mesh))


@every_order
@pytest.mark.parametrize("name", MESHES)
def test_inner_points_are_in_one_triangle(name: str, order: int) -> None:
    mesh = MESHES[name](order)
    values = mesh.element.values(INSIDE)
    for triangle in range(0, len(mesh.triangles), 5):
        for weights, xi in zip(values, INSIDE, strict=True):
            elements, reference = find_triangles(mesh, tuple(weights @ mesh.nodes[mesh.triangles[triangle]]))
            assert elements.tolist() == [triangle]
            np.testing.assert_allclose(reference[0], xi, atol=round_off(mesh))


@every_order
def test_a_vertex_is_in_all_its_triangles(order: int) -> None:
    mesh = structured.star_polygon([1, 0.8, 1.2, 0.9, 1.1, 1.0], 2, order)
    for vertex in np.unique(mesh.triangles[:, :3]):
        elements, _ = find_triangles(mesh, tuple(mesh.nodes[vertex]))
        np.testing.assert_array_equal(elements, np.flatnonzero((mesh.triangles[:, :3] == vertex).any(axis=1)))


@every_order
@pytest.mark.parametrize("point", [(2.0, 0.0), (0.0, 0.0), (0.49, 0.0), (1.001, 0.0), (-0.75, 0.9), (1e9, 1e9)])
def test_outside(order: int, point: tuple[float, float]) -> None:
    """Outside a ring, in its hole, just inside the hole and just beyond the outer circle."""
    mesh = structured.ring_sector(0.5, 1.0, (0, 360), 24, 2, order)
    elements, reference = find_triangles(mesh, point)
    assert len(elements) == 0
    assert reference.shape == (0, 2)


@pytest.mark.parametrize("order", range(2, 6))
def test_points_between_chord_and_arc_are_inside(order: int) -> None:
    mesh = structured.disc(1.0, 1, order)
    for angle in np.radians(np.arange(0, 360, 7.0)):
        # four arcs of 90 degrees: the interpolated arc is within 8 % (p = 2) and better of the circle
        inside = 0.99 - 0.05 * (order == 2)
        assert len(find_triangles(mesh, (inside * np.cos(angle), inside * np.sin(angle)))[0]) >= 1


def test_points_on_a_side_count_as_inside_up_to_typing_accuracy() -> None:
    mesh = structured.rectangle(2, 1, 1, 1, 3)
    assert len(find_triangles(mesh, (0.3, 0.5 + 5e-8))[0]) == 1
    assert len(find_triangles(mesh, (0.3, 0.5 + 1e-5))[0]) == 0
