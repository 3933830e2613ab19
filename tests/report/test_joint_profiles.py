"""Edges of a glue line joined in order, whatever their order in the mesh."""

from __future__ import annotations

import numpy as np
import pytest

from xsec_fem.recovery.joint_results import JointProfile
from xsec_fem.report.joint_profiles import along, chained


def lines(*spans: tuple[float, float]) -> JointProfile:
    """Straight lines of three points on the y axis, the stress equal to y."""
    y = np.array([np.linspace(a, b, 3) for a, b in spans])
    return JointProfile(np.stack([y, np.zeros_like(y)], axis=-1), y)


@pytest.mark.parametrize("order", [(0, 1, 2), (2, 0, 1), (1, 2, 0)])
def test_lines_that_meet_are_one_piece(order):
    spans = [(0, 1), (1, 2.5), (2.5, 3)]
    ((places, across),) = chained(lines(*(spans[k] for k in order)))
    assert places[:, 0].tolist() == [0, 0.5, 1, 1, 1.75, 2.5, 2.5, 2.75, 3]
    assert across.tolist() == places[:, 0].tolist()
    assert along(places)[-1] == pytest.approx(3.0)


def test_a_gap_makes_two_pieces_and_a_ring_is_one():
    assert len(chained(lines((0, 1), (2, 3)))) == 2
    corner = np.array([[0, 0], [1, 0], [1, 1], [0, 1], [0, 0]], float)
    ring = JointProfile(np.stack([corner[:-1], corner[1:]], axis=1), np.ones((4, 2)))
    ((places, _),) = chained(ring)
    assert along(places)[-1] == pytest.approx(4.0)
    assert chained(JointProfile(np.zeros((0, 2, 2)), np.zeros((0, 2)))) == []


def test_a_solved_glue_line_runs_from_side_to_side(solved):
    (joint,) = solved("boards").cases[0].joints
    ((places, across),) = chained(joint.profiles[0])
    assert np.abs(np.diff(places[:, 0])).sum() == pytest.approx(100.0)
    assert np.abs(places[:, 1]).max() < 1e-9
    mean = float(np.trapezoid(across, along(places)) / 100)
    assert mean == pytest.approx(joint.mean, rel=1e-3)  # trapezoids between nodes of a curve that is nearly flat
    assert np.abs(across).max() == pytest.approx(abs(joint.peak), rel=1e-12)
