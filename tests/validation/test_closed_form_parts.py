"""Closed forms of bonded, thin-walled, built-up, orthotropic and rolled sections against each other and against limits."""

from __future__ import annotations

import math

import numpy as np
import pytest

from validation.closed_form import built_up, composite, flexure, thin_walls, torsion, wedges
from validation.closed_form.bonded import ConcentricFlexure, LayeredFlexure, SideBySide, core_share
from validation.closed_form.cells import square_tube_shear_coefficient, two_cell_box
from validation.closed_form.orthotropic import rectangle_flexibility, rectangle_torsion
from validation.closed_form.rolled import i_moments, junction_share, tee_moments, tube_moments
from validation.families.rolled_tables import EN_I, half_digit

NU = 0.3
STEEL = 2 * (1 + NU)  # G = 1


def test_layers_of_one_material_are_a_rectangle() -> None:
    layers = LayeredFlexure(np.array([-1.0, 0.0, 0.3, 1.0]), np.array([STEEL] * 3), 2.0, NU)
    assert 1 / layers.flexibility() / 4 == pytest.approx(flexure.rectangle_shear_coefficient(2, 2, NU), rel=1e-12)
    exact = flexure.rectangle_flexure(np.array([0.4]), np.array([0.2]), 2.0, 2.0, NU / (1 + NU))[0]
    np.testing.assert_allclose(layers.stress(0.4, 0.2), exact, rtol=1e-8)


def test_layers_keep_equilibrium_between_them() -> None:
    layers = LayeredFlexure(np.array([0.0, 1.0, 1.5]), np.array([1.0, 10.0]), 2.0, NU)
    below, above = layers.stress(0.37, 1.0 - 1e-9), layers.stress(0.37, 1.0 + 1e-9)
    assert below[1] == pytest.approx(above[1], abs=1e-7)
    assert above[0] == pytest.approx(10 * below[0], rel=1e-3)  # equal strain along the line between them


def test_side_by_side_agrees_with_the_series_for_torsion() -> None:
    pair = SideBySide(np.array([-1.0, 0.0, 1.0]), np.array([1.0, 4.0]), 2.0, NU)
    assert pair.torsion() == pytest.approx(composite.side_by_side_torsion(1.0, 2.0, *pair.G), rel=1e-10)


def test_side_by_side_of_one_material_is_a_rectangle() -> None:
    plain = SideBySide(np.array([-0.5, 0.1, 0.5]), np.array([STEEL, STEEL]), 2.0, NU)
    assert plain.torsion() == pytest.approx(torsion.rectangle_torsion_constant(1, 2), rel=1e-10)
    assert plain.shear_centre() == pytest.approx(0.0, abs=1e-12)
    assert 1 / plain.flexibility() / 2 == pytest.approx(flexure.rectangle_shear_coefficient(1, 2, NU), rel=1e-10)


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
def test_core_and_sleeve_have_the_circle_and_the_ring_as_limits(nu: float) -> None:
    E = 2 * (1 + nu)
    circle = ConcentricFlexure(0.5, 1.0, (E, E), nu)
    assert 1 / circle.flexibility() / np.pi == pytest.approx(flexure.circle_shear_coefficient(nu), rel=1e-12)
    ring = ConcentricFlexure(0.5, 1.0, (1e-9 * E, E), nu)
    assert 1 / ring.flexibility() / (np.pi * 0.75) == pytest.approx(flexure.ring_shear_coefficient(0.5, nu), rel=1e-8)


def test_core_and_sleeve_carry_the_force() -> None:
    section = ConcentricFlexure(1.0, 2.0, (2.6, 7.8), NU)
    x, weight = np.polynomial.legendre.leggauss(12)
    total = 0.0
    for low, high, sleeve in ((0.0, 1.0, False), (1.0, 2.0, True)):
        r = (low + high) / 2 + x * (high - low) / 2
        radial, hoop = section.polar(r, sleeve)
        total += (high - low) / 2 * np.pi * float(weight @ (r * (radial + hoop)))  # tau_xz = tau_r sin + tau_theta cos
    assert total == pytest.approx(1.0, rel=1e-12)
    assert section.polar(np.array([2.0]), True)[0][0] == pytest.approx(0.0, abs=1e-15)


def test_share_of_the_core() -> None:
    assert core_share(1, 2, (1, 3)) == pytest.approx(0.0217391304347826, rel=1e-12)  # 1/46


@pytest.mark.parametrize("nu", [0.0, 0.3])
def test_two_cells_keep_equilibrium(nu: float) -> None:
    box = two_cell_box(100.0, (100.0, 150.0), (2.0, 1.0, 3.0), 1.5, nu)
    start, middle = box.shear((0.0, 1.0))
    for k in range(3):  # parabola through start, middle and, by symmetry about mid-height, the same end
        assert start[k] < middle[k]
    assert sum((2 * start[k] + 4 * middle[k]) / 6 for k in range(3)) * 100.0 == pytest.approx(1.0, rel=1e-12)


def test_equal_cells_share_nothing_with_the_middle_web_in_torsion() -> None:
    box = two_cell_box(100.0, (100.0, 100.0), (2.0, 1.0, 2.0), 2.0)
    IT, flows = box.torsion()
    assert flows[1] == pytest.approx(0.0, abs=1e-9)
    assert pytest.approx(4 * 20000.0**2 / (600 / 2), rel=1e-12) == IT  # Bredt without the web


