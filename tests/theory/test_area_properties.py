"""Area, centroid, second moments and principal axes: closed forms, and how they move."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from tests.chain import stacked
from tests.theory.strategies import RandomSection, random_sections
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.area_properties import AreaProperties, area_properties
from xsec_fem.theory.moduli import Moduli

every_order = pytest.mark.parametrize("order", range(1, 6))
ONE = Moduli.isotropic(1.0, 0.3)
ROUND_OFF = 1e-13  # sums of positive terms; 1e-11 of the size where they cancel


@every_order
def test_rectangle(order: int) -> None:
    area = area_properties(structured.moved(structured.rectangle(3, 2, 2, 3, order), shift=(10, -20)), ONE)
    assert pytest.approx(6, rel=ROUND_OFF) == area.EA
    np.testing.assert_allclose(area.centroid, [10, -20], rtol=ROUND_OFF)
    assert (area.EIyy, area.EIzz) == pytest.approx((3 * 8 / 12, 2 * 27 / 12), rel=ROUND_OFF)
    assert area.EIyz == pytest.approx(0, abs=1e-13)


@every_order
def test_right_triangle(order: int) -> None:
    """A = 1/2, I = 1/36 and Iyz = -1/72 about the centroid (any handbook)."""
    area = area_properties(structured.triangle([(0, 0), (1, 0), (0, 1)], 2, order), ONE)
    np.testing.assert_allclose(area.centroid, [1 / 3, 1 / 3], rtol=ROUND_OFF)
    np.testing.assert_allclose(area.EI, np.array([[2, -1], [-1, 2]]) / 72, rtol=1e-12)
    alpha, most, least = area.principal
    # stiffest about the line at 45 degrees through the right angle: EIu = 1/24, EIv = 1/72
    assert alpha == pytest.approx(45.0, abs=1e-10)
    assert (most, least) == pytest.approx((1 / 24, 1 / 72), rel=1e-12)


def polygon_integrals(corner: np.ndarray) -> tuple[float, np.ndarray, np.ndarray]:
    """Area, centroid and [[∫y², ∫yz], [∫yz, ∫z²]] about it by the shoelace formulas."""
    y, z = corner.T
    y1, z1 = np.roll(y, -1), np.roll(z, -1)
    cross = y * z1 - y1 * z
    A = cross.sum() / 2
    c = np.array([((y + y1) * cross).sum(), ((z + z1) * cross).sum()]) / (6 * A)
    yy = ((y * y + y * y1 + y1 * y1) * cross).sum() / 12
    zz = ((z * z + z * z1 + z1 * z1) * cross).sum() / 12
    yz = ((y * z1 + 2 * y * z + 2 * y1 * z1 + y1 * z) * cross).sum() / 24
    return A, c, np.array([[yy, yz], [yz, zz]]) - A * np.outer(c, c)


@settings(deadline=None, max_examples=30)
@given(st.lists(st.floats(0.3, 2.0), min_size=3, max_size=9), st.integers(1, 5), st.floats(-180, 180), st.floats(-5, 5))
def test_random_polygons_against_the_shoelace_formulas(
    radii: list[float], order: int, turn: float, shift: float
) -> None:
    mesh = structured.moved(structured.star_polygon(radii, 2, order), turn, 1.0, (shift, -shift))
    corner = structured.moved(structured.star_polygon(radii, 1, 1), turn, 1.0, (shift, -shift)).nodes[1:]
    area = area_properties(mesh, ONE)
    A, centroid, EI = polygon_integrals(corner)
    assert (area.EA, area.part_areas.sum()) == pytest.approx((A, A), rel=1e-12)
    np.testing.assert_allclose(area.centroid, centroid, atol=1e-12)
    # the formula itself loses A shift² against I
    np.testing.assert_allclose(area.EI, EI, atol=1e-11)


@pytest.mark.parametrize("order", range(2, 6))
def test_circle_and_ring(order: int) -> None:
    for inner, mesh in (
        (0.0, structured.disc(2.0, 4, order)),
        (1.0, structured.ring_sector(1, 2, (0, 360), 16, 2, order)),
    ):
        area = area_properties(mesh, ONE)
        # arcs of 22.5 degrees interpolated: (h/R)^(p+1 or p+2)/50
        limit = 10.0 ** (-2.0 * ((order + 2) // 2)) / 2
        assert pytest.approx(np.pi * (4 - inner**2), rel=limit) == area.EA
        np.testing.assert_allclose(area.EI, np.pi / 4 * (16 - inner**4) * np.eye(2), atol=4 * np.pi * limit * 3)
        assert area.principal[0] == pytest.approx(0.0, abs=1e-12)


def two_halves(order: int) -> Mesh:
    return structured.grid([-2, -1, 0, 1], [-1, 0, 1], order, lambda y, z: np.where(y < 0, 0, 1), ("left", "right"))


@every_order
def test_two_materials_are_a_transformed_section(order: int) -> None:
    area = area_properties(two_halves(order), stacked([Moduli.isotropic(1.0, 0.3), Moduli.isotropic(6.0, 0.1)]))
    np.testing.assert_allclose(area.part_areas, [4, 2], rtol=ROUND_OFF)
    assert pytest.approx(4 + 12, rel=ROUND_OFF) == area.EA
    yc = (4 * -1 + 12 * 0.5) / 16
    np.testing.assert_allclose(area.centroid, [yc, 0], atol=ROUND_OFF)
    assert area.EIyy == pytest.approx(2 * 8 / 12 + 6 * 8 / 12, rel=1e-12)
    # parallel axes: 1 * (2 * 8/12) + 4 * (yc + 1)² and 6 * (2 * 1/12) + 12 * (0.5 - yc)²
    assert area.EIzz == pytest.approx(16 / 12 + 4 * (yc + 1) ** 2 + 1 + 12 * (0.5 - yc) ** 2, rel=ROUND_OFF)


@settings(deadline=None, max_examples=30)
@given(random_sections(), st.floats(-180, 180))
def test_principal_axes(random: RandomSection, degrees: float) -> None:
    """alpha is where ∫E (distance from the axis)² is largest, EIu; across it is smallest, EIv."""
    area = area_properties(structured.moved(random.mesh, degrees), random.moduli(degrees))
    alpha, most, least = area.principal
    assert -90 < alpha <= 90
    assert most >= least > 0

    def about(angle: float) -> float:
        normal = np.array([-np.sin(angle), np.cos(angle)])
        return float(normal @ area.EI @ normal)

    assert about(np.radians(alpha)) == pytest.approx(most, rel=1e-9)
    assert about(np.radians(alpha + 90)) == pytest.approx(least, rel=1e-9)
    assert max(about(a) for a in np.linspace(0, np.pi, 181)) <= most * (1 + 1e-12)


@pytest.mark.parametrize(
    ("EI", "alpha"),
    [
        ([[1.0, 0.0], [0.0, 2.0]], 0.0),  # stiffest about y
        ([[2.0, 0.0], [0.0, 1.0]], 90.0),  # stiffest about z
        ([[1.5, -0.5], [-0.5, 1.5]], 45.0),
        ([[1.5, 0.5], [0.5, 1.5]], -45.0),
        ([[1.0, 0.0], [0.0, 1.0]], 0.0),  # no axis is better than another
        ([[1.0, 1e-12], [1e-12, 1.0]], 0.0),
        ([[2.0, 1e-15], [1e-15, 1.0]], 90.0),  # round-off does not throw it to -90
        ([[2.0, -1e-15], [-1e-15, 1.0]], 90.0),
    ],
)
def test_angle_of_the_principal_axis(EI: list[list[float]], alpha: float) -> None:
    area = AreaProperties(np.ones(1), 1.0, np.zeros(2), np.array(EI))
    assert area.principal[0] == pytest.approx(alpha, abs=1e-10)
