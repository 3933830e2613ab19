"""Actions reduced to the shear centre: where a shear force acts decides the torque that comes with it."""

from __future__ import annotations

from typing import Protocol

from xsec_fem.model.section import Actions
from xsec_fem.recovery.stress_field import SectionForces


class Centres(Protocol):
    """Centroid and shear centre in the file's axes [mm]."""

    @property
    def yc(self) -> float:
        """Centroid, y [mm]."""

    @property
    def zc(self) -> float:
        """Centroid, z [mm]."""

    @property
    def ysc(self) -> float:
        """Shear centre of zero mean twist, y [mm]."""

    @property
    def zsc(self) -> float:
        """Shear centre of zero mean twist, z [mm]."""


def load_point(actions: Actions, centres: Centres) -> tuple[float, float]:
    """Return the point (y, z) through which Vy and Vz act [mm]; the shear centre when the user did not say.

    Raises ValueError for any other words than "shear centre" and "centroid".
    """
    if actions.load_point is None or actions.load_point == "shear centre":
        return centres.ysc, centres.zsc
    if actions.load_point == "centroid":
        return centres.yc, centres.zc
    if isinstance(actions.load_point, str):
        raise ValueError(f'load_point must be "shear centre", "centroid" or (y, z) (got {actions.load_point!r})')
    y, z = actions.load_point
    return float(y), float(z)


def reduce_actions(actions: Actions, centres: Centres) -> SectionForces:
    """Return the forces at the shear centre of zero mean twist [N, N mm].

    T_total = T + Vz (y - ysc) - Vy (z - zsc), with (y, z) the load point. Raises ValueError as `load_point` does.
    """
    y, z = load_point(actions, centres)
    torque = actions.T + actions.Vz * (y - centres.ysc) - actions.Vy * (z - centres.zsc)
    return SectionForces(actions.N, actions.Vy, actions.Vz, torque, actions.My, actions.Mz)
