"""Lines through meshes: lengths, spans, lines through nodes and along edges, tangents."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from xsec_fem.fem.cut_samples import basis_values, sample_places, sample_values, span_integrals
from xsec_fem.fem.edge_curves import EdgeCurves, tangent_of
from xsec_fem.fem.edges import mesh_edges
from xsec_fem.fem.line_crossings import line_crossings

UP = np.array([0.0, 1.0])


def curves_of(mesh) -> EdgeCurves:
    return EdgeCurves(mesh, mesh_edges(mesh))


def unit(angle):
    return np.array([np.cos(angle), np.sin(angle)])


def test_the_tangent_has_the_normal_on_its_left() -> None:
    assert tangent_of(UP).tolist() == [1.0, 0.0]


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_rectangle_lines_are_as_long_as_it_is_wide(order) -> None:
    crossings = line_crossings(curves_of(structured.rectangle(2, 4, 3, 5, order)), UP, np.linspace(-1.9, 1.9, 23))
    assert crossings.length == pytest.approx(2.0, abs=1e-14)
    assert np.bincount(crossings.span_line).tolist() == [1] * 23
    assert crossings.end - crossings.start == pytest.approx(np.abs(crossings.end - crossings.start), abs=0)


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_circle_chords(order) -> None:
    levels = np.linspace(-0.97, 0.97, 40)
    length = line_crossings(curves_of(structured.disc(1.0, 6, order)), UP, levels).length
    # 24 arcs of 15 deg: an arc of polynomial degree p is off by about (0.26)^(p+1)/(2^p (p+1)!); steep ends multiply by 4
    assert length == pytest.approx(2 * np.sqrt(1 - levels**2), abs={2: 2e-3, 3: 5e-5, 4: 2e-6, 5: 5e-8}[order])


def test_a_line_along_edges_runs_just_below_them() -> None:
    # a tee: web 1 wide below z = 0, flange 5 wide above; the line lies on the flange's face
    mesh = structured.grid(
        [-2.5, -0.5, 0.5, 2.5], [-3, 0, 1], 2, lambda y, z: np.where((z > 0) | (np.abs(y) < 0.5), 0, -1)
    )
    crossings = line_crossings(curves_of(mesh), UP, np.array([-1e-3, 0.0, 1e-10, 1e-3]))
    # 1e-10 is within 1e-9 of the section's size (5) of the nodes: still counted as below them
    assert crossings.length == pytest.approx([1.0, 1.0, 1.0, 5.0], abs=1e-12)
    top = line_crossings(curves_of(mesh), UP, np.array([-3.0, 1.0]))
    assert top.length == pytest.approx([0.0, 5.0], abs=1e-12)


def test_a_line_through_a_touched_corner_has_no_wall() -> None:
    mesh = structured.triangle([[0, 0], [4, 0], [2, 3]], 4, 2)
    assert line_crossings(curves_of(mesh), UP, np.array([3.0])).length.tolist() == [0.0]


def test_two_walls_of_a_box_and_the_parts_crossed() -> None:
    crossings = line_crossings(curves_of(structured.box(10, 1, 2)), UP, np.array([0.0, 4.5]))
    assert np.bincount(crossings.span_line).tolist() == [2, 1]
    assert crossings.span_length == pytest.approx([1, 1, 10], abs=1e-12)
    assert crossings.parts_of_span(0) == ("solid",)


def test_a_slit_ends_a_wall() -> None:
    whole = structured.grid([-1, 0, 1], [0, 1, 2], 2)
    slit = structured.opened(whole, lambda x: np.abs(x[:, 0]) < 1e-12, lambda x: x[:, 0] > 0)
    sides = line_crossings(curves_of(slit), UP, np.array([0.5]))
    assert sides.span_length == pytest.approx([1, 1], abs=1e-14)


def test_a_line_that_grazes_a_curve_crosses_it_twice_or_not_at_all() -> None:
    curves = curves_of(structured.ring_sector(1.0, 2.0, (0, 360), 12, 2, 4))
    inner = np.abs(np.hypot(*curves.mesh.nodes.T)).min()
    levels = inner + np.array([-1e-4, -1e-6, 1e-4])
    spans = np.bincount(line_crossings(curves, UP, levels).span_line)
    assert spans.tolist() == [2, 2, 1]


def test_levels_must_be_ascending() -> None:
    with pytest.raises(ValueError, match=r"levels must be ascending \(got \[1\.0, 0\.0\]"):
        line_crossings(curves_of(structured.rectangle(2, 2, 1, 1, 1)), UP, np.array([1.0, 0.0]))


@given(st.lists(st.floats(0.5, 2.0), min_size=3, max_size=8), st.floats(0, 2 * np.pi), st.integers(1, 5))
@settings(deadline=None, max_examples=25)
def test_every_line_through_a_random_polygon_is_covered_once(radii, angle, order) -> None:
    mesh = structured.star_polygon(radii, 3, order)
    normal = unit(angle)
    heights = mesh.nodes @ normal
    levels = np.sort(np.concatenate([np.linspace(heights.min(), heights.max(), 17), heights[:9]]))  # through nodes, too
    crossings = line_crossings(curves_of(mesh), normal, levels)
    lengths = np.bincount(crossings.span, crossings.end - crossings.start, minlength=len(crossings.span_line))
    # the nodes' tolerance is 1e-9 of the size
    assert lengths == pytest.approx(crossings.span_length, abs=2e-8)
    places = sample_places(crossings, np.array([0.0, 0.4, 1.0]))
    read = sample_values(crossings, np.array([0.0, 0.4, 1.0]), mesh.nodes, mesh.triangles)
    assert read == pytest.approx(places, abs=2e-8)


def test_coordinates_are_read_back_on_curved_triangles() -> None:
    mesh = structured.disc(3.0, 3, 4)
    crossings = line_crossings(curves_of(mesh), unit(0.4), np.linspace(-2.9, 2.9, 31))
    shares = np.array([0.0, 0.1, 0.5, 1.0])
    assert sample_values(crossings, shares, mesh.nodes, mesh.triangles) == pytest.approx(
        sample_places(crossings, shares), abs=1e-12
    )


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_basis_values_are_the_elements(order) -> None:
    mesh = structured.rectangle(1, 1, 1, 1, order)
    points = np.random.default_rng(3).uniform(0, 0.5, (7, 2, 2))
    expected = mesh.element.values(points.reshape(-1, 2)).reshape(7, 2, -1)
    assert basis_values(order, points) == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_integrals_along_spans_are_exact_to_the_order(order) -> None:
    mesh = structured.rectangle(2, 4, 3, 5, order)
    y = mesh.nodes[:, 0]
    crossings = line_crossings(curves_of(mesh), UP, np.array([-0.3, 1.1]))
    values = ((y + 1) ** order)[mesh.triangles][..., None]
    got = span_integrals(crossings, values)
    assert got[:, 0] == pytest.approx(2.0 ** (order + 1) / (order + 1), rel=1e-12)
