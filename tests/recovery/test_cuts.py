"""Flows, peaks and profiles on straight cuts, and the faults of cuts that do not fit."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import oracles, structured
from tests.chain import Solved, layered, solved
from xsec_fem.elementary.formula import hand_flows, shear_gradient
from xsec_fem.errors import InputError
from xsec_fem.fem.assembly import add_at_nodes, element_loads
from xsec_fem.fem.cut_off import half_plane_moments
from xsec_fem.fem.line_crossings import line_crossings
from xsec_fem.fem.mapping import batches
from xsec_fem.model.section import Cut
from xsec_fem.recovery.cuts import as_unit, cut_result, place_cuts, read_cuts, unit_flows
from xsec_fem.recovery.element_stress import equilibrated_stress
from xsec_fem.recovery.solved_fields import SolvedFields, shear_only
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.bounds import equilibrated_stresses
from xsec_fem.theory.moduli import Moduli
from xsec_fem.theory.warping import SHEAR

UP = np.array([0.0, 1.0])
VZ = SectionForces(Vz=1.0)


def fields_of(chain: Solved, equilibrated: bool = False) -> SolvedFields:
    flow = None
    if equilibrated:
        flow = equilibrated_stress(equilibrated_stresses(chain.warping.problem, chain.edges), chain.stiffness)
    return SolvedFields(chain.warping, chain.stiffness, chain.fields, chain.edges, flow_field=flow)


def flows_and_hand(fields: SolvedFields, normal, levels, forces):
    """Flow of the field through whole lines, and -∫_A E f."""
    crossings = line_crossings(fields.curves, normal, levels)
    flow = np.bincount(crossings.span_line, unit_flows(fields, crossings) @ as_unit(forces), minlength=len(levels))
    moments, _ = half_plane_moments(fields.curves, normal, levels, fields.E, fields.area.centroid)
    return flow, hand_flows(moments, shear_gradient(fields, forces))


@given(
    st.lists(st.floats(0.5, 2.0), min_size=3, max_size=7),
    st.floats(0, 2 * np.pi),
    st.tuples(st.floats(-1, 1), st.floats(-1, 1)),
    st.integers(2, 4),
)
@settings(deadline=None, max_examples=15)
def test_the_equilibrated_flow_is_the_hand_value_on_any_line(radii, angle, shear, order) -> None:
    fields = fields_of(solved(structured.star_polygon(radii, 2, order), nu=0.3), equilibrated=True)
    normal = np.array([np.cos(angle), np.sin(angle)])
    heights = fields.mesh.nodes @ normal
    levels = np.linspace(heights.min(), heights.max(), 15)[1:-1]
    flow, hand = flows_and_hand(fields, normal, levels, SectionForces(Vy=shear[0], Vz=shear[1], T=0.5))
    # round-off of the solve, relative to V/size; 0.2 is below the smallest size
    assert flow == pytest.approx(hand, abs=1e-9)


@pytest.mark.parametrize(
    "mesh", [structured.box(10, 1, 3), structured.channel(10, 6, 1, 3, 2), structured.l_shape(8, 1, 3, levels=3)]
)
def test_the_equilibrated_flow_is_exact_beside_singular_corners(mesh) -> None:
    fields = fields_of(solved(mesh, nu=0.3), equilibrated=True)
    low, high = mesh.nodes[:, 1].min(), mesh.nodes[:, 1].max()
    flow, hand = flows_and_hand(fields, UP, np.linspace(low, high, 23)[1:-1], SectionForces(Vy=0.4, Vz=1, T=2.0))
    assert flow == pytest.approx(hand, abs=1e-9)


@pytest.mark.parametrize("order", [1, 2, 3, 4])
def test_the_field_of_the_warping_functions_converges_to_the_hand_value(order) -> None:
    errors = []
    for n in (4, 8):
        fields = fields_of(solved(structured.rectangle(2, 4, n, 2 * n, order), nu=0.3))
        flow, hand = flows_and_hand(fields, UP, np.linspace(-1.93, 1.91, 301), VZ)
        errors.append(float(np.sqrt(np.mean((flow - hand) ** 2)) / hand.max()))
    # stresses of degree p are off by h^p, but the Poisson part has r² log r at the rectangle's corners, where the boundary data
    # of the two sides disagree: h³ at most. Half an order is left for levels that lie unlike in the two meshes
    assert errors[1] < errors[0] / 2 ** (min(order, 3) - 0.5)
    assert errors[1] < 0.5 / 8 ** min(order, 3)


def test_nodal_forces_of_the_part_below_a_line_of_edges_sum_to_the_hand_value() -> None:
    """r_i = ∫_A (tau . grad v_i - E f v_i) vanishes below the line and sums to -∫_A E f on it: exact on any mesh."""
    chain = solved(structured.box(10, 1, 2), nu=0.3)
    problem, mesh = chain.warping.problem, chain.mesh
    inside = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)[:, 1] < 1.0
    residual = np.zeros_like(chain.warping.functions)
    for batch in batches(mesh):
        mine = inside[batch.elements]
        scalar = np.zeros((*batch.points.shape[:2], 5))
        scalar[..., SHEAR] = -problem.moduli.E[batch.part][:, None, None] * (problem.position(batch) @ problem.a.T)
        add_at_nodes(residual, batch.nodes[mine], element_loads(batch, scalar, chain.warping.stresses(batch))[mine])
    on_line = np.abs(mesh.nodes[:, 1] - 1.0) < 1e-9
    assert np.abs(residual[~on_line]).max() < 1e-9
    fields = fields_of(chain)
    for column, forces in ((1, SectionForces(Vy=1.0)), (2, VZ)):
        moments, _ = half_plane_moments(fields.curves, UP, np.array([1.0]), fields.E, fields.area.centroid)
        hand = hand_flows(moments, shear_gradient(fields, forces))
        assert residual[on_line, column].sum() == pytest.approx(hand[0], abs=1e-9)


@pytest.mark.parametrize("nu", [0.0, 0.3])
def test_profile_and_peak_of_a_wide_rectangle(nu) -> None:
    fields = fields_of(solved(structured.rectangle(4, 1, 16, 4, 4), nu=nu))
    (placed,) = place_cuts(fields, [Cut("middle", (-2, 0.1), (2, 0.1))])
    result = cut_result(fields, placed, VZ)
    (span,) = result.spans
    exact = oracles.rectangle_flexure(span.position - 2, np.full(len(span.position), 0.1), 4, 1, nu / (1 + nu))
    # degree 4, elements of a quarter of the depth, whose fourth power is 4e-3; a quarter of that at the free ends
    assert span.across == pytest.approx(exact[:, 1], abs=1e-3 * exact.max())
    assert span.along == pytest.approx(exact[:, 0], abs=1e-3 * exact.max())
    assert result.t == pytest.approx(4.0)
    assert result.mean == pytest.approx(1.5 / 4 * (1 - 0.04), rel=1e-3)  # parabola, any handbook
    assert result.peak == pytest.approx(exact[:, 1].max(), rel=1e-3)
    if nu:
        assert abs(result.peak_at[0]) == pytest.approx(2.0)  # the Poisson effect puts it at the side
    assert result.flow == pytest.approx(sum(s.flow for s in result.spans))


def test_two_layers() -> None:
    mesh = structured.grid([-1, 0, 1], [0, 0.5, 1, 2, 3], 3, lambda y, z: np.where(z < 1, 0, 1), ("stiff", "soft"))
    stiff, soft = Moduli.isotropic(10.0, 0.0), Moduli.isotropic(1.0, 0.0)
    fields = fields_of(layered(mesh, [stiff, soft]))
    levels = np.array([0.3, 0.8, 1.4, 2.6])
    crossings = line_crossings(fields.curves, UP, levels)
    exact = oracles.layered_flexure(levels, np.array([0.0, 1.0, 3.0]), np.array([10.0, 1.0]), 2.0)
    # the exact field is quadratic: degree 3 holds it
    assert unit_flows(fields, crossings)[:, 1] / 2 == pytest.approx(exact, rel=1e-10)


def test_forces_combine_with_their_signs() -> None:
    fields = fields_of(solved(structured.box(10, 1, 3), nu=0.3))
    crossings = line_crossings(fields.curves, UP, np.array([0.2]))
    unit = unit_flows(fields, crossings)
    forces = SectionForces(Vy=1.0, Vz=-2.0, T=3.0)
    # the walls' own flows, from the recovered field's profiles: trapezoid over 5 points an interval
    readings = read_cuts(fields, crossings, forces)
    by_interval = ((readings.across[:, 1:] + readings.across[:, :-1]) / 2 * np.diff(readings.position)).sum(axis=1)
    # degree 3 along 1 mm, in fifths; the recovered field differs from the warping functions' by its own error
    assert np.bincount(crossings.span, by_interval) == pytest.approx(unit @ [1.0, -2.0, 3.0], rel=2e-2)
    # torsion goes round: nothing through the two walls together
    assert unit[:, 2].sum() == pytest.approx(0.0, abs=1e-3 * abs(unit[0, 2]))
    assert shear_only(forces) == SectionForces(Vy=1.0, Vz=-2.0)


def test_without_the_poisson_parts_the_field_is_that_of_nu_0() -> None:
    mesh = structured.rectangle(4, 1, 8, 4, 4)
    with_nu, without = fields_of(solved(mesh, nu=0.3)), fields_of(solved(mesh, nu=0.0))
    # at nu = 0 the rectangle's field does not depend on E or G
    assert with_nu.plain.tau[:, :2] == pytest.approx(without.fields.tau[:, :2], abs=1e-10)
    assert np.abs(with_nu.fields.tau[:, 1] - with_nu.plain.tau[:, 1]).max() > 0.1


def test_ends_typed_roughly_count_and_a_short_touch_does_not() -> None:
    fields = fields_of(solved(structured.box(10, 1, 2)))
    (left,) = place_cuts(fields, [Cut("left web", (-5.004, 0), (-4.004, 0))])
    assert cut_result(fields, left, VZ).spans[0].t == pytest.approx(1.0)
    (both,) = place_cuts(fields, [Cut("both", (-6, 0), (6, 0))])
    assert [span.t for span in cut_result(fields, both, VZ).spans] == pytest.approx([1, 1])
    (touch,) = place_cuts(fields, [Cut("left, touching the right", (-6, 0), (4.004, 0))])
    assert len(cut_result(fields, touch, VZ).spans) == 1


def test_direction_of_the_cut_sets_the_sign() -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 2, 4, 3)))
    there, back = place_cuts(fields, [Cut("a", (-2, 0), (2, 0)), Cut("b", (2, 0), (-2, 0))])
    assert cut_result(fields, there, VZ).flow == pytest.approx(-cut_result(fields, back, VZ).flow)
    assert cut_result(fields, there, VZ).flow > 0


def test_all_cuts_that_do_not_fit_are_named_at_once() -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 2, 4, 1)))
    cuts = [Cut("half", (-1, 0.5), (0.25, 0.5)), Cut("good", (-1, 0), (1, 0)), Cut("beside", (3, 0), (5, 0))]
    with pytest.raises(InputError) as caught:
        place_cuts(fields, cuts, "beam.toml")
    first, second = (str(fault) for fault in caught.value.faults)
    assert first == (
        'beam.toml: cuts[0] "half" must run from free edge to free edge, but ends inside the material (got (0.25, 0.5)). '
        "The free edges there are at (-1, 0.5) and (1, 0.5): take the cut on to both, or leave this wall out."
    )
    assert second == (
        'beam.toml: cuts[2] "beside" crosses no material (got from [3, 0] to [5, 0]). '
        "Move it, so that it runs through the section from free edge to free edge."
    )
