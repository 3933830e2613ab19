"""Sharp corners of the union of all parts, slits of joints included."""

from __future__ import annotations

import math

import numpy as np
import pytest

from tests.meshing.sections import circle, i_section, joint, polygon, rectangle, section
from xsec_fem.meshing.curves import read_curves, sharp_corners, slit_curves
from xsec_fem.meshing.gmsh_session import gmsh_session
from xsec_fem.meshing.occ_faces import build_geometry
from xsec_fem.model.outline import Face
from xsec_fem.model.section import Bond, Joint


def curves_of(whole):
    with gmsh_session() as gmsh:
        geometry = build_geometry(gmsh, whole, [point for one in whole.joints for point in one.vertices])
        curves = read_curves(gmsh, geometry)
    return curves, geometry


def corners_of(whole):
    curves, geometry = curves_of(whole)
    points = geometry.frame.from_gmsh(sharp_corners(curves, slit_curves(curves, whole.joints, geometry)))
    return sorted(map(tuple, np.round(points, 9).tolist()))


T_PLATES = {"flange": rectangle(-15, 0, 15, 2), "web": rectangle(-1, -20, 1, 0)}
ROOTS = [(-1.0, 0.0), (1.0, 0.0)]


def wedge(degrees):
    """A polygon with one re-entrant corner of that interior angle at the origin."""
    half = math.pi - math.radians(degrees) / 2
    return polygon([(0, 0), (math.cos(half), math.sin(half)), (-2, 2), (-2, -2), (math.cos(half), -math.sin(half))])


@pytest.mark.parametrize(
    ("faces", "expected"),
    [
        ({"r": rectangle(0, 0, 2, 1)}, []),
        ({"L": polygon([(0, 0), (8, 0), (8, 1), (1, 1), (1, 10), (0, 10)])}, [(1.0, 1.0)]),
        ({"L": polygon([(0, 10), (1, 10), (1, 1), (8, 1), (8, 0), (0, 0)])}, [(1.0, 1.0)]),
        ({"I": i_section(300.0, 150.0, 10.7, 7.1, 15.0)}, []),
        (T_PLATES, ROOTS),
        ({"disc": Face(circle(5.0))}, []),
        ({"tube": Face(circle(5.0), (circle(4.0),))}, []),
        ({"plate": rectangle(-9, -9, 9, 9), "step": rectangle(9, -9, 12, 0)}, [(9.0, 0.0)]),
        ({"plate": Face(rectangle(-9, -9, 9, 9).outer, (circle(3.0, start=0.3),)), "rod": Face(circle(3.0))}, []),
        ({"box": polygon([(0, 0), (9, 0), (9, 9), (0, 9)], [(1, 1), (8, 1), (8, 8), (1, 8)])},
         [(1.0, 1.0), (1.0, 8.0), (8.0, 1.0), (8.0, 8.0)]),
    ],
)  # fmt: skip
def test_corners_of_the_union(faces, expected):
    assert corners_of(section(faces)) == expected


@pytest.mark.parametrize(("degrees", "sharp"), [(184, False), (186, True), (270, True), (355, True)])
def test_the_limit_is_185_degrees(degrees, sharp):
    assert corners_of(section({"w": wedge(degrees)})) == ([(0.0, 0.0)] if sharp else [])


@pytest.mark.parametrize("kind", ["contact", "fillet weld", "fasteners"])
def test_a_joint_that_parts_the_faces_makes_a_slit(kind):
    faces = {"left": rectangle(-5, 0, 0, 10), "right": rectangle(0, 0, 5, 10), "cap": rectangle(-5, 10, 5, 12)}
    # the slit runs from the free face at (0, 0) to the cap, where it ends in the solid: 360 degrees
    assert corners_of(section(faces, joints=(joint("left", "right", kind),))) == [(0.0, 10.0)]
    assert corners_of(section(faces, joints=(joint("right", "left", kind),))) == [(0.0, 10.0)]
    assert corners_of(section(faces, joints=(joint("left", "cap", "glue"),))) == []


def test_a_bonded_strip_of_a_slit_has_a_corner_at_either_end():
    faces = {"lower": rectangle(-50, -6, 50, 0), "upper": rectangle(-50, 0, 50, 6)}
    ends = ((15.0, 0.0), (25.0, 0.0))
    row = Joint("row", ("lower",), ("upper",), "fasteners", bonds=(Bond("row y = 20", ends),), vertices=ends)
    assert corners_of(section(faces, joints=(row,))) == list(ends)


def test_a_slit_cancels_the_corners_at_its_ends():
    # flange and web apart: both are rectangles without a re-entrant corner
    assert corners_of(section(T_PLATES, joints=(joint("flange", "web"),))) == []


def test_a_disc_on_a_plate_is_no_corner_of_solid():
    # tangent from outside: the angles are 180 degrees in the plate and 180 in the disc, with a cusp of air between
    faces = {"plate": rectangle(-9, -2, 9, 0), "disc": Face(circle(3.0, (0.0, 3.0)))}
    assert corners_of(section(faces)) == []


def test_sides_of_a_curve_and_lengths():
    curves, geometry = curves_of(section({"one": rectangle(0, 0, 4, 3), "two": rectangle(4, 0, 9, 3)}))
    shared = [curve for curve in curves if None not in (curve.left, curve.right)]
    assert len(curves) == 7
    assert len(shared) == 1
    up = shared[0].points[-1, 1] > shared[0].points[0, 1]
    assert (shared[0].left, shared[0].right) == ((0, 1) if up else (1, 0))
    lengths = sorted(curve.length / geometry.frame.factor for curve in curves)
    assert lengths == pytest.approx([3, 3, 3, 4, 4, 5, 5], rel=1e-12)


def test_length_of_an_arc_is_good_enough_for_a_size():
    curves, geometry = curves_of(section({"disc": Face(circle(2.0))}))
    assert [curve.length / geometry.frame.factor for curve in curves] == pytest.approx([math.pi] * 4, rel=1e-2)
