"""The constants of the section as a whole: flexibilities, warping rigidity, the 6 x 6 stiffness."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings

from tests import structured
from tests.chain import Solved, solved
from tests.theory.strategies import RandomSection, random_sections
from xsec_fem.fem.mapping import batches
from xsec_fem.theory.warping import TORSION

ROUND_OFF = 1e-10  # condition number of the meshes (1e4 to 1e5) and of a 3 x 3 inverse, times 2e-16

any_section = settings(deadline=None, max_examples=20)


@any_section
@given(random_sections())
def test_six_by_six_is_symmetric_and_positive_definite(random: RandomSection) -> None:
    six = random.solved().six
    np.testing.assert_array_equal(six, six.T)
    assert np.linalg.eigvalsh(six).min() > 0


@any_section
@given(random_sections())
def test_energy_of_any_forces_is_the_work_on_the_stiffness(random: RandomSection) -> None:
    """F . K^-1 F is the energy of the stresses: sigma²/E + tau . G^-1 tau, integrated without the stiffness' own formulas."""
    section = random.solved()
    F = np.array([1.3, -0.7, 0.4, 0.9, -1.1, 0.6])
    N, Vy, Vz, T, My, Mz = F
    # at the centroid: the shear forces bring a torque about the shear centre
    ysc, zsc = section.stiffness.shear_centre
    torque = T - Vz * ysc + Vy * zsc
    energy = 0.0
    for batch in batches(section.mesh):
        E, G = section.moduli.E[batch.part][:, None], section.moduli.G[batch.part][:, None]
        tau = section.warping.stresses(batch)
        shear = Vy * (tau[:, :, 1] + tau[:, :, 3]) + Vz * (tau[:, :, 2] + tau[:, :, 4])
        shear = shear + torque / section.stiffness.GIT * tau[:, :, TORSION]
        r = batch.points - section.area.centroid
        curvature = np.linalg.solve(section.area.EI, [-Mz, My])  # sigma = E (N/EA + curvature . r)
        sigma = E * (N / section.area.EA + r @ curvature)
        strain = np.linalg.solve(np.broadcast_to(G, (*shear.shape, 2)), shear[..., None])[..., 0]
        energy += float((batch.weights * (sigma**2 / E + (shear * strain).sum(axis=-1))).sum())
    assert F @ np.linalg.solve(section.six, F) == pytest.approx(energy, rel=ROUND_OFF)


@any_section
@given(random_sections())
def test_shear_flexibility_is_that_of_forces_through_the_trefftz_centre(random: RandomSection) -> None:
    """Fields of zero torque about the Trefftz centre: V fields plus a twist; their energy, summed up here."""
    section = random.solved()
    stiffness, energy = section.stiffness, section.integrals.energy
    offset = stiffness.trefftz_centre - stiffness.shear_centre
    pick = np.zeros((2, 5))
    pick[0, [1, 3]] = pick[1, [2, 4]] = 1.0
    pick[:, TORSION] = (
        np.array([-offset[1], offset[0]]) / stiffness.GIT
    )  # the torque that moves V to the Trefftz centre
    np.testing.assert_allclose(
        pick @ energy @ pick.T, stiffness.shear_flexibility, atol=ROUND_OFF * energy[1:, 1:].max()
    )
    # and no energy is shared with torsion
    coupling = pick @ energy[:, TORSION]
    np.testing.assert_allclose(coupling, 0, atol=ROUND_OFF * np.sqrt(energy[TORSION, TORSION] * energy[1:3, 1:3].max()))


@any_section
@given(random_sections())
def test_warping_constant_is_the_least_of_all_poles(random: RandomSection) -> None:
    """E Iw = ∫E omega_s² with omega_s = omega + ysc z - zsc y, integrated; any other pole gives more."""
    section = random.solved()

    def about(pole: np.ndarray) -> float:
        total = 0.0
        for batch in batches(section.mesh):
            r = batch.points - section.area.centroid
            omega = section.warping.functions[batch.nodes, TORSION] @ batch.shape_values.T
            omega = omega + pole[0] * r[..., 1] - pole[1] * r[..., 0]
            total += float((batch.weights * section.moduli.E[batch.part][:, None] * omega**2).sum())
        return total

    centre = section.stiffness.trefftz_centre
    size = section.integrals.E_omega2 + section.area.EI.max()
    assert about(centre) == pytest.approx(section.stiffness.EIw, rel=1e-9, abs=ROUND_OFF * size)
    for step in ([0.1, 0.0], [0.0, 0.1], [-0.07, 0.07]):
        assert about(centre + np.array(step)) > section.stiffness.EIw


def test_beam_with_one_axis_of_symmetry() -> None:
    """Symmetric about y: Vy is uncoupled, Vz couples with T through the shear centre."""
    section = solved(structured.channel(10, 5, 1, 3), 0.3)
    six = section.six
    assert six[1, 2] == pytest.approx(0, abs=1e-9 * six[1, 1])
    assert six[1, 3] == pytest.approx(0, abs=1e-9 * six[3, 3])
    assert abs(six[2, 3]) > 0.01 * np.sqrt(six[2, 2] * six[3, 3])
    flexibility = np.linalg.inv(six[1:4, 1:4])
    # a unit Vz at the centroid twists the beam by -ysc/(G IT), zero mean twist being about the shear centre ...
    ysc_trefftz = section.stiffness.trefftz_centre[0]
    # ... up to the coupling of the zero-mean-twist field, which the Trefftz centre has not
    assert flexibility[1, 2] == pytest.approx(-ysc_trefftz / section.stiffness.GIT, rel=1e-9)


def test_signs_of_bending() -> None:
    """My > 0 stretches +z, Mz > 0 stretches -y; so unequal bending couples with -EIyz."""
    section = solved(structured.l_shape(5, 1, 3), 0.3)
    six, area = section.six, section.area
    assert six[4, 4] == area.EIyy
    assert six[5, 5] == area.EIzz
    assert six[4, 5] == -area.EIyz
    field = section.fields
    top = np.argmax(field.part_nodes.positions[:, 1])
    right = np.argmax(field.part_nodes.positions[:, 0])
    assert field.sigma[top, 1] > 0
    assert field.sigma[right, 2] < 0


@pytest.mark.parametrize("nu", [0.0, 0.3])
def test_closed_circle_has_no_coupling_at_all(nu: float) -> None:
    section = solved(structured.disc(1.0, 2, 4), nu)
    off = section.six - np.diag(np.diag(section.six))
    # centroid and centre of a mesh with four axes of symmetry agree to round-off
    np.testing.assert_allclose(off, 0, atol=1e-12 * section.six.max())
    assert isinstance(section, Solved)
