"""Directions of tau: inside the material, of unit length, evenly spaced."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from xsec_fem.report.direction_arrows import direction_arrows


@pytest.mark.parametrize(("name", "spacing"), [("boards", 8.0), ("tee", 4.0), ("tube", 0.008)])
def test_arrows_lie_in_the_material_apart_from_each_other(solved, name, spacing):
    stress = solved(name).cases[0].stress
    box = (*stress.part_nodes.positions.min(axis=0), *stress.part_nodes.positions.max(axis=0))
    places, along = direction_arrows(stress, box, spacing, stress.tau.max())
    assert len(places) > 10
    np.testing.assert_allclose(np.hypot(*along.T), 1.0, rtol=1e-12)
    gaps = np.hypot(*(places[:, None] - places[None]).transpose(2, 0, 1)) + np.eye(len(places)) * 1e9
    assert gaps.min() >= 0.7 * spacing
    for place, direction in zip(places, along, strict=True):
        stresses = [np.array([value.tau_xy, value.tau_xz]) for value in stress.at(*place)]
        assert stresses  # inside
        # one of the parts' values there, to round-off of finding the point again
        assert min(np.abs(tau / np.hypot(*tau) - direction).max() for tau in stresses) < 1e-6


def test_broad_material_has_an_even_grid(solved):
    stress = solved("boards").cases[0].stress
    places, _ = direction_arrows(stress, (-35.0, -35.0, 35.0, 35.0), 10.0, 0.75)
    on_grid = np.isclose(places / 10.0, np.rint(places / 10.0), atol=1e-9).all(axis=1)
    assert on_grid.all()


def test_no_arrows_outside_or_without_stress(solved):
    stress = solved("boards").cases[0].stress
    assert len(direction_arrows(stress, (500.0, 500.0, 600.0, 600.0), 10.0, 1.0)[0]) == 0
    assert len(direction_arrows(solved("axial").cases[0].stress, (-10.0, -10.0, 10.0, 10.0), 2.0, 0.0)[0]) == 0


def test_an_unlimited_stress_at_a_corner_does_not_take_the_arrows_away(solved):
    case = solved("tee").cases[0]
    field = case.stress
    tau = field.tau_components.copy()
    tau[np.argmax(field.tau)] *= 1e6
    spiked = replace(field, tau_components=tau)
    box = (-60.0, 0.0, 60.0, 112.0)
    assert len(direction_arrows(spiked, box, 4.0, case.tau_max.value)[0]) > 20
