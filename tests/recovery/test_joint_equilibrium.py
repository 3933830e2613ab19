"""Joint flows by equilibrium: V S/I to round-off wherever a joint separates, on any mesh and for any materials."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings

from tests import structured
from tests.chain import Solved, layered
from tests.theory.strategies import RandomSection, random_sections
from xsec_fem.fem.mapping import batches
from xsec_fem.model.connections import Connections
from xsec_fem.model.section import Joint
from xsec_fem.recovery.corners import find_corners
from xsec_fem.recovery.joint_results import joint_result
from xsec_fem.recovery.joints import JointFlows, joint_flows
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.moduli import Moduli

ROUND_OFF = 1e-9  # condition number of the meshes and of the interface's mass matrix; 1e-12 is usual

any_section = settings(deadline=None, max_examples=25)


def flows_of(
    section: Solved, *pairs: tuple[tuple[str, ...], tuple[str, ...]], strength: float | None = 1.5
) -> list[JointFlows]:
    """Glue joints between groups of parts, all declared in one section."""
    joints = tuple(Joint(f"glue {k}", *pair, "glue", strength) for k, pair in enumerate(pairs))
    return joint_flows(Connections(joints), section.warping, section.stiffness, section.fields, section.edges)


def first_moment(section: Solved, *parts: int) -> np.ndarray:
    """-∫_A E f for unit Vy, Vz and T, from the definition."""
    total = np.zeros(2)
    for batch in batches(section.mesh):
        mine = np.isin(batch.part, parts)
        weights = batch.weights[mine] * section.moduli.E[batch.part[mine]][:, None]
        total += np.einsum("mq,mqd->d", weights, batch.points[mine] - section.area.centroid)
    return np.append(-np.linalg.inv(section.area.EI) @ total, 0.0)


def size_of(section: Solved) -> float:
    """Largest first moment there could be, over EI."""
    return float(section.area.EA * np.abs(np.linalg.inv(section.area.EI)).max() * np.ptp(section.mesh.nodes))


@any_section
@given(random_sections())
def test_flow_is_vs_over_i_to_round_off(random: RandomSection) -> None:
    """Two parts of unlike, anisotropic materials: the joint between them carries what equilibrium says."""
    section = random.solved()
    (flows,) = flows_of(section, (("part 0",), ("part 1",)))
    assert flows.separates
    np.testing.assert_allclose(flows.separated, first_moment(section, 0), atol=1e-12 * size_of(section))
    # a twist sends nothing through a joint that is alone
    np.testing.assert_allclose(flows.flow, flows.separated, atol=ROUND_OFF * size_of(section))


@any_section
@given(random_sections())
def test_from_above_is_from_below(random: RandomSection) -> None:
    """S of the one side is minus S of the other about the common centroid; the flow changes its sign with the names."""
    section = random.solved()
    above, below = flows_of(section, (("part 0",), ("part 1",)))[0], flows_of(section, (("part 1",), ("part 0",)))[0]
    np.testing.assert_allclose(above.flow, -below.flow, atol=ROUND_OFF * size_of(section))
    np.testing.assert_allclose(above.separated, -below.separated, atol=1e-12 * size_of(section))
    assert above.bonds[0].width == pytest.approx(below.bonds[0].width, rel=1e-13)


def test_closed_cell_shares_its_flow_by_symmetry() -> None:
    """A ring with joints at 3 and 9 o'clock: each carries half under Vz, and they are opposite under a twist."""
    mesh = structured.ring_sector(0.8, 1.0, (0, 360), 24, 1, 4)
    centre = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)
    which = np.where(centre[:, 1] > 0, 0, np.where(centre[:, 0] > 0, 1, 2))
    section = layered(structured.relabelled(mesh, which, ("top", "right", "left")), 3 * [Moduli.isotropic(2.6, 0.3)])
    right, left = flows_of(section, (("top",), ("right",)), (("top",), ("left",)))
    assert not right.separates
    assert not left.separates
    half = first_moment(section, 0)[1] / 2
    # the arcs are the mesh's own, so nothing but round-off and the split of a symmetric field is left
    assert (right.flow[1], left.flow[1]) == pytest.approx((half, half), rel=1e-6)
    assert right.flow[2] == pytest.approx(-left.flow[2], rel=1e-6)
    # Bredt: T/(2 Am) on the mean line, exact up to (t/R)² / 12 or so
    assert abs(right.flow[2]) == pytest.approx(1 / (2 * np.pi * 0.9**2), rel=0.02)


