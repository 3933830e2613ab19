"""Numbers of the parts: inside where there is room, never on top of each other."""

from __future__ import annotations

import math
from itertools import combinations, pairwise

import pytest
import shapely
from hypothesis import given
from hypothesis import strategies as st

from tests.report.sections import BOARDS, TEE
from xsec_fem.model.reader import parse_section
from xsec_fem.report.part_labels import part_labels, spread
from xsec_fem.report.part_outlines import PartOutline, part_outlines

ascending = st.lists(st.floats(-100, 100), min_size=1, max_size=12).map(sorted)


@given(ascending)
def test_spread_keeps_order_and_distance(wanted):
    found = spread(wanted, 5.0)
    assert len(found) == len(wanted)
    assert all(b - a >= 5.0 - 1e-9 for a, b in pairwise(found))  # round-off of the sums


@given(ascending)
def test_spread_leaves_alone_what_is_apart(wanted):
    apart = [10.0 * k + w / 100 for k, w in enumerate(wanted)]
    assert spread(apart, 5.0) == pytest.approx(apart, abs=1e-9)  # round-off of the sums


def layers(count: int, thickness: float) -> list[PartOutline]:
    import numpy as np

    return [
        PartOutline(f"layer {k}", "m", k + 1, (np.array([(0, t), (100, t), (100, t + thickness), (0, t + thickness)]),))
        for k, t in enumerate(np.arange(count) * thickness)
    ]


@pytest.mark.parametrize("outlines", [layers(3, 20.0), layers(12, 0.3), layers(30, 4.0)])
def test_every_part_has_one_label_apart_from_the_others(outlines):
    scale = 0.05
    labels = part_labels(outlines, scale, 100.0, [])
    assert sorted(label.number for label in labels) == [outline.number for outline in outlines]
    for a, b in combinations(labels, 2):
        assert math.dist(a.place, b.place) * scale > 0.15  # a number in its circle is about 0.15 inches across


def test_labels_inside_have_room_and_the_others_a_line_to_their_part():
    outlines = part_outlines(parse_section(TEE))
    labels = {label.number: label for label in part_labels(outlines, 0.03, 60.0, [])}
    inside, thin = labels[1], labels[2]
    assert inside.anchor is None
    assert outlines[0].solid.contains(shapely.Point(inside.place))
    assert thin.anchor is not None
    assert outlines[1].solid.distance(shapely.Point(thin.anchor)) < 1e-9  # on the outline, to round-off


def test_labels_stay_away_from_places_taken():
    outlines = part_outlines(parse_section(BOARDS))
    free = part_labels(outlines, 0.05, 50.0, [])[0].place
    moved = part_labels(outlines, 0.05, 50.0, [free])[0].place
    assert math.dist(free, moved) * 0.05 > 0.2
