"""Shear stress and shear areas under transverse forces against exact fields."""

from __future__ import annotations

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import Solved, layered, solved
from tests.reference_values import POLYGONS
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.moduli import Moduli

VZ, VY = SectionForces(Vz=1.0), SectionForces(Vy=1.0)


def nodal(section: Solved, force: int = 1) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """y, z and tau (S, 2) under unit Vy (0) or Vz (1)."""
    return (*section.fields.part_nodes.positions.T, section.fields.tau[:, force])


# --- rectangle ------------------------------------------------------------------------------------------------------

# T&G's table at nu = 1/4, centre and edge over 3V/2A (the series itself gives the last digit of the second 1.0333, 1.1263 ...)
TABLE = [(2.0, 0.983, 1.033), (1.0, 0.940, 1.126), (0.5, 0.856, 1.396), (0.25, 0.805, 1.988)]


@pytest.mark.parametrize(("aspect", "centre", "edge"), TABLE)
def test_series_gives_the_table_of_timoshenko_and_goodier(aspect: float, centre: float, edge: float) -> None:
    tau = oracles.rectangle_flexure(np.array([0.0, 0.5]), np.zeros(2), 1.0, aspect, 0.2)[:, 1] * aspect / 1.5
    # three printed digits
    np.testing.assert_allclose(tau, [centre, edge], atol=6e-4)