def test_the_two_joints_of_an_uneven_piece_of_a_ring_add_up() -> None:
    """What each of them carries is the field's; the sum is V S/I of the piece to round-off, and zero under a twist."""
    mesh = structured.ring_sector(0.8, 1.0, (10, 370), 24, 1, 4)
    angle = np.degrees(np.arctan2(*mesh.nodes[mesh.triangles[:, :3]].mean(axis=1).T[::-1])) % 360
    parts = structured.relabelled(mesh, np.where(angle < 130, 0, np.where(angle < 250, 1, 2)), ("a", "b", "c"))
    section = layered(parts, [Moduli.isotropic(E, 0.3) for E in (1.0, 2.0, 5.0)])
    first, second = flows_of(section, (("a",), ("b",)), (("a",), ("c",)))
    assert not first.separates
    assert not second.separates
    np.testing.assert_allclose(first.flow + second.flow, first_moment(section, 0), atol=1e-11 * size_of(section))
    assert np.abs(first.flow).min() > 0.01


def planks(order: int = 4) -> Solved:
    """Three planks 200 x 40, glued flat."""
    mesh = structured.grid(
        np.linspace(0, 200, 7),
        np.linspace(0, 120, 7),
        order,
        lambda y, z: np.minimum(z // 40, 2),
        ("low", "mid", "top"),
    )
    return layered(mesh, 3 * [Moduli.isotropic(11600.0, 0.35, 650.0)])


def test_three_planks() -> None:
    """V = 12 kN: q = V Q/I = 133.33 N/mm, mean 0.6667 N/mm² on 200 mm (textbook formula; numbers worked beforehand)."""
    (flows,) = flows_of(planks(), (("top",), ("mid",)))
    result = joint_result(flows, SectionForces(Vz=12000.0), ())
    assert result.width == pytest.approx(200, rel=1e-12)
    # on the upper plank: the field is compressed more and more toward +x above, so the glue pushes it backward
    assert result.flow == pytest.approx(-133.333333333333, rel=1e-10)
    assert result.by_hand == pytest.approx(result.flow, rel=1e-10)
    assert result.mean == pytest.approx(-0.666666666666667, rel=1e-10)
    assert result.demand == pytest.approx(0.666666666666667, rel=1e-10)
    assert result.utilisation == pytest.approx(0.666666666666667 / 1.5, rel=1e-10)
    assert result.peak is not None
    assert result.peak_at is not None
    # wide and free-sided: the largest is not the mean, and lies on the joint
    assert abs(result.peak) > abs(result.mean or 0.0)
    assert result.peak_at[1] == pytest.approx(80)


def test_everything_beyond_the_joint_hangs_on_it() -> None:
    """Glue between low and mid carries the first moment of mid and top together."""
    section = planks()
    flows, both = flows_of(section, (("mid",), ("low",)), (("mid", "top"), ("low",)))
    assert flows.separates
    np.testing.assert_allclose(flows.flow, first_moment(section, 1, 2), atol=1e-11 * size_of(section))
    np.testing.assert_allclose(both.flow, flows.flow, atol=1e-11 * size_of(section))


def test_integral_of_the_field_across_tends_to_the_flow() -> None:
    """The nodal field's own traction, integrated over the joint by the edge's weights."""
    (flows,) = flows_of(planks(5), (("top",), ("mid",)))
    (bond,) = flows.bonds
    across = bond.across[:, 1].reshape(-1, 6)
    newton_cotes = np.array([19, 75, 50, 50, 75, 19]) / 288  # exact for the degree of the edge
    integral = (across @ newton_cotes * 200 / len(across)).sum()
    assert integral == pytest.approx(flows.flow[1], rel=1e-4)


def test_peak_is_read_away_from_singular_corners() -> None:
    """A narrow board on a wide one: the joint's ends are singular, the peak is at the stated distance or beyond."""
    mesh = structured.grid(
        structured.graded_lines(0, 6, [2, 4], 1, 5), structured.graded_lines(0, 2, [1], 0.5, 5), 3,
        lambda y, z: np.where(z < 1, 0, np.where((y > 2) & (y < 4), 1, -1)), ("wide", "narrow"),
    )  # fmt: skip
    section = layered(mesh, 2 * [Moduli.isotropic(1.0, 0.3)])
    corners = find_corners(mesh, section.edges, section.moduli.G)
    assert len(corners) == 2
    (flows,) = flows_of(section, (("narrow",), ("wide",)))
    everywhere, clear = (joint_result(flows, SectionForces(Vz=1.0), c) for c in ((), corners))
    assert abs(clear.peak or 0.0) < abs(everywhere.peak or 0.0)
    assert clear.peak_at is not None
    assert min(abs(clear.peak_at[0] - y) for y in (2.0, 4.0)) >= corners[0].distance - 1e-9
    assert clear.mean == everywhere.mean


def test_without_strength_there_is_no_utilisation() -> None:
    (flows,) = flows_of(planks(2), (("top",), ("mid",)), strength=None)
    result = joint_result(flows, SectionForces(Vz=1.0), ())
    assert result.capacity is None
    assert result.utilisation is None
    assert not {"capacity", "utilisation"} & set(result.to_dict())


def test_sides_that_do_not_touch_are_named() -> None:
    with pytest.raises(
        ValueError, match=r"joint 'glue 0': its sides \('top',\) and \('low',\) share no edge of the mesh"
    ):
        flows_of(planks(1), (("top",), ("low",)))
