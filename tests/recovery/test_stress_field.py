"""Nodal stress fields: unit fields, combination with signs, values at points."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from tests.chain import Solved, layered, solved
from tests.theory.strategies import RandomSection, random_sections
from xsec_fem.fem.mapping import batches
from xsec_fem.recovery.stress_field import PointStress, SectionForces
from xsec_fem.theory.moduli import Moduli

FORCES = SectionForces(3.0, -1.0, 2.0, 0.7, 5.0, -4.0)


def two_layers(order: int = 3) -> Solved:
    mesh = structured.grid([-1, 0, 1], [0, 0.5, 1, 1.5], order, lambda y, z: np.where(z < 1, 0, 1), ("lower", "upper"))
    return layered(mesh, [Moduli.isotropic(1.0, 0.2), Moduli.isotropic(10.0, 0.2)])


@settings(deadline=None, max_examples=15)
@given(random_sections())
def test_normal_stress_carries_the_forces(random: RandomSection) -> None:
    """sigma_x is linear in each part, so nodal values interpolate it exactly: N = ∫ sigma, My = ∫ sigma z, Mz = -∫ sigma y."""
    section = random.solved()
    field = section.fields.combine(FORCES)
    pairs = section.fields.part_nodes.triangles
    found = np.zeros(3)
    for batch in batches(section.mesh):
        sigma = field.sigma_x[pairs[batch.elements]] @ batch.shape_values.T * batch.weights
        r = batch.points - section.area.centroid
        found += [sigma.sum(), (sigma * r[..., 1]).sum(), -(sigma * r[..., 0]).sum()]
    np.testing.assert_allclose(found, [FORCES.N, FORCES.My, FORCES.Mz], atol=1e-11)


@settings(deadline=None, max_examples=15)
@given(st.lists(st.floats(-10, 10), min_size=6, max_size=6), st.floats(-3, 3))
def test_combination_is_linear_with_signs(values: list[float], factor: float) -> None:
    fields = two_layers(1).fields
    here = fields.combine(SectionForces(*values))
    parts = [fields.combine(SectionForces(**{name: value})) for name, value in zip(
        ("N", "Vy", "Vz", "T", "My", "Mz"), values, strict=True)]  # fmt: skip
    np.testing.assert_allclose(here.tau_components, sum(part.tau_components for part in parts), atol=1e-11)
    np.testing.assert_allclose(here.sigma_x, sum(part.sigma_x for part in parts), atol=1e-11)
    scaled = fields.combine(SectionForces(*(factor * value for value in values)))
    np.testing.assert_allclose(scaled.tau_components, factor * here.tau_components, atol=1e-11)


def test_measures() -> None:
    field = two_layers().fields.combine(FORCES)
    np.testing.assert_allclose(field.tau, np.hypot(field.tau_xy, field.tau_xz), rtol=1e-15)
    np.testing.assert_allclose(field.von_mises, np.sqrt(field.sigma_x**2 + 3 * field.tau**2), rtol=1e-15)
    point = PointStress("a", 3.0, -4.0, 12.0)
    assert point.tau == 5.0
    assert point.von_mises == pytest.approx(np.sqrt(144 + 75), rel=1e-15)


@pytest.mark.parametrize("order", range(1, 6))
def test_values_at_nodes_are_the_nodal_values(order: int) -> None:
    section = solved(structured.disc(1.0, 2, order), 0.3)
    field = section.fields.combine(FORCES)
    for node in range(0, len(field.tau), 7):
        (stress,) = field.at(*field.part_nodes.positions[node])
        # located to 1e-10 on the reference triangle
        assert stress.tau_xy == pytest.approx(field.tau_xy[node], abs=1e-8)
        assert stress.tau_xz == pytest.approx(field.tau_xz[node], abs=1e-8)
        assert stress.sigma_x == pytest.approx(field.sigma_x[node], abs=1e-8)


def test_between_nodes_it_interpolates() -> None:
    """Pure bending is linear: exact at any point, in either part."""
    section = two_layers()
    field = section.fields.combine(SectionForces(N=2.0, My=1.0))
    for y, z in ((0.3, 0.2), (-0.77, 0.9), (0.1, 1.31)):
        (stress,) = field.at(y, z)
        E = 1.0 if z < 1 else 10.0
        expected = E * (2 / section.area.EA + (z - section.area.centroid[1]) / section.area.EIyy)
        assert stress.sigma_x == pytest.approx(expected, rel=1e-11)


def test_each_part_keeps_its_own_value_at_the_joint() -> None:
    stresses = two_layers().fields.combine(SectionForces(My=1.0, Vy=1.0)).at(0.25, 1.0)
    assert [stress.part for stress in stresses] == ["lower", "upper"]
    assert stresses[1].sigma_x == pytest.approx(10 * stresses[0].sigma_x, rel=1e-11)
    # tau_xy along the joint jumps with G as well
    assert stresses[1].tau_xy > 5 * stresses[0].tau_xy > 0


def test_shear_across_a_joint_is_continuous_in_the_limit() -> None:
    """tau_xz crosses the joint: both parts' values approach one another as the mesh is refined."""
    gaps = []
    for n in (1, 2):
        lines = np.linspace(-1, 1, 4 * n + 1)
        mesh = structured.grid(
            lines, np.linspace(0, 1.5, 6 * n + 1), 2, lambda y, z: np.where(z < 1, 0, 1), ("lower", "upper")
        )
        section = layered(mesh, [Moduli.isotropic(1.0, 0.2), Moduli.isotropic(10.0, 0.2)])
        lower, upper = section.fields.combine(SectionForces(Vz=1.0)).at(0.0, 1.0)
        gaps.append(abs(lower.tau_xz - upper.tau_xz))
    assert gaps[1] < gaps[0] / 2
    assert gaps[1] < 0.02


@pytest.mark.parametrize("point", [(5.0, 0.0), (0.0, -0.01), (1e6, 0.0)])
def test_a_point_outside_is_named(point: tuple[float, float]) -> None:
    field = two_layers().fields.combine(FORCES)
    with pytest.raises(
        ValueError, match=rf"the point \({point[0]:g}, {point[1]:g}\) lies outside the section".replace("+", r"\+")
    ):
        field.at(*point)


def test_free_edge_carries_no_shear_across() -> None:
    section = solved(structured.rectangle(2, 1, 8, 4, 5), 0.3)
    y, z = section.fields.part_nodes.positions.T
    field = section.fields.combine(SectionForces(Vy=1.0, Vz=1.0, T=0.3))
    # nodal stress of order 5 away from the corners, h = 1/4
    sides = (np.abs(np.abs(y) - 1) < 1e-9) & (np.abs(z) < 0.3)
    assert np.abs(field.tau_xy[sides]).max() < 2e-3 * field.tau.max()
    ends = (np.abs(np.abs(z) - 0.5) < 1e-9) & (np.abs(y) < 0.8)
    assert np.abs(field.tau_xz[ends]).max() < 2e-3 * field.tau.max()
