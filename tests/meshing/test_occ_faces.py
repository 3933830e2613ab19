"""Faces of drawn parts: who owns which piece, overlaps and misplaced embedded parts by name."""

from __future__ import annotations

import math

import numpy as np
import pytest

from tests.meshing.sections import circle, polygon, rectangle, section
from xsec_fem.errors import InputError, MeshingError
from xsec_fem.meshing.gmsh_session import gmsh_session
from xsec_fem.meshing.occ_faces import Frame, build_geometry, hosts
from xsec_fem.model.outline import Arc, EllipseArc, Face, Line, Loop


def built(faces, embedded=None, **more):
    whole = section(faces, embedded, **more)
    with gmsh_session() as gmsh:
        geometry = build_geometry(gmsh, whole)
        areas = [0.0] * len(whole.parts)
        for tag, part in geometry.faces:
            areas[part] += gmsh.model.occ.getMass(2, tag) / geometry.frame.factor**2
    return geometry, areas


@pytest.mark.parametrize("diameter", [1e-4, 0.9, 1.0, 64.0, 3e3, 1e9])
def test_frame_scales_by_a_power_of_two_to_between_64_and_128(diameter):
    frame = Frame.around(np.zeros(2), np.array([0.6, 0.8]) * diameter)
    assert 64 <= diameter * frame.factor * (1 + 1e-15) <= 128
    assert math.frexp(frame.factor)[0] == 0.5
    assert frame.shift == (0.0, 0.0)


def test_frame_is_shifted_only_far_from_the_origin():
    far = np.array([1e6, 1e6])
    frame = Frame.around(far, far + 10)
    assert frame.shift == (1e6 + 5, 1e6 + 5)
    points = far + np.array([[0.1, 3.0], [7.7, 9.9]])
    assert frame.from_gmsh(frame.to_gmsh(points)) == pytest.approx(points, rel=1e-15)


def test_a_section_without_extent_is_refused():
    with pytest.raises(MeshingError, match=r"no extent: it reaches from \[1.0, 1.0\] to \[1.0, 1.0\]"):
        Frame.around(np.ones(2), np.ones(2))


@pytest.mark.parametrize("scale", [1e-3, 1.0, 1e4])
def test_overlap_names_both_parts_and_the_area(scale):
    faces = {
        "plate top": rectangle(0, 0, 10 * scale, 10 * scale),
        "web": rectangle(8 * scale, 3 * scale, 20 * scale, 10 * scale),
    }
    with pytest.raises(MeshingError) as caught:
        built(faces)
    area, y, z = 14 * scale**2, 9 * scale, 6.5 * scale
    assert str(caught.value) == (
        f"parts 'plate top' and 'web' overlap by {area:.6g} mm² at ({y:.6g}, {z:.6g}). Move one of them, or say "
        'embedded_in = "..." in the inner one'
    )


def test_all_overlaps_are_told_at_once():
    faces = {"a": rectangle(0, 0, 10, 10), "b": rectangle(9, 0, 20, 10), "c": rectangle(19, 0, 30, 10)}
    with pytest.raises(MeshingError, match=r"'a' and 'b' overlap by 10 .*'b' and 'c' overlap by 10 "):
        built(faces)


def test_two_bars_that_overlap_inside_a_block_are_told():
    faces = {"block": rectangle(0, 0, 10, 10), "bar 1": rectangle(2, 2, 5, 5), "bar 2": rectangle(4, 4, 7, 7)}
    with pytest.raises(MeshingError, match="'bar 1' and 'bar 2' overlap by 1 "):
        built(faces, {"bar 1": "block", "bar 2": "block"})


@pytest.mark.parametrize("host", ["block", "nobody"])
def test_an_embedded_part_outside_its_host_is_a_fault(host):
    faces = {"block": rectangle(0, 0, 10, 10), "bar": rectangle(12, 2, 15, 5)}
    rule = rf'part "bar": embedded_in must name a part that it lies in \(got \'{host}\'\)'
    with pytest.raises(InputError, match=rule):
        built(faces, {"bar": host})


