"""Identities of the discrete equations: they hold to round-off on any mesh, for any materials."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings

from tests import structured
from tests.chain import Solved, solved
from tests.theory.strategies import RandomSection, random_sections
from xsec_fem.errors import SolveError
from xsec_fem.fem.mapping import batches
from xsec_fem.theory.warping import (
    POISSON,
    PROBLEMS,
    SHEAR,
    TORSION,
    WarpingProblem,
    factorise_warping,
    solve_warping,
    warping_loads,
)

# condition number of the meshes here (1e4) times round-off, with a factor of 10 for sums of some thousand terms
IDENTITY = 2e-11

any_section = settings(deadline=None, max_examples=25)

SECTIONS = {
    "disc": lambda: solved(structured.disc(1.0, 2, 4), 0.3),
    "slit ring": lambda: solved(structured.ring_sector(0.8, 1.0, (-180, 180), 24, 1, 3, closed=False), 0.3),
    "grooved disc": lambda: solved(structured.grooved_disc(1.0, 0.5, 2, 3), 0.3),
    "box": lambda: solved(structured.box(10, 1, 2, 2), 0.3),
    "angle": lambda: solved(structured.l_shape(10, 1, 4), 0.3),
}


def check_identities(section: Solved) -> None:
    integrals, area = section.integrals, section.area
    size = np.sqrt(np.outer(np.diag(integrals.energy), np.diag(integrals.energy))).max()
    # resultants: the test functions y and z are in the space
    np.testing.assert_allclose(integrals.resultant[SHEAR], np.eye(2), atol=IDENTITY)
    np.testing.assert_allclose(integrals.resultant[POISSON], 0, atol=IDENTITY)
    scale = np.sqrt(integrals.energy[TORSION, TORSION] * section.moduli.G.max() * area.part_areas.sum())
    np.testing.assert_allclose(integrals.resultant[TORSION], 0, atol=IDENTITY * scale)
    # torque of the unit twist is its energy: ∫ tau . grad omega = 0
    assert integrals.moment[TORSION] == pytest.approx(integrals.energy[TORSION, TORSION], rel=IDENTITY)
    # a field with div tau = 0 is orthogonal to every gradient
    np.testing.assert_allclose(integrals.energy[SHEAR, POISSON], 0, atol=IDENTITY * size)
    np.testing.assert_allclose(integrals.energy[SHEAR, TORSION], 0, atol=IDENTITY * size)
    # reciprocity: the torque of flexure (nu = 0) is minus the work of E f on omega
    np.testing.assert_allclose(
        integrals.moment[SHEAR], -section.warping.problem.a @ integrals.E_omega_r, atol=IDENTITY * scale
    )
    # coupling by two routes: ∫ tau_V . (grad omega + t) is the torque of the Poisson part
    np.testing.assert_allclose(
        integrals.energy[POISSON, TORSION], integrals.moment[POISSON], atol=IDENTITY * (size + scale)
    )


@any_section
@given(random_sections())
def test_identities_on_random_sections(random: RandomSection) -> None:
    check_identities(random.solved())


@pytest.mark.parametrize("name", SECTIONS)
def test_identities_on_curved_and_thin_sections(name: str) -> None:
    check_identities(SECTIONS[name]())


@any_section
@given(random_sections())
def test_trefftz_centre_is_where_flexure_without_nu_has_no_torque(random: RandomSection) -> None:
    """Two routes: the moments of omega, and the torque of the fields with d = 0; so it does not depend on nu."""
    section = random.solved()
    torque = section.integrals.moment[SHEAR]
    np.testing.assert_allclose(section.stiffness.trefftz_centre, [torque[1], -torque[0]], atol=10 * IDENTITY)
    plain = Solved(section.mesh, section.moduli.without_nu())
    np.testing.assert_allclose(plain.stiffness.shear_centre, section.stiffness.trefftz_centre, atol=10 * IDENTITY)


@any_section
@given(random_sections())
def test_functions_have_mean_zero_and_small_residual(random: RandomSection) -> None:
    section = random.solved()
    mean, size = np.zeros(len(PROBLEMS)), np.zeros(len(PROBLEMS))
    for batch in batches(section.mesh):
        weights = batch.weights * section.moduli.E[batch.part][:, None]
        values = np.einsum("qn,mnk->mqk", batch.shape_values, section.warping.functions[batch.nodes])
        mean += np.einsum("mq,mqk->k", weights, values)
        size += np.einsum("mq,mqk->k", weights, np.abs(values))
    np.testing.assert_allclose(mean, 0, atol=1e-12 * size.max())
    assert section.warping.residual < 1e-13
    assert section.warping.load_sum < 1e-12


def test_without_nu_there_is_no_poisson_part() -> None:
    section = solved(structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 2, 3), 0.0)
    assert not section.warping.functions[:, POISSON].any()
    assert not section.integrals.energy[POISSON].any()


def test_loads_sum_to_zero_only_about_the_centroid() -> None:
    """The body force E f about any other origin does not balance, and that is raised, not solved."""
    section = solved(structured.rectangle(2, 1, 3, 2, 2), 0.3)
    loads, sizes = warping_loads(section.warping.problem)
    np.testing.assert_allclose(loads.sum(axis=0), 0, atol=1e-14 * sizes.max())
    wrong = replace(section.area, centroid=section.area.centroid + np.array([0.01, 0.0]))
    problem = WarpingProblem(section.mesh, section.moduli, wrong)
    with pytest.raises(SolveError, match="the load of 'flexure by Vy' does not sum to zero"):
        solve_warping(problem, factorise_warping(problem))
