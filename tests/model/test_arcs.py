import itertools
import math

import pytest

from xsec_fem.model.arcs import at_angle, centred_arc, circle_loop, pieces, swept_arcs, through_arc
from xsec_fem.model.outline import Arc


@pytest.mark.parametrize(("sweep", "count"), [(10, 1), (90, 1), (91, 2), (180, 2), (270, 3), (359, 4)])
@pytest.mark.parametrize("ccw", [True, False])
def test_pieces_are_even_at_most_90_and_chained(sweep, count, ccw):
    arc = Arc(at_angle(5, 20), at_angle(5, 20 + (sweep if ccw else -sweep)), (0, 0), ccw)
    found = pieces(arc)
    assert len(found) == count
    assert found[0].start == arc.start
    assert found[-1].end == arc.end
    assert all(a.end == b.start for a, b in itertools.pairwise(found))
    for piece in found:
        assert abs(math.degrees(piece.sweep)) == pytest.approx(sweep / count, rel=1e-12)
        assert piece.ccw == ccw


def test_circle_has_its_quarter_points_exactly():
    assert [arc.start for arc in circle_loop(7.3).segments] == [(7.3, 0), (0, 7.3), (-7.3, 0), (0, -7.3)]
    assert circle_loop(7.3).bounds() == (-7.3, -7.3, 7.3, 7.3)


def test_a_whole_turn_from_any_angle_closes_bit_by_bit():
    arcs = swept_arcs(50, 10, 370)
    assert arcs[-1].end == arcs[0].start


@pytest.mark.parametrize(("start", "end", "ccw"), [((10, 0), (0, 10), True), ((0, 10), (10, 0), False)])
def test_a_centred_arc_takes_the_shorter_way(start, end, ccw):
    arc = centred_arc(start, end, (0, 0))
    assert arc.ccw == ccw
    assert abs(arc.sweep) == pytest.approx(math.pi / 2)


def test_a_roughly_typed_centre_is_put_on_the_bisector():
    arc = centred_arc((10, 0), (7.0711, 7.0711), (0, 0))
    # 7.0711 sqrt(2) is 4.5e-5 too long; the shift is half of that over the chord's share, of the same size
    assert math.dist(arc.centre, (0, 0)) < 1e-4
    assert math.dist(arc.centre, arc.start) == pytest.approx(math.dist(arc.centre, arc.end), rel=1e-14)


def test_a_half_circle_about_a_centre_has_no_side():
    assert centred_arc((10, 0), (-10, 0), (0, 0)) is None


@pytest.mark.parametrize("degrees", [10, 90, 180, 200, 350])
@pytest.mark.parametrize("share", [0.1, 0.5, 0.8])
@pytest.mark.parametrize("sense", [1, -1])
def test_an_arc_through_a_point_passes_it(degrees, share, sense):
    centre = (3, -2)
    start, through, end = (
        (centre[0] + p[0], centre[1] + p[1]) for p in (at_angle(5, 30 + sense * k * degrees) for k in (0, share, 1))
    )
    arc = through_arc(start, through, end)
    # the three points of a 10 deg arc fix the centre to about eps (radius / sagitta of its tenth) = 1e-11
    assert arc.centre == pytest.approx(centre, abs=1e-10)
    assert math.degrees(arc.sweep) == pytest.approx(sense * degrees, abs=1e-9)


def test_three_points_on_a_line_make_no_arc():
    assert through_arc((0, 0), (1, 1), (2, 2)) is None
