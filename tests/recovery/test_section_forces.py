"""Where a shear force acts decides the torque that comes with it."""

from __future__ import annotations

from dataclasses import dataclass

import pytest

from xsec_fem.model.section import Actions
from xsec_fem.recovery.section_forces import load_point, reduce_actions
from xsec_fem.recovery.stress_field import SectionForces


@dataclass(frozen=True)
class Places:
    yc: float = 1.0
    zc: float = 2.0
    ysc: float = -3.0
    zsc: float = 5.0


@pytest.mark.parametrize(
    ("given", "expected"),
    [(None, (-3.0, 5.0)), ("shear centre", (-3.0, 5.0)), ("centroid", (1.0, 2.0)), ((7, 8), (7.0, 8.0))],
)
def test_load_point(given: str | tuple[float, float] | None, expected: tuple[float, float]) -> None:
    assert load_point(Actions(load_point=given), Places()) == expected


@pytest.mark.parametrize(
    ("actions", "torque"),
    [
        (Actions(Vz=10.0), 0.0),
        (Actions(Vz=10.0, T=3.0), 3.0),
        (Actions(Vz=10.0, load_point="centroid"), 10 * 4.0),
        (Actions(Vy=10.0, load_point="centroid"), 10 * 3.0),  # 3 below the shear centre: Vy turns from y to z
        (Actions(Vy=2.0, Vz=-1.0, T=0.5, load_point=(0.0, 0.0)), 0.5 - 3.0 + 10.0),
    ],
)
def test_torque_about_the_shear_centre(actions: Actions, torque: float) -> None:
    """T + Vz (y - ysc) - Vy (z - zsc): the moment about +x of forces along +y and +z."""
    assert torque == reduce_actions(actions, Places()).T


def test_other_forces_pass_through() -> None:
    forces = reduce_actions(Actions("case", 1.0, 2.0, 3.0, 4.0, 5.0, 6.0), Places())
    assert forces == SectionForces(1.0, 2.0, 3.0, 4.0, 5.0, 6.0)


def test_unknown_load_point_is_named() -> None:
    with pytest.raises(ValueError, match=r'load_point must be "shear centre", "centroid" or \(y, z\) \(got \'web\'\)'):
        load_point(Actions(load_point="web"), Places())
