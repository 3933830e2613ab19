import itertools
import math

import pytest

from xsec_fem.model.offset import MidLine
from xsec_fem.model.outline import Arc

ELBOW = ((0.0, 0.0), (100.0, 0.0), (100.0, 60.0))
STAIR = ((0.0, 0.0), (100.0, 0.0), (100.0, 60.0), (150.0, 90.0))
FRAME = ((0.0, 0.0), (100.0, 0.0), (80.0, 60.0), (0.0, 50.0))


def mid_length(points, radius, closed):
    """Length of a line with bends of that radius on the mid-line: each bend swaps 2 r tan(a/2) for r a."""
    n = len(points)
    total = sum(math.dist(points[k], points[(k + 1) % n]) for k in range(n if closed else n - 1))
    for k in range(0 if closed else 1, n if closed else n - 1):
        (ay, az), (by, bz), (cy, cz) = points[k - 1], points[k], points[(k + 1) % n]
        turn = abs(math.remainder(math.atan2(cz - bz, cy - by) - math.atan2(bz - az, by - ay), 2 * math.pi))
        total += radius * (turn - 2 * math.tan(turn / 2))
    return total


@pytest.mark.parametrize("points", [ELBOW, STAIR, ELBOW[::-1], STAIR[::-1]])
@pytest.mark.parametrize("bend", [0.5, 6.0, 20.0])
def test_area_of_a_bent_strip_is_thickness_times_length(points, bend):
    face = MidLine(points, 4.0, bend).face()  # Pappus: exact for concentric bends
    assert face.area == pytest.approx(4.0 * mid_length(points, bend + 2, False), rel=1e-13)


@pytest.mark.parametrize("points", [ELBOW, STAIR])
def test_area_of_a_mitred_strip_is_thickness_times_length(points):
    assert MidLine(points, 4.0).face().area == pytest.approx(4.0 * mid_length(points, 0, False), rel=1e-13)


def test_a_fold_is_sharp_inside_and_round_outside():
    # the mitred corner less the spandrel (1 - pi/4) t^2 outside
    assert MidLine(ELBOW, 4.0, 0.0).face().area == pytest.approx(4 * 160 - (1 - math.pi / 4) * 16, rel=1e-13)


@pytest.mark.parametrize("points", [FRAME, FRAME[::-1]])
@pytest.mark.parametrize("bend", [None, 5.0])
def test_closed_strips_have_one_hole(points, bend):
    face = MidLine(points, 4.0, bend, closed=True).face()
    assert len(face.holes) == 1
    radius = 0.0 if bend is None else bend + 2
    assert face.area == pytest.approx(4.0 * mid_length(points, radius, True), rel=1e-13)
    assert abs(face.holes[0].area) < abs(face.outer.area)


def test_inner_and_outer_arcs_are_concentric():
    arcs = [s for s in MidLine(STAIR, 4.0, 6.0).face().outer.segments if isinstance(s, Arc)]
    assert sorted(round(arc.radius, 10) for arc in arcs) == [6, 6, 10, 10]
    for inner in (arc for arc in arcs if arc.radius < 7):
        nearest = min(math.dist(inner.centre, arc.centre) for arc in arcs if arc.radius > 7)
        assert nearest < 1e-12  # coordinates near 100: a few of their last digits (1.4e-14)


def test_mid_line_with_bends():
    points = MidLine(ELBOW, 4.0, 6.0).bent()
    assert points[0] == (0, 0)
    assert points[-1] == (100, 60)
    length = sum(math.dist(a, b) for a, b in itertools.pairwise(points))
    # chords of 5 deg are h^2/24 = 3.2e-4 shorter than their arc, which is 8 pi/2 long: 4e-3
    assert 0 < mid_length(ELBOW, 8.0, False) - length < 4.1e-3


def test_bends_that_do_not_fit():
    (found,) = MidLine(ELBOW, 4.0, 70.0).misfits()
    assert (found.key, found.radius, found.limit) == ("bend_radius", 70.0, 58.0)  # 60 less half the thickness
    assert "points[1] to points[2]" in found.edge


def test_a_thickness_that_does_not_even_fold():
    (found,) = MidLine(((0, 0), (100, 0), (100, 3), (0, 3)), 4.0, 1.0).misfits()
    assert found.key == "thickness"
    assert found.limit == pytest.approx(3.0, rel=2e-6)  # less the room left between two sharp corners


def test_mitres_to_one_side_need_more_room_than_a_joggle():
    u, joggle = ((0, 0), (100, 0), (100, 3), (0, 3)), ((0, 0), (100, 0), (100, 3), (200, 3))
    (found,) = MidLine(u, 4.0).misfits()
    assert found.key == "thickness"
    assert found.limit == pytest.approx(3.0, rel=2e-6)  # less the room left between two sharp corners
    assert MidLine(joggle, 4.0).misfits() == []
    assert MidLine(joggle, 4.0).face().area == pytest.approx(4 * 203, rel=1e-13)


def test_reversal():
    assert MidLine(((0, 0), (100, 0), (50, 0)), 4.0).reversals() == [1]
    assert MidLine(STAIR, 4.0).reversals() == []