def test_a_host_that_vanishes_is_told():
    faces = {"block": rectangle(0, 0, 10, 10), "cover": rectangle(-1, -1, 11, 11)}
    with pytest.raises(MeshingError, match="part 'block' is wholly displaced"):
        built(faces, {"cover": "block"})


def test_hosts_stop_at_a_ring_of_names():
    whole = section({"a": rectangle(0, 0, 1, 1), "b": rectangle(0, 0, 1, 1)}, {"a": "b", "b": "a"})
    assert hosts(whole, whole.parts[0], {"a": 0, "b": 1}) == {0, 1}


@pytest.mark.parametrize("clockwise", [False, True])
@pytest.mark.parametrize("hole_clockwise", [False, True])
def test_loops_may_run_either_way_round(clockwise, hole_clockwise):
    outer, hole = [(0, 0), (10, 0), (10, 10), (0, 10)], [(2, 2), (4, 2), (4, 4), (2, 4)]
    face = polygon(outer[::-1] if clockwise else outer, hole[::-1] if hole_clockwise else hole)
    assert built({"p": face})[1] == pytest.approx([96.0], rel=1e-12)


@pytest.mark.parametrize("sweep", [0.01, 1.0, math.pi / 2, 2.0, math.pi, 4.0, 6.2])
@pytest.mark.parametrize("ccw", [True, False])
def test_arcs_of_any_sweep(sweep, ccw):
    angle = sweep if ccw else -sweep
    end = (5 * math.cos(angle), 5 * math.sin(angle))
    centre = (0.0, 0.0)
    loop = Loop((Line(centre, (5.0, 0.0)), Arc((5.0, 0.0), end, centre, ccw), Line(end, centre)))
    assert built({"sector": Face(loop)})[1] == pytest.approx([12.5 * sweep], rel=1e-9)


@pytest.mark.parametrize("ratio", [0.3, 1.0, 2.5])
@pytest.mark.parametrize("ccw", [True, False])
def test_ellipse_arcs_with_either_axis_longer(ratio, ccw):
    centre, major = (1.0, 2.0), (3.0, 4.0)
    a, b = (4.0, 6.0), (-2.0, -2.0)
    loop = Loop((EllipseArc(a, b, centre, major, ratio, ccw), EllipseArc(b, a, centre, major, ratio, ccw)))
    assert built({"ellipse": Face(loop)})[1] == pytest.approx([math.pi * 25 * ratio], rel=1e-9)


def test_a_single_part_is_one_face_and_keeps_its_name():
    geometry, areas = built({"tube": Face(circle(10.0), (circle(8.0),))})
    assert (len(geometry.faces), geometry.part_names) == (1, ("tube",))
    assert areas == pytest.approx([36 * math.pi], rel=1e-9)


@pytest.mark.parametrize(
    ("outer", "hole", "place"),
    [
        ([(0, 0), (4, 4), (2, 0), (0, 2)], None, r"\(1, 1\)"),
        ([(0, 0), (4, 0), (6, 0), (4, 0), (4, 4), (0, 4)], None, r"\(6, 0\)"),
        ([(0, 0), (4, 0), (4, 4), (0, 4)], [(3, 1), (5, 1), (5, 3), (3, 3)], r"\(4, 1\)"),
        ([(0, 0), (4, 0), (4, 4), (0, 4)], [(0, 1), (1, 1), (1, 2), (0, 2)], r"\(0, 1\)"),
    ],
)
def test_an_outline_that_crosses_itself_never_reaches_gmsh(outer, hole, place):
    # gmsh was seen not to come back from such outlines
    face = polygon(outer, hole) if hole else polygon(outer)
    with pytest.raises(MeshingError, match=rf"part 'p': its outline crosses or touches itself or a hole at {place}"):
        built({"p": face})


@pytest.mark.parametrize("second", [{}, {"q": rectangle(10, 10, 11, 11)}])
def test_a_hole_outside_its_part_is_told(second):
    face = polygon([(0, 0), (2, 0), (2, 2), (0, 2)], [(5, 5), (6, 5), (6, 6), (5, 6)])
    with pytest.raises(
        MeshingError, match=r"part 'p': its outline less its holes has an area of 3 mm², but gmsh makes \S+ of it"
    ):
        built({"p": face, **second})
