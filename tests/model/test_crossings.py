import pytest

from xsec_fem.model.arcs import circle_loop
from xsec_fem.model.crossings import first_crossing
from xsec_fem.model.outline import Arc, Isometry, Line, Loop, polygon_loop


@pytest.mark.parametrize(
    ("points", "where"),
    [
        ([(0, 0), (10, 10), (10, 0), (0, 10)], (5, 5)),  # a bow tie
        ([(0, 0), (10, 0), (5, 0)], (0, 0)),  # no area: folds back at both ends
        ([(0, 0), (10, 0), (10, 10), (5, 0), (0, 10)], (5, 0)),  # a corner touches a side
        ([(0, 0), (10, 0), (10, 5), (12, 5), (12, 0), (4, 0), (4, -5)], (7, 0)),  # lies on itself from 4 to 10
        ([(0, 0), (10, 0), (10, 10), (20, 10), (10, 10), (0, 10)], (20, 10)),  # a spike
    ],
)
def test_crossing_polygons_are_found_with_their_place(points, where):
    assert first_crossing([polygon_loop(points)]) == pytest.approx(where)
    move = Isometry.rotation(37).then(Isometry.translation((100, -50)))
    assert first_crossing([polygon_loop(points).moved(move)]) is not None


@pytest.mark.parametrize(
    "points",
    [
        [(0, 0), (10, 0), (10, 10)],
        [(0, 0), (5, 0), (10, 0), (10, 10)],  # a point on a straight side
        [(0, 0), (10, 0), (10, 10), (9, 1)],  # acute
        [(0, 0), (1000, 0), (1000, 1e-3), (0, 1e-3)],  # thin
    ],
)
def test_simple_polygons_pass(points):
    assert first_crossing([polygon_loop(points)]) is None
    assert first_crossing([polygon_loop(points).reversed()]) is None


def test_arcs_count():
    bulge = Arc((10, 10), (10, 0), (10, 5), ccw=True)  # runs through the inside to y = 5
    inside = Loop((Line((0, 0), (0, 10)), Line((0, 10), (10, 10)), bulge, Line((10, 0), (0, 0))))
    assert first_crossing([inside]) is None
    far = Arc((10, 10), (10, 0), (10, 5), ccw=True)
    narrow = Loop((Line((6, 0), (6, 10)), Line((6, 10), (10, 10)), far, Line((10, 0), (6, 0))))
    assert first_crossing([narrow])[0] == pytest.approx(6)


def test_two_loops():
    outer = circle_loop(5.0)
    assert first_crossing([outer, circle_loop(3.0)]) is None
    assert first_crossing([outer, circle_loop(3.0).moved(Isometry.translation((3, 0)))]) is not None


def test_many_sides_are_searched_in_blocks():
    comb = [(float(k), 5.0 if k % 2 else 0.0) for k in range(1200)]
    assert first_crossing([polygon_loop([*comb, (1199.0, -1.0), (0.0, -1.0)])]) is None
    assert first_crossing([polygon_loop([*comb, (1199.0, 1.0), (0.0, 1.0)])]) is not None
