"""Torsion and warping constants against exact solutions.

Every tolerance is some three times the error seen, and says what limits it.
"""

from __future__ import annotations

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import layered, solved
from tests.reference_values import POLYGONS, RING_SECTORS
from xsec_fem.theory.moduli import Moduli

HEXAGON = structured.convex_polygon([(np.cos(k * np.pi / 3), np.sin(k * np.pi / 3)) for k in range(6)], 12, 4)

# degree 5: a 90 degree corner has stress ~ r log r, which holds the constant to h⁴: 4e-8 with 8 x 16 cells, 16 times less a halving
RECTANGLE = 1.2e-7


@pytest.mark.parametrize(
    ("width", "depth", "n", "m"), [(1, 1, 10, 10), (1, 2, 8, 16), (2, 1, 16, 8), (1, 5, 6, 30), (10, 1, 60, 6)]
)
def test_rectangle(width: float, depth: float, n: int, m: int) -> None:
    section = solved(structured.rectangle(width, depth, n, m, 5))
    assert pytest.approx(oracles.rectangle_torsion_constant(width, depth), rel=RECTANGLE) == section.stiffness.GIT
    # E = 2 at nu = 0; ∫ omega² is held by omega, two powers of h better than the stress
    assert section.stiffness.EIw / 2 == pytest.approx(oracles.rectangle_warping_constant(width, depth), rel=3e-8)
    top = np.hypot(*section.fields.tau[:, 2].T).max() * section.stiffness.GIT
    assert top == pytest.approx(
        oracles.rectangle_torsion_largest(width, depth), rel=1e-6
    )  # nodal stress, order 5 of h = 1/8


@pytest.mark.parametrize("ratio", [10, 30, 100])
def test_narrow_rectangle_tends_to_b3h3_over_144(ratio: float) -> None:
    """V. Z. Vlasov, Thin-walled elastic beams (from memory); the exact value lies below by 4.8 (b/h)² (series above)."""
    section = solved(structured.rectangle(1, ratio, 2, 2 * ratio, 4))
    share = section.stiffness.EIw / 2 / (ratio**3 / 144)
    assert share == pytest.approx(
        oracles.rectangle_warping_constant(1, ratio) / (ratio**3 / 144), rel=1e-4
    )  # two cells across
    assert 4 / ratio**2 < 1 - share < 5 / ratio**2


@pytest.mark.parametrize(("a", "b"), [(1, 1), (1.5, 1), (2, 1), (1, 3)])
def test_ellipse(a: float, b: float) -> None:
    """omega is y z, so only the interpolated side is not exact: (h/R)^6 = 2e-10 at degree 5, 24 arcs."""
    section = solved(structured.ellipse(a, b, 6, 5))
    IT, Iw = oracles.ellipse_torsion(a, b)
    assert pytest.approx(IT, rel=1e-9) == section.stiffness.GIT
    assert section.stiffness.EIw / 2 == pytest.approx(Iw, rel=2e-9, abs=1e-9)


@pytest.mark.parametrize("order", [3, 4, 5])
def test_equilateral_triangle_is_exact_from_degree_3(order: int) -> None:
    """omega is a cubic, so round-off is all that is left."""
    corners = [(-np.sqrt(3), -1), (np.sqrt(3), -1), (0, 2)]
    section = solved(structured.triangle(corners, 2, order))
    IT, largest = oracles.equilateral_triangle_torsion(2 * np.sqrt(3))
    assert pytest.approx(IT, rel=1e-12) == section.stiffness.GIT
    assert np.hypot(*section.fields.tau[:, 2].T).max() * section.stiffness.GIT == pytest.approx(largest, rel=1e-10)


def test_semicircle() -> None:
    section = solved(structured.half_disc(1.0, 6, 5))
    # two 90 degree corners, h = 0.1
    assert pytest.approx(oracles.semicircle_torsion_constant(1.0), rel=1e-7) == section.stiffness.GIT
    assert oracles.semicircle_torsion_constant(1.0) == pytest.approx(0.297556782059734, rel=1e-12)


def test_circle_with_groove() -> None:
    section = solved(structured.grooved_disc(1.0, 0.5, 6, 5))
    IT, bottom = oracles.grooved_circle_torsion(1.0, 0.5)
    assert pytest.approx(IT, rel=1e-8) == section.stiffness.GIT
    stress = section.fields.tau[:, 2] * section.stiffness.GIT
    node = np.argmin(np.hypot(*(section.fields.part_nodes.positions - [0.5, 0.0]).T))
    assert np.hypot(*stress[node]) == pytest.approx(bottom, rel=1e-4)  # nodal stress, six arcs of 25 degrees


@pytest.mark.parametrize("offset", [0.1, 0.2, 0.35])
def test_eccentric_tube(offset: float) -> None:
    section = solved(structured.eccentric_ring(1.0, 0.5, offset, 24, 3, 5))
    assert pytest.approx(oracles.eccentric_tube_torsion_constant(0.5, offset), rel=1e-9) == section.stiffness.GIT


