"""Singular corners: found where they are, with angle, exponent, wall and stated distance; and nowhere else."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from tests.chain import solved
from xsec_fem.fem.edges import mesh_edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.recovery.corners import SHARE_OF_WALL, Corner, corner_mask, find_corners
from xsec_fem.recovery.stress_field import SectionForces

every_order = pytest.mark.parametrize("order", range(1, 6))
IDENTITY = np.eye(2)[None]


def corners_of(mesh: Mesh, G: np.ndarray = IDENTITY) -> tuple[Corner, ...]:
    return find_corners(mesh, mesh_edges(mesh), G)


@every_order
@pytest.mark.parametrize("turn", [0.0, 33.0, 180.0])
def test_angle_section(order: int, turn: float) -> None:
    (corner,) = corners_of(structured.moved(structured.l_shape(5, 1, order), turn))
    c, s = np.cos(np.radians(turn)), np.sin(np.radians(turn))
    assert (corner.y, corner.z) == pytest.approx((c - s, s + c), abs=1e-12)
    assert corner.angle_deg == pytest.approx(270, abs=1e-9)
    assert corner.exponent == pytest.approx(-1 / 3, abs=1e-12)
    assert corner.parts == ("solid",)
    assert corner.wall == pytest.approx(1.0, rel=1e-9)
    assert corner.distance == pytest.approx(SHARE_OF_WALL, rel=1e-9)
    # the material runs counter-clockwise from one side's direction to the other's
    first, last = np.degrees(corner.directions)
    assert last - first == pytest.approx(270)
    assert (first - turn) % 360 == pytest.approx(90, abs=1e-9)


@every_order
def test_cruciform_has_four_and_a_box_four_inside(order: int) -> None:
    cross = corners_of(structured.cruciform(3, 1, order))
    np.testing.assert_allclose([(c.y, c.z) for c in cross], [(1, 1), (1, 2), (2, 1), (2, 2)])
    assert all(c.exponent == pytest.approx(-1 / 3) for c in cross)
    tube = corners_of(structured.box(10, 1, order))
    np.testing.assert_allclose([(c.y, c.z) for c in tube], [(-4, -4), (-4, 4), (4, -4), (4, 4)])
    assert all(c.wall == pytest.approx(1.0) for c in tube)


def test_wall_is_the_thinner_of_the_two() -> None:
    mesh = structured.grid([0, 1, 3, 5], [0, 2, 4, 6], 2, lambda y, z: np.where((y < 1) | (z < 2), 0, -1))
    (corner,) = corners_of(mesh)
    assert corner.wall == pytest.approx(1.0)
    assert corner.distance == pytest.approx(0.1)


@every_order
@pytest.mark.parametrize(
    "make",
    [
        lambda p: structured.rectangle(2, 1, 4, 3, p),
        lambda p: structured.triangle([(0, 0), (3, 0), (0, 1)], 3, p),
        lambda p: structured.ring_sector(0.5, 1.0, (0, 360), 80, 2, p),  # facets of 4.5 degrees inside at order 1
        lambda p: structured.half_disc(1.0, 3, p),
        lambda p: structured.ring_sector(
            0.9, 1.0, (-180, 180), 80, 1, p, closed=False
        ),  # a slit right through has no tip
    ],
)
def test_convex_and_smooth_sections_have_none(make: object, order: int) -> None:
    assert corners_of(make(order)) == ()  # type: ignore[operator]


@pytest.mark.parametrize("order", range(2, 6))
@pytest.mark.parametrize("cells", [3, 12])
def test_curved_holes_have_none_however_coarse(order: int, cells: int) -> None:
    """Tangents of neighbouring arcs agree to (h/r)^p: at order 2 three arcs of 120 degrees would not do, twelve do."""
    mesh = structured.ring_sector(0.5, 1.0, (0, 360), max(cells, 12), 2, order)
    assert corners_of(mesh) == ()


@every_order
@pytest.mark.parametrize("length", [0.4, 0.6])
def test_tip_of_a_slit(order: int, length: float) -> None:
    """An edge crack: 360 degrees, exponent -1/2, also where eight triangles of 45 degrees meet at the tip."""
    plate = structured.rectangle(2, 1, 10, 4, order)
    mesh = structured.opened(
        plate,
        lambda x: (np.abs(x[:, 1]) < 1e-12) & (x[:, 0] < -1 + 2 * length - 1e-9),
        lambda x: x[:, 1] > 0,
    )
    found = corners_of(mesh)
    (tip,) = found
    assert (tip.y, tip.z) == pytest.approx((-1 + 2 * length, 0.0), abs=1e-12)
    assert tip.angle_deg == pytest.approx(360, abs=1e-9)
    assert tip.exponent == pytest.approx(-0.5, abs=1e-12)
    assert tip.wall == pytest.approx(0.5)


def test_inner_slit_has_two_tips() -> None:
    plate = structured.rectangle(2, 1, 10, 4, 3)
    mesh = structured.opened(
        plate, lambda x: (np.abs(x[:, 1]) < 1e-12) & (np.abs(x[:, 0]) < 0.6 - 1e-9), lambda x: x[:, 1] > 0
    )
    assert [(c.y, c.z, round(c.exponent, 9)) for c in corners_of(mesh)] == [
        (pytest.approx(-0.6), pytest.approx(0, abs=1e-12), -0.5),
        (pytest.approx(0.6), pytest.approx(0, abs=1e-12), -0.5),
    ]


# --- two materials ----------------------------------------------------------------------------------------------------


def two_boards(order: int, upper_width: float) -> Mesh:
    """A board 4 wide and 1 high, another above it, upper_width wide, flush on the left."""
    return structured.grid(
        [0, 1, 2, 3, 4], [0, 1, 2], order,
        lambda y, z: np.where(z < 1, 0, np.where(y < upper_width, 1, -1)), ("lower", "upper"),
    )  # fmt: skip


def stiff(*G: float) -> np.ndarray:
    return np.array([g * np.eye(2) for g in G])


@pytest.mark.parametrize("ratio", [0.1, 1.0, 8.0])
def test_end_of_a_joint_in_a_corner(ratio: float) -> None:
    """Half plane and quarter plane: lambda = (2/pi) atan sqrt(1 + 2 G1/G2); the flush end (90 + 90) is not singular."""
    (corner,) = corners_of(two_boards(3, 2.0), stiff(1.0, ratio))
    assert (corner.y, corner.z) == pytest.approx((2, 1))
    assert corner.exponent == pytest.approx(2 / np.pi * np.arctan(np.sqrt(1 + 2 / ratio)) - 1, abs=1e-12)
    assert set(corner.parts) == {"lower", "upper"}


def test_flush_joint_of_two_materials_meets_the_side_at_right_angles() -> None:
    assert corners_of(two_boards(2, 4.0), stiff(1.0, 10.0)) == ()


@pytest.mark.parametrize("ratio", [20.0, 0.05, 3.0])
def test_slanting_joint_is_singular_at_the_end_where_the_stiffer_side_is_acute(ratio: float) -> None:
    """A joint at 45 degrees between two straight sides: 135 + 45 degrees at one end, 45 + 135 at the other.

    G1 sin(lambda a1) cos(lambda a2) + G2 cos(lambda a1) sin(lambda a2) = 0; at lambda = 1 its sign says which end has a root below.
    """
    points = np.array([[0.0, 0.0], [1.0, 0.0], [4.0, 0.0], [0.0, 1.0], [2.0, 1.0], [4.0, 1.0]])
    triangles = np.array([[0, 1, 4], [0, 4, 3], [1, 2, 5], [1, 5, 4]])
    mesh = structured.straight(points, triangles, 3, np.array([0, 0, 1, 1]), ("left", "right"))
    (corner,) = corners_of(mesh, stiff(ratio, 1.0))
    assert (corner.y, corner.z) == pytest.approx((2, 1) if ratio > 1 else (1, 0))
    assert corner.angle_deg == pytest.approx(180)
    acute, obtuse = np.radians([45, 135]) * (corner.exponent + 1)
    contrast = max(ratio, 1 / ratio)
    flow = contrast * np.sin(acute) * np.cos(obtuse) + np.cos(acute) * np.sin(obtuse)
    assert flow == pytest.approx(0.0, abs=1e-11)


def test_equal_moduli_in_two_parts_are_one_material() -> None:
    assert corners_of(two_boards(2, 4.0), stiff(3.0, 3.0)) == ()
    (corner,) = corners_of(two_boards(2, 2.0), stiff(3.0, 3.0))
    assert corner.exponent == pytest.approx(-1 / 3, abs=1e-12)


# --- the mask ---------------------------------------------------------------------------------------------------------


def test_mask() -> None:
    (corner,) = corners_of(structured.l_shape(5, 1, 2))
    places = np.array([[1.0, 1.0], [1.05, 1.0], [1.0, 0.89], [0.9, 0.9], [3.0, 0.5]])
    assert corner_mask(places, [corner]).tolist() == [False, False, True, True, True]
    assert corner_mask(places[None], [corner]).shape == (1, 5)
    assert corner_mask(places, []).all()


@pytest.mark.parametrize("levels", [4, 7])
def test_stress_grows_toward_the_corner_with_its_exponent(levels: int) -> None:
    """|tau| along the bisector between a hundredth and a twentieth of the wall follows r^(-1/3)."""
    section = solved(structured.l_shape(5, 1, 4, 0.5, levels), 0.3)
    (corner,) = corners_of(section.mesh)
    field = section.fields.combine(SectionForces(T=1.0))
    distance = np.array([0.0125, 0.05])
    tau = [field.at(1 - r / np.sqrt(2), 1 - r / np.sqrt(2))[0].tau for r in distance]
    slope = np.log(tau[1] / tau[0]) / np.log(4)
    # on the bisector the singular term of an antisymmetric field is its radial part; the next term is r^(1/3) smaller by r^(2/3)
    assert slope == pytest.approx(corner.exponent, abs=0.12)
