"""The exact solutions against each other: series, closed forms, limits and quadrature."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.integrate import trapezoid

from validation.closed_form import flexure, torsion
from validation.closed_form.independent_values import RING_SECTORS
from validation.closed_form.polygons import ALL_POLYGONS, POINT_STRESSES
from validation.closed_form.sectors import sector_values
from validation.closed_form.shear_centres import semicircle_shear_centres


@pytest.mark.parametrize("name", RING_SECTORS)
def test_ring_sectors_computed_elsewhere(name: str) -> None:
    other = RING_SECTORS[name]
    ours = sector_values(other.opening_deg, other.inner)
    # the other series was carried to 11 digits; the slope of the thin ones is a small difference: 1e-6
    assert pytest.approx(other.IT, rel=1e-9) == ours.IT
    assert ours.trefftz == pytest.approx(other.trefftz, rel=1e-10)
    assert ours.slope == pytest.approx(other.slope, rel=1e-6)


def test_semicircle_has_closed_forms() -> None:
    series = sector_values(180)
    assert pytest.approx(torsion.semicircle_torsion_constant(1), rel=1e-11) == series.IT
    mean, trefftz = semicircle_shear_centres(1, 0.3)
    assert series.trefftz == pytest.approx(trefftz, rel=1e-12)
    assert series.trefftz + 0.3 / 1.3 * series.slope == pytest.approx(mean, rel=1e-11)


@pytest.mark.parametrize("opening", [90.0, 270.0])
def test_extrapolated_openings_lie_between_their_neighbours(opening: float) -> None:
    here, below, above = (sector_values(opening + step) for step in (0.0, -0.2, 0.2))
    # the mean of two neighbours is off by half the curvature times (0.2 degrees)²: 1.2e-5 of O(1) numbers
    for name in ("IT", "trefftz", "slope"):
        assert getattr(here, name) == pytest.approx((getattr(below, name) + getattr(above, name)) / 2, abs=2e-5)


def test_thin_slit_tube_tends_to_the_thin_formulas() -> None:
    values = sector_values(360, 0.99)
    mean, t = 0.995, 0.01
    length = 2 * np.pi * mean
    # a strip with its two ends (T&G: 0.630); what is left is the curvature's (t/R)²
    assert pytest.approx(length * t**3 / 3 * (1 - 0.630 * t / length), rel=1e-4) == values.IT
    assert values.trefftz == pytest.approx(2 * mean, rel=1e-4)  # O(t²)


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
def test_ellipse_coefficient_of_a_circle(nu: float) -> None:
    assert flexure.ellipse_shear_coefficient(2, 2, nu) == pytest.approx(flexure.circle_shear_coefficient(nu), rel=1e-13)


def test_grashof_shape_at_a_half_is_the_circle() -> None:
    assert flexure.power_shape(0.5) == pytest.approx((np.pi, np.pi / 4), rel=1e-14)


@pytest.mark.parametrize("nu", [0.25, 0.3, 0.4])
def test_grashof_shape_by_quadrature(nu: float) -> None:
    angle = np.linspace(0, np.pi / 2, 20001)
    z = np.sin(angle)
    width = 4 * np.cos(angle) ** (2 * nu + 1)  # trapezium rule: the ends fall off as a power above 1.5
    area, second = trapezoid(width, angle), trapezoid(width * z**2, angle)
    assert flexure.power_shape(nu) == pytest.approx((area, second), rel=1e-6)


@pytest.mark.parametrize("nu", [0.0, 0.25, 0.5])
def test_hyperbola_at_nought_is_the_square(nu: float) -> None:
    area, second = flexure.hyperbola_shape(nu)
    y = np.linspace(-1, 1, 20001)
    top = np.sqrt(1 + nu / (1 + nu) * y**2)
    assert (area, second) == pytest.approx((trapezoid(2 * top, y), trapezoid(2 * top**3 / 3, y)), rel=1e-8)


def test_short_side_of_a_square_is_its_long_one() -> None:
    assert torsion.rectangle_torsion_shorter(1, 1) == pytest.approx(torsion.rectangle_torsion_largest(1, 1), rel=1e-11)


def test_short_side_of_a_strip() -> None:
    """8/pi² times Catalan's constant: 0.742453745422 (table of T&G: 0.743)."""
    assert torsion.rectangle_torsion_shorter(1, 100) == pytest.approx(0.742453745422, rel=1e-11)


def test_hollow_ellipse_without_a_hole() -> None:
    assert torsion.hollow_ellipse_torsion_constant(2, 1, 0.0) == pytest.approx(
        torsion.ellipse_torsion(2, 1)[0], rel=1e-14
    )


def test_point_stresses_belong_to_known_polygons() -> None:
    assert {reference.polygon for reference in POINT_STRESSES} <= set(ALL_POLYGONS)
    assert {reference.load for reference in POINT_STRESSES} == {"Vy", "Vz", "T"}
