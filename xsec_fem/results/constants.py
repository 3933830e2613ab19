"""Constants of the section, their guaranteed intervals, and the meshes they were found on."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass


@dataclass(frozen=True)
class Properties:
    """Constants of the section; A, I.., Iw are E-weighted and IT, Asy, Asz G-weighted over the reference material.

    Lengths [mm], areas [mm²], second moments and IT [mm⁴], Iw [mm⁶]; stiffnesses EA [N], EI [N mm²], GIT [N mm²],
    EIw [N mm⁴]; shear_flexibility (2, 2) [1/N]; stiffness (6, 6): N, Vy, Vz, T, My, Mz at the centroid. For a file in
    "N mm"; other unit systems accordingly.
    """

    A: float
    yc: float
    zc: float
    Iyy: float
    Izz: float
    Iyz: float
    alpha_deg: float
    Iu: float
    Iv: float
    IT: float
    Iw: float
    ysc: float
    zsc: float
    ysc_trefftz: float
    zsc_trefftz: float
    Asy: float
    Asz: float
    shear_flexibility: tuple[tuple[float, ...], ...]
    EA: float
    EIyy: float
    EIzz: float
    EIyz: float
    GIT: float
    EIw: float
    stiffness: tuple[tuple[float, ...], ...]
    reference_material: str


@dataclass(frozen=True)
class Certificate:
    """Guaranteed intervals (lowest, highest) of the constants, in the units and axes of `Properties`.

    `energy_error` holds, for unit Vy, Vz and T, the largest possible relative error of the stress field in energy [-];
    `coupling` is that of shear_flexibility's mixed entry. `strict` is True when nothing but round-off stands between the section
    and the bounds; `reason` says why not.
    """

    energy_error: Mapping[str, float]
    IT: tuple[float, float]
    Asy: tuple[float, float]
    Asz: tuple[float, float]
    coupling: tuple[float, float]
    ysc_trefftz: tuple[float, float]
    zsc_trefftz: tuple[float, float]
    ysc: tuple[float, float]
    zsc: tuple[float, float]
    strict: bool
    reason: str


@dataclass(frozen=True)
class MeshStep:
    """One mesh of the adaptive sequence: nodes, triangles and the bounds of the energy errors of Vy, Vz and T [-]."""

    nodes: int
    elements: int
    energy_errors: Mapping[str, float]

    @property
    def energy_error(self) -> float:
        """The largest of the three [-]."""
        return max(self.energy_errors.values())


@dataclass(frozen=True)
class ConvergenceRow:
    """One mesh of the evidence: degree, nodes, triangles, bound of the energy error, observed order (None on the first row),

    IT [mm⁴] and Asz [mm²] with their guaranteed intervals.
    """

    degree: int
    nodes: int
    elements: int
    energy_error: float
    observed_order: float | None
    IT: float
    IT_interval: tuple[float, float]
    Asz: float
    Asz_interval: tuple[float, float]


@dataclass(frozen=True)
class Contact:
    """Two parts that touch along `length` [mm]; `joint` names the declared joint, None when they are simply one solid.

    `slit` is how much of that length is a slit, where the faces slide on each other [mm].
    """

    parts: tuple[str, str]
    length: float
    joint: str | None = None
    slit: float = 0.0
