"""Numbers read from a result: functions to put into a case as `extract` and `interval`."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from xsec_fem.model.section import Actions
from xsec_fem.results import Certificate, Properties, Result

from .case import Interval

Read = Callable[[Result], float]
ReadInterval = Callable[[Result], Interval]


def constant(name: str, scale: float = 1.0) -> Read:
    """Return a reader of a property by its name, times `scale`; AttributeError for a name that is not there."""
    if name not in Properties.__dataclass_fields__:
        raise AttributeError(f"no such property: {name!r}")
    return lambda result: scale * float(getattr(result.properties, name))


def bounds(name: str, scale: float = 1.0) -> ReadInterval:
    """Return a reader of a constant's guaranteed interval, times `scale`; AttributeError for a name that is not there."""
    if name not in Certificate.__dataclass_fields__:
        raise AttributeError(f"no guaranteed interval of {name!r}")

    def read(result: Result) -> Interval:
        low, high = sorted(scale * float(end) for end in getattr(_certificate(result), name))
        return low, high

    return read


def from_centroid(name: str, scale: float = 1.0) -> Read:
    """Return a reader of a shear centre's coordinate ("ysc", "zsc_trefftz", ...) from the centroid, times `scale` [mm]."""
    axis = name[0]
    return lambda result: scale * (constant(name)(result) - constant(f"{axis}c")(result))


def from_centroid_bounds(name: str, scale: float = 1.0) -> ReadInterval:
    """Return a reader of the guaranteed interval of that coordinate [mm]."""

    def read(result: Result) -> Interval:
        low, high = bounds(name)(result)
        centroid = constant(f"{name[0]}c")(result)
        ends = sorted((scale * (low - centroid), scale * (high - centroid)))
        return ends[0], ends[1]

    return read


def shear_coefficient(name: str) -> Read:
    """Return a reader of As/A, name "Asy" or "Asz": the energy shear coefficient [-]."""
    return lambda result: float(getattr(result.properties, name)) / result.properties.A


def shear_coefficient_bounds(name: str) -> ReadInterval:
    """Return a reader of the guaranteed interval of As/A [-]."""

    def read(result: Result) -> Interval:
        low, high = getattr(_certificate(result), name)
        return low / result.properties.A, high / result.properties.A

    return read


def stress(
    y: float,
    z: float,
    component: str,
    *,
    scale: float = 1.0,
    part: str | None = None,
    trefftz: bool = False,
    **actions: float,
) -> Read:
    """Return a reader of tau_xy, tau_xz, tau or sigma_x at a point under given actions, times `scale` [MPa].

    Actions are N, Vy, Vz, T, My, Mz, through the shear centre of zero mean twist, or through the Trefftz one. `part` chooses
    the side of a line between two materials. Raises ValueError when the point is outside, or lies in several parts and none
    is named.
    """

    def read(result: Result) -> float:
        centre = (result.properties.ysc_trefftz, result.properties.zsc_trefftz) if trefftz else "shear centre"
        load = replace(Actions(name="reading", load_point=centre), **actions)  # type: ignore[arg-type]
        values = [value for value in result.at(y, z, load) if part is None or value.part == part]
        if len(values) != 1:
            raise ValueError(f"{len(values)} values at ({y}, {z}), part {part!r}: one is wanted")
        return scale * float(getattr(values[0], component))

    return read


def _certificate(result: Result) -> Certificate:
    if result.certificate is None:
        raise ValueError(f"{result.section.title}: solved without bounds, certificate is {result.certificate}")
    return result.certificate
