"""Tolerances that several families share, each with the reasoning behind it."""

from __future__ import annotations

from .case import Tolerance
from .section_text import Table

ACCURACY = 1e-4  # [solve] accuracy of the cases: the guaranteed relative energy error at which refinement ends
SOLVE: Table = {"accuracy": ACCURACY}

# A circle drawn by polynomials of degree 4 over 24 spans, as a first mesh has it, is off by 1.7e-9 in area and twice that in its
# second moments; the error grows as the sixth power of the spans' length, so that over 16 spans it is 4e-8
ARC = 1e-7


def energy(reference_error: float = 0.0) -> Tolerance:
    """A constant that is an energy (IT, shear flexibility): off by the square of the relative energy error; straight sides."""
    square = ACCURACY**2
    text = f"straight sides; the guaranteed energy error is below {ACCURACY:g}, and a constant given by energy is off by its square"
    if reference_error:
        text += f"; the reference is good to {reference_error:g}"
    return Tolerance(square + reference_error, text)


def curved() -> Tolerance:
    """A constant of a section with curved sides, which are drawn as polynomials of degree 4."""
    return Tolerance(
        ARC,
        f"curved sides are polynomials of degree 4 on at least 16 spans a turn: moments are off by less than {ARC:g}; "
        f"the energy error below {ACCURACY:g} adds its square",
    )


def product(size: float, reference_error: float = 0.0) -> Tolerance:
    """A length that is a product of two solutions (shear centre), of a section of that size [mm]."""
    value = ACCURACY**2 * size + reference_error
    return Tolerance(
        value,
        f"the error is bounded by the product of two energy errors below {ACCURACY:g} times a length of the size of the section"
        + (f"; the reference is rounded at {reference_error:g}" if reference_error else ""),
        relative=False,
    )


def warping(reference_error: float = 0.0) -> Tolerance:
    """The warping constant, an integral of the square of the warping."""
    return Tolerance(
        100 * ACCURACY**2 + reference_error,
        "the error of a smooth functional is the product of two energy errors, of the warping and of an auxiliary problem, "
        "which is the square of 1e-4 times a factor of the section's shape"
        + (f"; the reference is good to {reference_error:g}" if reference_error else ""),
    )


def point_stress(scale: float = 1.0) -> Tolerance:
    """A stress at a point, in units where the mean stress V/A, or G twist times the wall, is `scale`."""
    return Tolerance(
        2 * ACCURACY * scale,
        f"no bound holds at a point; a field of degree 4 with an energy error below {ACCURACY:g} errs there by no more than twice "
        "that",
        relative=False,
    )


def notch(ratio: float, scale: float = 1.0) -> Tolerance:
    """A stress on a concave side of radius `ratio` times the section's half size."""
    return Tolerance(
        2 * ACCURACY * scale / ratio,
        f"the neighbourhood of a concave side of {ratio:g} times the section's half size holds about the square of that share of "
        f"the energy, so that the relative error there may be {ACCURACY:g} over {ratio:g}; at a point no more than twice that",
        relative=False,
    )