@pytest.mark.parametrize("n", [1, 2, 4])
def test_regular_sections_without_warping(n: int) -> None:
    """A circle and a ring do not warp: G IT is the polar moment and E Iw is zero, but for the side's interpolation."""
    for mesh in (structured.disc(1.0, n, 5), structured.ring_sector(0.6, 1.0, (0, 360), 8 * n, n, 5)):
        section = solved(mesh)
        polar = (section.area.EIyy + section.area.EIzz) / 2  # E = 2
        assert pytest.approx(polar, rel=1e-4 * 0.5 ** (8 * (n - 1)) + 1e-13) == section.stiffness.GIT
        assert section.stiffness.EIw < 1e-5 * polar


@pytest.mark.parametrize("ratio", [0.8, 0.9, 0.95, 0.98])
def test_bredt_for_a_thin_square_tube(ratio: float) -> None:
    """R. Bredt 1896 with mid-line sides; it falls short by about t/(2a), corners included."""
    thickness = (1 - ratio) / 2
    section = solved(structured.box(1.0, thickness, 3, levels=4))
    bredt = oracles.bredt_constant(1 - thickness, thickness)
    assert 0 < section.stiffness.GIT / bredt - 1 < 0.6 * thickness


# --- two materials --------------------------------------------------------------------------------------------------


def two_ring_disc(order: int, n: int) -> structured.Mesh:
    """Rings from 0.25 to 1 and from 1 to 2; a hole instead of the middle keeps the blocks smooth."""
    mesh = structured.ring_sector(0.5, 1.5, (0, 360), 12, 2 * n, order)
    inner = np.hypot(*mesh.nodes[mesh.triangles[:, :3]].mean(axis=1).T) < 1.0
    return structured.relabelled(mesh, np.where(inner, 0, 1), ("core", "sleeve"))


@pytest.mark.parametrize("G", [(1.0, 3.0), (5.0, 0.1), (1.0, 1000.0)])
def test_concentric_materials(G: tuple[float, float]) -> None:
    section = layered(two_ring_disc(5, 2), [Moduli.isotropic(1.0, 0.3, g) for g in G])
    full = oracles.concentric_torsion(np.array([0.0, 0.5, 1.0, 1.5]), np.array([0.0, *G]))
    assert pytest.approx(full, rel=1e-7) == section.stiffness.GIT  # interpolated arcs of 30 degrees


@pytest.mark.parametrize(("G1", "G2"), [(1.0, 1.0), (0.5, 2.0), (1.0, 10.0), (3.0, 0.03)])
def test_side_by_side_materials(G1: float, G2: float) -> None:
    mesh = structured.grid(
        structured.graded_lines(-1, 1, [0.0], 0.25, 8), structured.graded_lines(-1, 1, [-1.0, 1.0], 0.25, 8), 4,
        lambda y, z: np.where(y < 0, 0, 1), ("left", "right"),
    )  # fmt: skip
    section = layered(mesh, [Moduli.isotropic(2 * G1, 0.0), Moduli.isotropic(2 * G2, 0.0)])
    # the joint's ends have stress ~ r^(lambda - 1) with lambda < 1; cells are halved toward them
    assert pytest.approx(oracles.side_by_side_torsion(1.0, 2.0, G1, G2), rel=3e-6) == section.stiffness.GIT


# --- values computed beforehand by other methods ----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("name", "mesh", "IT", "Iw"),
    [
        ("right triangle", structured.triangle([(0, 0), (1, 0), (0, 1)], 10, 5), 2e-7, 1.5e-8),  # 90 degree corner, h = 0.1
        ("hexagon", HEXAGON, 3e-6, 1e-4),  # 120 degree corners: stress ~ r^(1/2), h = 1/12
        ("angle", structured.l_shape(100, 10, 4, 5.0, 10), 4e-6, 3e-7),  # graded to the corner, cells of 5 elsewhere
        ("channel", structured.channel(100, 50, 20, 4, 10, 5.0), 3e-6, 2e-6),
        ("box", structured.box(100, 10, 4, 9), 2e-6, 3e-5),  # Iw is a small difference on a closed square
    ],
)  # fmt: skip
def test_polygons(name: str, mesh: structured.Mesh, IT: float, Iw: float) -> None:
    section, values = solved(mesh), POLYGONS[name]
    assert pytest.approx(values.IT, rel=IT) == section.stiffness.GIT
    assert section.stiffness.EIw / 2 == pytest.approx(values.Iw, rel=Iw)


@pytest.mark.parametrize("name", RING_SECTORS)
def test_ring_sectors(name: str) -> None:
    values = RING_SECTORS[name]
    half = values.opening_deg / 2
    along = int(np.radians(values.opening_deg) / (1 - values.inner) / 0.75)
    mesh = structured.ring_sector(values.inner, 1.0, (-half, half), max(24, along), 2, 4, closed=False)
    assert (
        pytest.approx(values.IT, rel=2e-5) == solved(mesh).stiffness.GIT
    )  # 90 degree corners at the ends, two cells across
