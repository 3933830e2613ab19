"""A general-purpose library finds the same discrete solution on the section where no term can hide."""

from __future__ import annotations

import numpy as np
import pytest

from tests.chain import Solved
from validation.second_opinions import angle_with_board, scikit_fem

pytest.importorskip("skfem")

AGREEMENT = 1e-11  # relative; 3e-13 and better is seen


@pytest.mark.parametrize("order", [1, 2, 3, 4])
def test_same_discrete_solution(order: int) -> None:
    section = angle_with_board(order)
    opinion, stiffness = scikit_fem(section), Solved(section.mesh, section.moduli).stiffness
    assert pytest.approx(opinion.GIT, rel=AGREEMENT) == stiffness.GIT
    assert stiffness.EIw == pytest.approx(opinion.EIw, rel=AGREEMENT)
    scale = np.sqrt(np.outer(*2 * [np.diag(opinion.flexibility)]))
    np.testing.assert_allclose(stiffness.flexibility / scale, opinion.flexibility / scale, atol=AGREEMENT)
    np.testing.assert_allclose(stiffness.shear_centre, opinion.shear_centre, rtol=AGREEMENT)
    np.testing.assert_allclose(stiffness.trefftz_centre, opinion.trefftz_centre, rtol=AGREEMENT)
    # the section is truly unsymmetric, so that no term can hide
    assert np.abs(np.corrcoef(stiffness.shear_flexibility)).min() > 0.01
    assert np.linalg.norm(stiffness.shear_centre - stiffness.trefftz_centre) > 1e-3
