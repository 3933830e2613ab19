"""First moments of what a line cuts off, against closed forms; and what finite cuts separate."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from tests.fem.test_line_crossings import UP, curves_of, unit
from xsec_fem.fem.cut_off import half_plane_moments
from xsec_fem.fem.line_crossings import line_crossings
from xsec_fem.fem.separation import cut_off_moments

ONE, ORIGIN = np.ones(1), np.zeros(2)


def test_rectangle() -> None:
    z = np.linspace(-1.9, 1.9, 21)
    moments, t = half_plane_moments(curves_of(structured.rectangle(3, 4, 4, 5, 3)), UP, z, ONE, ORIGIN)
    assert t == pytest.approx(3.0, abs=1e-13)
    # b (z + h/2) and b (z² - h²/4)/2: elementary geometry
    assert moments == pytest.approx(np.stack([3 * (z + 2), 0 * z, 1.5 * (z**2 - 4)], axis=1), abs=1e-12)


@pytest.mark.parametrize(("order", "accuracy"), [(3, 2e-5), (4, 1e-6), (5, 1e-8)])
def test_circle_segment(order, accuracy) -> None:
    z = np.linspace(-0.95, 0.95, 21)
    moments, _ = half_plane_moments(curves_of(structured.disc(1.0, 6, order)), UP, z, ONE, ORIGIN)
    # -2/3 (r² - z²)^(3/2), any handbook; accuracy: the arcs' own, as in the chords
    assert moments[:, 2] == pytest.approx(-2 / 3 * (1 - z**2) ** 1.5, abs=accuracy)
    assert moments[:, 1] == pytest.approx(0.0, abs=accuracy)


def test_i_section() -> None:
    # flanges 6 x 1, web 1 x 8 (depth 10): S of the flange 6 x 4.5, at the middle + 4 x 1 x 2
    mesh = structured.grid(
        [-3, -0.5, 0.5, 3], [-5, -4, 4, 5], 2, lambda y, z: np.where((np.abs(y) < 0.5) | (np.abs(z) > 4), 0, -1)
    )
    moments, t = half_plane_moments(curves_of(mesh), UP, np.array([-4.0, 0.0, 4.0]), ONE, ORIGIN)
    # levels on a flange's face count as just below it: flange below, web above
    assert t == pytest.approx([6, 1, 1], abs=1e-12)
    assert moments[:, 2] == pytest.approx([-27, -35, -27], abs=1e-12)


def test_layers_weigh_with_E() -> None:
    mesh = structured.grid([0, 2], [0, 1, 3], 2, lambda y, z: np.where(z < 1, 0, 1), ("soft", "stiff"))
    moments, _ = half_plane_moments(curves_of(mesh), UP, np.array([0.5, 1.0, 2.0]), np.array([2.0, 10.0]), ORIGIN)
    # ∫E z = E b (z2² - z1²)/2 layer by layer
    assert moments[:, 2] == pytest.approx([0.5, 2.0, 2.0 + 30.0], abs=1e-12)
    assert moments[:, 0] == pytest.approx([2.0, 4.0, 24.0], abs=1e-12)


@given(st.lists(st.floats(0.5, 2.0), min_size=3, max_size=8), st.floats(0, 2 * np.pi), st.integers(1, 5))
@settings(deadline=None, max_examples=25)
def test_above_and_below_make_the_whole(radii, angle, order) -> None:
    curves = curves_of(structured.star_polygon(radii, 2, order))
    normal = unit(angle)
    heights = curves.mesh.nodes @ normal
    # between the nodes: a node on the line counts as above it from either side
    levels = np.linspace(heights.min(), heights.max(), 12)[1:-1] + 1e-5
    below, t = half_plane_moments(curves, normal, levels, ONE, np.array([0.1, 0.2]))
    above, back = half_plane_moments(curves, -normal, -levels[::-1], ONE, np.array([0.1, 0.2]))
    total, _ = half_plane_moments(curves, normal, np.array([heights.max() + 1]), ONE, np.array([0.1, 0.2]))
    size = np.abs(total).max() + 1
    assert below + above[::-1] == pytest.approx(np.broadcast_to(total, below.shape), abs=1e-12 * size)
    assert t == pytest.approx(back[::-1], abs=1e-12)
    # the same by graph and pieces of triangles, and the same lengths by intervals
    crossings = line_crossings(curves, normal, levels)
    assert crossings.length == pytest.approx(t, abs=1e-8)
    pieces, separates = cut_off_moments(
        crossings, np.arange(len(crossings.span_line)), crossings.span_line, ONE, np.array([0.1, 0.2])
    )
    assert separates.all()
    assert pieces == pytest.approx(below, abs=1e-12 * size)


def test_pieces_of_curved_triangles_add_up() -> None:
    curves = curves_of(structured.ring_sector(0.6, 1.0, (0, 360), 14, 2, 4))
    normal = unit(0.7)
    levels = np.linspace(-0.95, 0.95, 30)
    below, _ = half_plane_moments(curves, normal, levels, ONE, ORIGIN)
    crossings = line_crossings(curves, normal, levels)
    pieces, separates = cut_off_moments(
        crossings, np.arange(len(crossings.span_line)), crossings.span_line, ONE, ORIGIN
    )
    assert separates.all()
    assert pieces == pytest.approx(below, abs=1e-13)


def test_one_wall_of_a_box_does_not_separate_it_but_both_do() -> None:
    crossings = line_crossings(curves_of(structured.box(10, 1, 2)), UP, np.array([0.5]))
    moments, separates = cut_off_moments(crossings, np.array([0, 1, 0, 1]), np.array([0, 1, 2, 2]), ONE, ORIGIN)
    assert separates.tolist() == [False, False, True]
    assert np.isnan(moments[:2]).all()
    # two webs 1 x 4.5 from -4 to 0.5 and a flange 10 x 1 at -4.5
    assert moments[2] == pytest.approx([19, 0, -45 - 2 * 4.5 * 1.75], abs=1e-12)


def test_one_leg_cut_off() -> None:
    # angle 10 x 10 x 1, heel at the origin: the upright leg above z = 4, cut alone, is 1 x 6
    crossings = line_crossings(curves_of(structured.l_shape(10, 1, 3)), -UP, np.array([-4.0]))
    moments, separates = cut_off_moments(crossings, np.array([0]), np.array([0]), ONE, ORIGIN)
    assert separates.all()
    assert moments[0] == pytest.approx([6, 3, 42], abs=1e-12)
    # a level line through both arms of a channel on its side cuts each arm off alone
    channel = line_crossings(curves_of(structured.channel(10, 6, 1, 2)), np.array([-1.0, 0.0]), np.array([-4.0]))
    each, alone = cut_off_moments(channel, np.array([0, 1]), np.array([0, 1]), ONE, ORIGIN)
    assert alone.all()
    assert np.sort(each[:, 2]) == pytest.approx([2 * 0.5, 2 * 9.5], abs=1e-12)
