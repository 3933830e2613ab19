"""The verdict by other limits: places stay, grades change."""

from __future__ import annotations

import pytest

from tests.pipeline.sections import I_SHAPE, section
from xsec_fem import solve
from xsec_fem.elementary.compare import Limits
from xsec_fem.pipeline.judged import judged


@pytest.fixture(scope="module")
def result():
    return solve(section(I_SHAPE + '[[actions]]\nname = "V"\nVz = 1000\n[[actions]]\nname = "N"\nN = 1000\n'))


def test_other_limits_give_other_grades_at_the_same_places(result):
    mild = judged(result, Limits(good=0.5, care=0.95, small=0.5))
    before, after = result.cases[0], mild.cases[0]
    assert [(f.name, f.at, f.ratio) for f in before.verdict.walls] == [
        (f.name, f.at, f.ratio) for f in after.verdict.walls
    ]
    assert {f.grade for f in before.verdict.walls} == {"good", "poor"}
    assert {f.grade for f in after.verdict.walls} == {"good"}
    assert after.comparison.limits == Limits(good=0.5, care=0.95, small=before.comparison.limits.small)


def test_a_case_without_shear_stays_as_it_is(result):
    assert judged(result, Limits(good=0.5)).cases[1] is result.cases[1]
