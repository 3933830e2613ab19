"""The hand calculation: closed forms, unsymmetric sections, and no value where equilibrium gives none."""

from __future__ import annotations

import numpy as np
import pytest

from tests import structured
from tests.chain import layered, solved
from tests.recovery.test_cuts import VZ, fields_of
from xsec_fem.elementary.formula import NOT_SEPARATED, hand_of_cut, level_formula, reference_modulus
from xsec_fem.model.section import Cut
from xsec_fem.recovery.cuts import cut_result, place_cuts
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.moduli import Moduli

UP = np.array([0.0, 1.0])


def hand(fields, start, end, forces):
    (placed,) = place_cuts(fields, [Cut("cut", start, end)])
    return hand_of_cut(fields, placed, forces), cut_result(fields, placed, forces)


def test_rectangle_with_every_symbol() -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 2, 4, 3), nu=0.25, E=210.0))
    value, field = hand(fields, (-1, 1), (1, 1), SectionForces(Vz=300.0))
    found = value.calculation
    assert found is not None
    # b h³/12, S = b (h²/4 - z²)/2 below the cut with its sign: any handbook
    assert (found.Iyy, found.Izz, found.t) == pytest.approx((2 * 64 / 12, 4 * 8 / 12, 2.0))
    assert (found.Sy, found.Sz, found.A) == pytest.approx((-3.0, 0.0, 6.0), abs=1e-12)
    assert found.tau == pytest.approx(300 * 3 / (32 / 3 * 2))
    assert found.tau == pytest.approx(found.one_axis)
    assert found.q == pytest.approx(field.flow, rel=1e-4)
    assert (found.start, found.end, found.normal) == ((-1, 1), (1, 1), (0, 1))
    symbols = {symbol: number for symbol, number, _, _ in found.symbols()}
    assert symbols["Vz"] * -symbols["Sy"] / (symbols["Iyy"] * symbols["t"]) == pytest.approx(symbols["tau"])
    assert symbols["E_ref"] == 210.0


def test_layers_are_taken_over_the_modulus_that_carries_most() -> None:
    mesh = structured.grid([-1, 0, 1], [0, 1, 3], 2, lambda y, z: np.where(z < 1, 0, 1), ("stiff", "soft"))
    fields = fields_of(layered(mesh, [Moduli.isotropic(10.0, 0.0), Moduli.isotropic(1.0, 0.0)]))
    assert reference_modulus(fields) == 10.0
    value, field = hand(fields, (-1, 1.5), (1, 1.5), VZ)
    assert value.calculation is not None
    # transformed width 0.2 above: centroid (2*0.5 + 0.4*2)/2.4 = 0.75; S above the cut 0.2*1.5*(2.25 - 0.75)
    assert value.calculation.Sy == pytest.approx(-0.45)
    area = value.calculation.A
    assert area == pytest.approx(2.4 - 0.3)
    # the exact field is quadratic, the mesh's stresses linear: elements of one layer
    assert value.calculation.q == pytest.approx(field.flow, rel=0.1)


@pytest.mark.parametrize("forces", [VZ, SectionForces(Vy=1.0), SectionForces(Vy=0.6, Vz=-0.8)])
def test_unsymmetric_angle_needs_the_product_moment(forces) -> None:
    lines = (structured.graded_lines(0, 6, [1], 0.5, 4), structured.graded_lines(0, 10, [1], 0.5, 4))
    mesh = structured.grid(*lines, 3, lambda y, z: np.where((y < 1) | (z < 1), 0, -1))
    fields = fields_of(solved(mesh, nu=0.3), equilibrated=True)
    for start, end in (((0, 5), (1, 5)), ((3, 1), (3, 0))):
        value, field = hand(fields, start, end, forces)
        assert value.calculation is not None
        assert value.calculation.q == pytest.approx(field.flow, abs=1e-9)  # equilibrated field: round-off
        assert abs(value.calculation.one_axis - value.calculation.tau) > 0.03 * abs(value.calculation.tau)


def test_one_wall_of_a_closed_cell_has_no_hand_value_and_both_give_the_mean() -> None:
    unequal = structured.grid(
        [-5, -3, 4, 5], [-5, -4, 0, 4, 5], 3, lambda y, z: np.where((y > -3) & (y < 4) & (np.abs(z) < 4), -1, 0)
    )
    fields = fields_of(solved(unequal, nu=0.3), equilibrated=True)
    one, field = hand(fields, (-6, 0.5), (0, 0.5), VZ)
    assert one.calculation is None
    assert one.reason == NOT_SEPARATED
    assert field.t == pytest.approx(2.0)
    both, whole = hand(fields, (-6, 0.5), (6, 0.5), VZ)
    assert both.calculation is not None
    assert both.calculation.walls == pytest.approx((2.0, 1.0))
    assert both.calculation.tau == pytest.approx(whole.mean, rel=1e-9)
    shares = [span.flow / whole.flow for span in whole.spans]
    assert sum(shares) == pytest.approx(1.0)
    assert shares[0] > shares[1] > 0.1  # the thicker wall carries more


def test_formula_at_levels_in_any_order_and_outside() -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 2, 4, 2)))
    tau = level_formula(fields, VZ, UP, np.array([1.0, 9.0, 0.0, -1.0]))
    assert tau == pytest.approx([1.5 / 8 * 0.75, np.nan, 1.5 / 8, 1.5 / 8 * 0.75], nan_ok=True)