@pytest.mark.parametrize(("aspect", "centre", "edge"), TABLE)
def test_rectangle_at_centre_and_edge(aspect: float, centre: float, edge: float) -> None:
    """To 1e-6: nodal stress of order 5 with about 12 cells over the shorter side's half; measured 1e-8 to 3e-7."""
    n, m = (10, int(12 * aspect)) if aspect >= 1 else (int(10 / aspect), 10)
    section = solved(structured.rectangle(1.0, aspect, 2 * (n // 2), 2 * (m // 2), 5), 0.25)
    field = section.fields.combine(VZ)
    for y, digits in ((0.0, centre), (0.5, edge)):
        exact = oracles.rectangle_flexure(np.array(y), np.array(0.0), 1.0, aspect, 0.2)
        found = field.at(y, 0.0)[0]
        assert found.tau_xz == pytest.approx(exact[1], rel=1e-6)
        assert found.tau_xy == pytest.approx(0.0, abs=1e-6 * exact[1])
        assert found.tau_xz * aspect / 1.5 == pytest.approx(digits, abs=6e-4)


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
@pytest.mark.parametrize(("width", "depth"), [(1.0, 2.0), (2.0, 1.0)])
def test_rectangle_at_every_point_away_from_its_corners(width: float, depth: float, nu: float) -> None:
    """The corners have a stress of r log r: there the error falls as h only; 0.2 away it is that of the degree."""
    section = solved(structured.rectangle(width, depth, int(8 * width), int(8 * depth), 5), nu)
    y, z, tau = (values[::4] for values in nodal(section))
    away = (width / 2 - np.abs(y) > 0.2) | (depth / 2 - np.abs(z) > 0.2)
    exact = oracles.rectangle_flexure(y[away], z[away], width, depth, nu / (1 + nu))
    # the worst, 4e-5, is in the second triangle from a corner
    np.testing.assert_allclose(tau[away], exact, atol=8e-5 * 1.5 / (width * depth))


@pytest.mark.parametrize("G", [0.05, 0.4, 3.0])
def test_e_and_g_are_independent(G: float) -> None:
    """With G not E/(2(1+nu)) the series holds with nu/(1+nu) replaced by 2 nu G/E (timber: G is E/16)."""
    section = solved(structured.rectangle(2.0, 1.0, 16, 8, 5), 0.35, E=1.0, G=G)
    exact = oracles.rectangle_flexure(np.array([0.0, 1.0]), np.zeros(2), 2.0, 1.0, 2 * 0.35 * G)
    found = np.array([section.fields.combine(VZ).at(y, 0.0)[0].tau_xz for y in (0.0, 1.0)])
    np.testing.assert_allclose(found, exact[:, 1], rtol=1e-5)


@pytest.mark.parametrize("nu", [0.0, 0.25, 0.5])
@pytest.mark.parametrize("aspect", [2.0, 1.0, 0.5])
def test_rectangle_shear_coefficient(aspect: float, nu: float) -> None:
    """5/6 at nu = 0; Gruttmann & Wagner's series otherwise."""
    section = solved(structured.rectangle(1.0, aspect, 10, 10, 5), nu)
    expected = oracles.rectangle_shear_coefficient(1.0, aspect, nu)
    assert section.shear_area(1.0)[1] / aspect == pytest.approx(
        expected, rel=1e-10 if nu == 0 else 1e-7
    )  # round-off, or the corners
    if nu == 0:
        assert expected == pytest.approx(5 / 6, rel=1e-15)


def test_flexure_without_nu_is_the_parabola_for_any_width() -> None:
    """Polynomial of degree 3 in psi: exact from degree 3, at every node."""
    section = solved(structured.rectangle(5.0, 1.0, 5, 2, 3), 0.0)
    y, z, tau = nodal(section)
    np.testing.assert_allclose(tau, np.stack([np.zeros_like(y), 1.5 / 5 * (1 - 4 * z**2)], axis=1), atol=1e-12)


# --- circle, ellipse, ring, triangle ---------------------------------------------------------------------------------


@pytest.mark.parametrize("nu", [0.0, 0.25, 0.3, 0.5])
def test_circle(nu: float) -> None:
    """psi is a cubic; the interpolated side is what is left: nodal stress of order 5, arcs of 15 degrees."""
    section = solved(structured.disc(1.0, 6, 5), nu)
    y, z, tau = nodal(section)
    area, second_moment = np.pi, np.pi / 4
    np.testing.assert_allclose(tau, oracles.ellipse_flexure(y, z, 1.0, 1.0, nu), atol=5e-6 / area)
    at_centre = section.fields.combine(VZ).at(0.0, 0.0)[0].tau_xz
    assert at_centre == pytest.approx((3 + 2 * nu) / (8 * (1 + nu)) / second_moment, rel=1e-8)  # T&G, circular section
    assert section.shear_area(1.0)[1] / area == pytest.approx(oracles.circle_shear_coefficient(nu), rel=1e-9)


@pytest.mark.parametrize("nu", [0.0, 0.3])
@pytest.mark.parametrize(("across", "along"), [(2.0, 1.0), (1.0, 2.0), (1.0, 4.0)])
def test_ellipse(across: float, along: float, nu: float) -> None:
    section = solved(structured.ellipse(across, along, 6, 5), nu)
    y, z, tau = nodal(section)
    exact = oracles.ellipse_flexure(y, z, across, along, nu)
    np.testing.assert_allclose(tau, exact, atol=6e-5 * np.abs(exact).max())  # as the circle, stretched


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
@pytest.mark.parametrize("inner", [0.3, 0.5, 0.9])
def test_ring(inner: float, nu: float) -> None:
    section = solved(structured.ring_sector(inner, 1.0, (0, 360), 24, 6 if inner < 0.8 else 2, 5), nu)
    y, z, tau = nodal(section)
    exact = oracles.ring_flexure(y, z, inner, 1.0, nu)
    # nodal stress of order 5, arcs of 15 degrees
    np.testing.assert_allclose(tau, exact, atol=8e-5 * np.abs(exact).max())
    area = np.pi * (1 - inner**2)
    assert section.shear_area(1.0)[1] / area == pytest.approx(oracles.ring_shear_coefficient(inner, nu), rel=1e-8)


def test_thin_ring_tends_to_twice_the_mean_and_half_the_area() -> None:
    section = solved(structured.ring_sector(0.99, 1.0, (0, 360), 60, 1, 4), 0.3)
    area = np.pi * (1 - 0.99**2)
    assert np.hypot(*section.fields.tau[:, 1].T).max() * area == pytest.approx(2.0, rel=0.01)
    assert section.shear_area(1.0)[1] / area == pytest.approx(oracles.ring_shear_coefficient(0.99, 0.3), rel=1e-6)
    assert section.shear_area(1.0)[1] / area == pytest.approx(0.5, rel=1e-4)


@pytest.mark.parametrize("order", [3, 4, 5])
def test_equilateral_triangle_at_nu_one_half(order: int) -> None:
    """psi is a cubic: round-off."""
    section = solved(structured.triangle([(-np.sqrt(3), -1), (np.sqrt(3), -1), (0, 2)], 2, order), 0.5)
    y, z, tau = nodal(section)
    np.testing.assert_allclose(tau, oracles.equilateral_triangle_flexure(y, z, 1.0), atol=1e-12)
    flexibility = section.stiffness.shear_flexibility * section.area.part_areas[0]
    np.testing.assert_allclose(flexibility, 4 / 3 * np.eye(2), atol=1e-11)  # A ∫ tau²: 4/3, derived from the field


# --- layers ---------------------------------------------------------------------------------------------------------

LAYERS = [
    ([0.0, 1.0, 1.5], [1.0, 10.0]),
    ([0.0, 0.2, 1.8, 2.0], [200.0, 1.0, 200.0]),
    ([0.0, 0.5, 1.0, 1.5, 2.5], [3.0, 1.0, 7.0, 0.5]),
]


@pytest.mark.parametrize(("lines", "E"), LAYERS)
def test_layers_without_nu_are_the_transformed_section(lines: list[float], E: list[float]) -> None:
    """tau_xz = V (E Q)/(EI b), each layer's own at the joints; psi is a cubic in each layer: round-off."""
    heights = np.array(lines)
    ticks = np.sort(np.concatenate([heights, (heights[1:] + heights[:-1]) / 2]))
    mesh = structured.grid(
        [-1, 0, 1], ticks, 3, lambda y, z: np.searchsorted(heights, z) - 1, [f"layer {k}" for k in range(len(E))]
    )
    section = layered(mesh, [Moduli.isotropic(e, 0.0) for e in E])
    _, z, tau = nodal(section)
    exact = oracles.layered_flexure(z, heights, np.array(E), 2.0)
    np.testing.assert_allclose(tau[:, 1], exact, atol=1e-11)
    np.testing.assert_allclose(tau[:, 0], 0, atol=1e-11)


def test_two_layers_against_values_computed_beforehand() -> None:
    """Width 2, E 1 and 10 in layers of 1 and 0.5 at nu = 0: transformed section, GAs by ∫ tau²/G."""
    mesh = structured.grid([-1, 0, 1], [0, 0.5, 1, 1.5], 4, lambda y, z: np.where(z < 1, 0, 1), ("lower", "upper"))
    section = layered(mesh, [Moduli.isotropic(1.0, 0.0), Moduli.isotropic(10.0, 0.0)])
    assert section.area.centroid[1] == pytest.approx(1.125, rel=1e-13)
    assert section.area.EIyy == pytest.approx(1.3125, rel=1e-13)
    at_joint = section.fields.combine(VZ).at(0.3, 1.0)
    assert [stress.part for stress in at_joint] == ["lower", "upper"]
    assert at_joint[0].tau_xz == pytest.approx(0.476190476190476, rel=1e-12)
    assert at_joint[1].tau_xz == pytest.approx(0.476190476190476, rel=1e-12)
    assert 1 / section.stiffness.shear_flexibility[1, 1] == pytest.approx(2.08806818181818, rel=1e-12)
    bending = section.fields.combine(SectionForces(My=1.0))
    lower, upper = bending.at(0.0, 1.0)
    assert (lower.sigma_x, upper.sigma_x) == pytest.approx((-0.0952380952380952, -0.952380952380952), rel=1e-12)


# --- values computed beforehand by other methods ----------------------------------------------------------------------


@pytest.mark.parametrize("nu", [0.0, 0.3])
@pytest.mark.parametrize(
    ("name", "mesh", "limit"),
    [
        ("right triangle", structured.triangle([(0, 0), (1, 0), (0, 1)], 10, 5), 2e-9),  # the values' own ten digits
        ("hexagon", structured.convex_polygon([(np.cos(a), np.sin(a)) for a in np.arange(6) * np.pi / 3], 8, 4), 1e-6),
        ("angle", structured.l_shape(100, 10, 4, 5.0, 10), 2e-7),
        ("channel", structured.channel(100, 50, 20, 4, 10, 10.0), 1e-5),
        ("box", structured.box(100, 10, 4, 9), 2e-6),
    ],
)  # fmt: skip
def test_shear_flexibility_of_polygons(name: str, mesh: structured.Mesh, limit: float, nu: float) -> None:
    section, values = solved(mesh, nu), POLYGONS[name]
    flexibility = section.stiffness.shear_flexibility * section.area.part_areas[0]
    yy, zz, yz = values.A_flexibility if nu else values.A_flexibility_nu0
    np.testing.assert_allclose(flexibility, [[yy, yz], [yz, zz]], atol=limit * yy)
