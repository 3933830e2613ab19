"""The mesh is checked on entry; every fault is named with its place."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from xsec_fem.errors import MeshingError
from xsec_fem.fem.mapping import batches
from xsec_fem.fem.mesh import Mesh, order_of
from xsec_fem.fem.reference_triangle import lagrange_triangle

every_order = pytest.mark.parametrize("order", range(1, 6))

SQUARE = np.array([[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]])
HALVES = np.array([[0, 1, 2], [0, 2, 3]])


def make(
    nodes: object = SQUARE, triangles: object = HALVES, part_of: object = (0, 0), names: tuple[str, ...] = ("a",)
) -> Mesh:
    return Mesh(np.asarray(nodes, float), np.asarray(triangles), np.asarray(part_of), names)


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ({"nodes": np.zeros((4, 3))}, r"nodes must be an array of \(y, z\) rows, but its shape is \(4, 3\)"),
        ({"nodes": np.zeros(8)}, r"its shape is \(8,\)"),
        ({"part_of": [0]}, r"2 triangles, but 1 part numbers"),
        ({"triangles": np.zeros((0, 3), int), "part_of": []}, r"0 triangles, but 0 part numbers"),
        ({"triangles": [[0, 1, 2, 3]] * 2}, r"triangles with 4 nodes are not Lagrange triangles of order 1 to 5"),
        ({"triangles": [[0, 1, 2], [0, 2, 4]]}, r"use node numbers 0 to 4, but there are 4 nodes"),
        ({"triangles": [[0, 1, 2], [0, 2, -1]]}, r"use node numbers -1 to 2"),
        ({"names": ("a", "web")}, r"part 'web' has no triangle"),
        ({"triangles": [[0, 1, 2], [0, 3, 2]]}, r"triangle 1 of part 'a' at \(0\.333333, 0\.666667\) is flat or folded"),
        ({"nodes": [[0, 0], [1, 0], [1, 1], [0.5, 0.5]]}, r"triangle 1 of part 'a' at \(0\.5, 0\.5\) is flat"),
        ({"nodes": [[0, 0], [1, 0], [1, 1], [0, np.nan]]}, r"node 3 lies at \(0\.0, nan\)"),
        ({"nodes": [[0, 0], [np.inf, 0], [1, 1], [0, 1]]}, r"node 1 lies at \(inf, 0\.0\)"),
        ({"part_of": [0, 5]}, r"triangles have part numbers 0 to 5, but there are 1 part names"),
        ({"part_of": [-1, 0]}, r"triangles have part numbers -1 to 0"),
    ],
)  # fmt: skip
def test_faults_are_named(arguments: dict[str, object], message: str) -> None:
    with pytest.raises(MeshingError, match=message):
        make(**arguments)  # type: ignore[arg-type]


@every_order
def test_order_of(order: int) -> None:
    assert order_of(len(lagrange_triangle(order).nodes)) == order


@pytest.mark.parametrize("count", [0, 1, 2, 4, 9, 28])
def test_order_of_other_counts(count: int) -> None:
    with pytest.raises(MeshingError, match=f"triangles with {count} nodes"):
        order_of(count)


@pytest.mark.parametrize("order", range(2, 6))
def test_folded_curved_triangle_is_named_with_its_place(order: int) -> None:
    mesh = structured.grid([0, 1, 2], [0, 1], order)
    nodes = mesh.nodes.copy()
    triangle = 2
    side_node = mesh.triangles[triangle, 3]
    nodes[side_node] += [0.9, 0.9]  # dragged across the triangle
    y, z = nodes[mesh.triangles[triangle, :3]].mean(axis=0)
    with pytest.raises(
        MeshingError, match=r"triangle \d of part 'solid' at \(.*\) is flat or folded.* smallest det J"
    ) as caught:
        mesh.with_nodes(nodes)
    named = int(str(caught.value).split()[1])
    assert side_node in mesh.triangles[named]
    assert np.isfinite([y, z]).all()


@every_order
def test_clockwise_triangles_are_turned_round(order: int) -> None:
    mesh = structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 2, order)
    turned = Mesh.build(mesh.nodes * [-1, 1], mesh.triangles, mesh.part_of, mesh.part_names)
    assert turned.worst_jacobian.min() == 1.0
    np.testing.assert_array_equal(np.sort(turned.triangles, axis=1), np.sort(mesh.triangles, axis=1))


@every_order
def test_unused_nodes_are_dropped(order: int) -> None:
    mesh = structured.rectangle(2, 1, 2, 1, order)
    loose = np.array([[50.0, 50.0], [np.nan, 0.0]])
    built = Mesh.build(np.vstack([loose, mesh.nodes, loose]), mesh.triangles + 2, mesh.part_of, mesh.part_names)
    np.testing.assert_array_equal(built.nodes[built.triangles], mesh.nodes[mesh.triangles])
    assert len(built.nodes) == len(mesh.nodes)


def test_third_coordinate_is_dropped() -> None:
    assert Mesh.build(np.column_stack([SQUARE, np.full(4, 7.0)]), HALVES, np.zeros(2), ("a",)).nodes.shape == (4, 2)


@pytest.mark.parametrize("order", range(2, 6))
def test_curved_names_the_triangles_on_the_arc_only(order: int) -> None:
    mesh = structured.ring_sector(0.5, 1.0, (0, 90), 3, 3, order)
    assert mesh.curved.all()
    square = structured.rectangle(1, 1, 2, 2, order)
    assert not square.curved.any()
    bent = square.nodes.copy()
    bent[square.triangles[0, 3]] += 1e-3
    moved = square.with_nodes(bent)
    assert moved.curved[0]
    assert 1 <= moved.curved.sum() <= 2


def test_order_1_is_never_curved() -> None:
    assert not structured.disc(1.0, 2, 1).curved.any()


def test_boxes_hold_all_nodes() -> None:
    mesh = structured.disc(1.0, 2, 3)
    low, high = mesh.boxes
    x = mesh.nodes[mesh.triangles]
    assert (low[:, None] <= x).all()
    assert (x <= high[:, None]).all()


@pytest.mark.parametrize("order", range(2, 6))
def test_what_is_accepted_is_positive_wherever_it_is_integrated(order: int) -> None:
    """det J of degree 2 (p - 1) can dip below zero between the nodes: the check looks where the integrals look."""
    element, rng = lagrange_triangle(order), np.random.default_rng(order)
    accepted = 0
    for _ in range(200):
        nodes = element.nodes.copy()
        nodes[3:] += rng.uniform(0, 0.5) / order * rng.normal(size=nodes[3:].shape)
        try:
            mesh = Mesh(nodes, np.arange(len(nodes))[None], np.zeros(1, int), ("a",))
        except MeshingError:
            continue
        accepted += 1
        assert min(batch.det.min() for batch in batches(mesh)) > 0
    assert 20 < accepted < 180  # the draw holds both kinds
