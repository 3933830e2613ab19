"""Shear centres: exact values, thin-wall limits with their observed rate, and the definitions by two routes."""

from __future__ import annotations

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import layered, solved
from tests.reference_values import POLYGONS, RING_SECTORS
from xsec_fem.theory.moduli import Moduli


@pytest.mark.parametrize("nu", [0.0, 0.25, 0.3, 0.5])
def test_semicircle(nu: float) -> None:
    """0.51137 r (zero mean twist, nu = 0.3) and 8 r/(5 pi) = 0.50930 r (uncoupled energies) from the circle's centre."""
    section = solved(structured.half_disc(1.0, 4, 5), nu)
    mean_twist, trefftz = oracles.semicircle_shear_centres(1.0, nu)
    # moments of the fields: two orders better than the stress; two 90 degree corners, h = 0.15
    np.testing.assert_allclose(section.shear_centre, [mean_twist, 0.0], atol=3e-8)
    np.testing.assert_allclose(section.trefftz_centre, [trefftz, 0.0], atol=1e-8)


def test_semicircle_published_digits() -> None:
    assert oracles.semicircle_shear_centres(1.0, 0.3) == pytest.approx((0.51137, 0.50930), abs=5e-6)


@pytest.mark.parametrize("nu", [0.0, 0.3])
@pytest.mark.parametrize("name", RING_SECTORS)
def test_ring_sectors(name: str, nu: float) -> None:
    """Slit tube and half tubes: trefftz + nu/(1 + nu) slope, from series."""
    values = RING_SECTORS[name]
    half = values.opening_deg / 2
    along = int(np.radians(values.opening_deg) / (1 - values.inner) / 0.75)
    mesh = structured.ring_sector(values.inner, 1.0, (-half, half), max(24, along), 2, 4, closed=False)
    section = solved(mesh, nu)
    assert section.trefftz_centre[0] == pytest.approx(values.trefftz, rel=1e-7)
    assert section.shear_centre[0] == pytest.approx(values.trefftz + nu / (1 + nu) * values.slope, rel=3e-7)
    assert section.shear_centre[1] == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize("nu", [0.0, 0.3])
@pytest.mark.parametrize(
    ("name", "mesh", "limit"),
    [
        ("right triangle", structured.triangle([(0, 0), (1, 0), (0, 1)], 8, 5), 5e-8),
        ("angle", structured.l_shape(100, 10, 4, 5.0, 10), 2e-7),
        ("channel", structured.channel(100, 50, 20, 4, 10, 10.0), 4e-6),  # two cells across; the values have 8 digits
        ("box", structured.box(100, 10, 4, 6), 1e-9),  # both axes of symmetry
    ],
)  # fmt: skip
def test_polygons(name: str, mesh: structured.Mesh, limit: float, nu: float) -> None:
    section, values = solved(mesh, nu), POLYGONS[name]
    size = np.ptp(mesh.nodes[:, 0])
    np.testing.assert_allclose(section.stiffness.trefftz_centre, values.trefftz, atol=limit * size)
    expected = values.mean_twist if nu else values.trefftz
    np.testing.assert_allclose(section.stiffness.shear_centre, expected, atol=limit * size)


def test_slit_tube_tends_to_two_radii_at_second_order() -> None:
    """Thin limit 2 R_m from the centre (textbooks); the series says O((t/R)²) from below."""
    gaps = []
    for t in (0.1, 0.05, 0.025):
        mesh = structured.ring_sector(1 - t / 2, 1 + t / 2, (-180, 180), int(4 / t), 1, 4, closed=False)
        gaps.append(2.0 - solved(mesh).trefftz_centre[0])
    assert min(gaps) > 0
    np.testing.assert_allclose(np.log2(np.divide(gaps[:-1], gaps[1:])), 2.0, atol=0.05)


def test_channel_tends_to_the_thin_wall_value_at_its_rate() -> None:
    """3 b²/(6 b + h) outward from the web's mid-line. The exact value approaches it faster than t: order 2 is observed."""
    gaps = []
    for t in (8.0, 4.0, 2.0):
        section = solved(structured.channel(100, 50, t, 3, 4, t))
        exact = t / 2 - section.trefftz_centre[0]
        gaps.append(abs(exact - oracles.thin_channel_shear_centre(100, 50, t)))
    rates = np.log2(np.divide(gaps[:-1], gaps[1:]))
    assert gaps[-1] < 0.05
    assert rates.min() > 1.7


@pytest.mark.parametrize("E", [(1.0, 4.0), (1.0, 100.0)])
def test_side_by_side_at_zero_nu_it_is_the_weighted_centroid(E: tuple[float, float]) -> None:
    """tau_i = E_i (c² - z²) V/(2 EI) is exact there, so both shear centres are the E-weighted centroid (derived here)."""
    mesh = structured.grid([-1, -0.5, 0, 0.5, 1], [-1, 0, 1], 3, lambda y, z: np.where(y < 0, 0, 1), ("left", "right"))
    section = layered(mesh, [Moduli.isotropic(e, 0.0) for e in E])
    centroid = (E[1] - E[0]) / 2 / sum(E)
    for centre in (section.shear_centre, section.trefftz_centre):
        assert centre[0] == pytest.approx(centroid, rel=1e-11)


@pytest.mark.parametrize("nu", [0.0, 0.2, 0.45])
def test_angle_of_thin_legs_lies_at_the_meeting_of_the_mid_lines(nu: float) -> None:
    """Textbooks: the flows of both legs pass through their meeting point; here to a share of the thickness."""
    t = 2.0
    section = solved(structured.l_shape(100, t, 3, t, 4), nu)
    for centre in (section.shear_centre, section.trefftz_centre):
        np.testing.assert_allclose(centre, [t / 2, t / 2], atol=0.02 * t)
