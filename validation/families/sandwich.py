"""Sandwich panels: the exact layered beam, and the handbook's core shear V/(b d) and shear stiffness with what they leave out."""

from __future__ import annotations

import numpy as np

from ..case import Case, Source, Tolerance
from ..closed_form.bonded import LayeredFlexure
from ..reading import constant, stress
from ..section_text import section_text
from .bonded_materials import shear_flexibility

GROUP = "sandwich"
_LAYERS = Source("any text on the strength of materials", "transformed section, E Q/(EI b)", "", "exact at nu = 0")
_ALLEN = Source(
    "H. G. Allen",
    "Analysis and Design of Structural Sandwich Panels",
    "1969",
    "core shear V/(b d), shear stiffness b d² G/c",
)


def cases() -> list[Case]:
    """Return panels with thin and thick faces."""
    return [*_panel("thin", 1.0, 60.0, 70000.0, 70.0), *_panel("thick", 6.0, 40.0, 20000.0, 100.0)]


def _panel(name: str, face: float, core: float, E_face: float, E_core: float) -> list[Case]:
    """Width 100, faces of thickness `face`, nu = 0."""
    b, V = 100.0, 1000.0
    half = core / 2
    lines = np.array([-half - face, -half, half, half + face])
    exact = LayeredFlexure(lines, np.array([E_face, E_core, E_face]), b, 0.0)
    materials = {"face": {"E": E_face, "nu": 0.0}, "core": {"E": E_core, "nu": 0.0}}
    parts = [
        {
            "name": "below",
            "material": "face",
            "shape": "rectangle",
            "width": b,
            "height": face,
            "at": [0.0, -half - face / 2],
        },
        {"name": "core", "material": "core", "shape": "rectangle", "width": b, "height": core},
        {
            "name": "above",
            "material": "face",
            "shape": "rectangle",
            "width": b,
            "height": face,
            "at": [0.0, half + face / 2],
        },
    ]
    title = f"sandwich b = {b:g}, faces {face:g} (E = {E_face:g}), core {core:g} (E = {E_core:g})"
    text = section_text(title, parts, materials=materials)
    polynomial = Tolerance(
        1e-9, "a polynomial of degree 2 in z, within the elements' degree; round-off with moduli 1000 apart"
    )
    d = core + face
    # what the handbook leaves out: the core's own bending, E_c c²/(4 E_f t d) of its stress, and that of the faces, t²/(3 d²)
    core_part, face_part = E_core * core**2 / (4 * E_face * face * d), face**2 / (3 * d**2)
    left_out = core_part + face_part

    def case(
        key: str, quantity: str, read: object, reference: float, source: Source, tolerance: Tolerance, unit: str
    ) -> Case:
        return Case(f"sandwich.{name}.{key}", GROUP, title, quantity, (text,), read, reference, source,  # type: ignore[arg-type]
                    "computed", tolerance, unit, quick=name == "thin")  # fmt: skip

    middle = stress(0.0, 0.0, "tau_xz", part="core", Vz=V)
    handbook = Tolerance(
        1.5 * left_out, "the formula leaves out the bending of the core on its own and of the faces on their own: "
        f"{core_part:.1e} and {face_part:.1e} here, and uneven core shear of the first size",
    )  # fmt: skip
    return [
        case(
            "EIyy",
            "EIyy",
            constant("EIyy"),
            exact.EI,
            _LAYERS,
            Tolerance(1e-12, "polynomials on straight sides; round-off"),
            "N mm²",
        ),
        case(
            "core-middle", "tau_xz, middle of the core", middle, V * exact.elementary(0.0), _LAYERS, polynomial, "MPa"
        ),
        case(
            "joint",
            "tau_xz, core at the face",
            stress(0.0, half, "tau_xz", part="core", Vz=V),
            V * exact.elementary(half),
            _LAYERS,
            polynomial,
            "MPa",
        ),
        case("flexibility", "shear flexibility", shear_flexibility, exact.flexibility(), _LAYERS, polynomial, "1/N"),
        case("allen-shear", "tau_xz of the core, V/(b d)", middle, V / (b * d), _ALLEN, handbook, "MPa"),
        case(
            "allen-stiffness",
            "shear stiffness, b d² G/c",
            lambda r: 1 / shear_flexibility(r),
            b * d**2 * E_core / 2 / core,
            _ALLEN,
            handbook,
            "N",
        ),
    ]