def test_no_poisson_effect_on_symmetric_cells() -> None:
    plain, full = (two_cell_box(100.0, (100.0, 100.0), (2.0, 1.0, 2.0), 2.0, nu).shear_centre() for nu in (0.0, 0.3))
    np.testing.assert_allclose(plain, [100.0, 50.0], rtol=1e-12)
    np.testing.assert_allclose(full, plain, rtol=1e-12)


def test_square_tube() -> None:
    assert square_tube_shear_coefficient() == pytest.approx(5 / 12, rel=1e-14)


def test_arc_of_a_full_turn_is_a_slit_tube() -> None:
    e, IT, Iw = thin_walls.arc(2.0, math.pi, 0.1)
    assert e == pytest.approx(4.0)
    assert pytest.approx(2 * math.pi * 2.0 * 0.1**3 / 3) == IT
    assert pytest.approx(2 * math.pi * 2.0**5 * 0.1 * (math.pi**2 / 3 - 2)) == Iw
    assert thin_walls.end_loss() == pytest.approx(0.63025, abs=1e-5)


def test_thin_channel() -> None:
    e, IT, Iw = thin_walls.channel(120.0, 60.0, 4.0)
    assert (e, IT, Iw) == pytest.approx((22.5, 5120.0, 907200000.0))


@pytest.mark.parametrize("ratio", [0.1, 1.0, 10.0])
def test_half_and_quarter_plane_are_two_sectors(ratio: float) -> None:
    assert wedges.half_and_quarter(ratio) == pytest.approx(wedges.two_sectors(180.0, 90.0, ratio), abs=1e-13)


def test_two_sectors_of_one_material_are_a_wedge() -> None:
    assert wedges.two_sectors(200.0, 70.0, 1.0) == pytest.approx(wedges.wedge(270.0), abs=1e-13)


def test_built_up_rectangle_is_a_rectangle() -> None:
    beam = built_up.BuiltUp([built_up.rectangle(2, 1, 0, 0.5), built_up.rectangle(2, 3, 0, 2.5)])
    np.testing.assert_allclose(beam.centroid, [0, 2])
    np.testing.assert_allclose(beam.EI, [[4 * 8 / 12, 0], [0, 2 * 64 / 12]], atol=1e-14)
    assert beam.flow([1], Vz=1.0) == pytest.approx(2 * 3 * 0.5 / (2 * 64 / 12))
    assert beam.flow([0, 1], Vz=1.0) == pytest.approx(0.0, abs=1e-15)


def test_bead_is_half_a_square() -> None:
    lower, upper = built_up.bead(2.0, 0.0, 0.0, True, True), built_up.bead(2.0, 2.0, 2.0, False, False)
    square = built_up.BuiltUp([lower, upper])
    np.testing.assert_allclose(square.centroid, [1, 1])
    np.testing.assert_allclose(square.EI, 16 / 12 * np.eye(2), atol=1e-14)


def test_orthotropic_forms_of_an_isotropic_rectangle() -> None:
    assert rectangle_torsion(1.0, 2.0, 3.0, 3.0) == pytest.approx(
        3 * torsion.rectangle_torsion_constant(1, 2), rel=1e-12
    )
    expected = 1 / (2 * flexure.rectangle_shear_coefficient(1, 2, NU))
    assert rectangle_flexibility(1.0, 2.0, STEEL, 1.0, 1.0, NU) == pytest.approx(expected, rel=1e-12)


def test_orthotropic_rectangle_seen_from_its_side() -> None:
    assert rectangle_torsion(1.0, 2.0, 3.0, 0.5) == pytest.approx(rectangle_torsion(2.0, 1.0, 0.5, 3.0), rel=1e-12)


def test_rolled_forms() -> None:
    d = {key: float(EN_I["IPE 300"][key]) for key in ("h", "b", "tw", "tf", "r")}
    assert i_moments(d)["A"] == pytest.approx(5381.2, abs=0.1)
    assert i_moments(d)["Iy"] == pytest.approx(8356e4, rel=1e-4)
    assert 0.01 < junction_share(d) < 0.05
    tee = tee_moments({"d": 4.0, "bf": 2.0, "tw": 2.0, "tf": 1.0})  # a rectangle 2 x 4
    assert (tee["A"], tee["y"], tee["Ix"]) == pytest.approx((8.0, 2.0, 2 * 64 / 12))
    tube = tube_moments({"h": 11.0, "b": 11.0, "t": 1.0})
    assert (tube["A"], tube["It"]) == pytest.approx((40.0, 1000.0))


@pytest.mark.parametrize(
    ("printed", "digits", "half"),
    [
        ("0.435", 3, 0.0005), ("53.81", 4, 0.005), ("110", 3, 0.5), ("2070", 3, 5.0), ("16000", 3, 50.0),
        ("125900", 4, 50.0), ("8356", 4, 0.5),
    ],
)  # fmt: skip
def test_half_a_digit(printed: str, digits: int, half: float) -> None:
    assert half_digit(printed, digits) == half
