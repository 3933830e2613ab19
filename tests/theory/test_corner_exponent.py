"""Exponents of wedges: closed forms, and affine maps that must not change them."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.theory.corner_exponent import Sector, wedge_exponent
from xsec_fem.theory.moduli import rotated_tensor

IDENTITY = np.eye(2)
BISECTION = 1e-13  # 54 halvings, and the round-off of a dozen angles


def wedge(degrees: Sequence[float], tensors: Sequence[np.ndarray], start: float = 0.0) -> list[Sector]:
    directions = np.radians(start + np.concatenate([[0.0], np.cumsum(degrees)]))
    return [Sector(a, b, G) for a, b, G in zip(directions[:-1], directions[1:], tensors, strict=True)]


@pytest.mark.parametrize("angle", [185, 200, 216, 225, 240, 250, 270, 288, 300, 315, 330, 360])
@pytest.mark.parametrize("pieces", [1, 2, 3, 4, 5, 8, 12])
def test_one_material_in_any_number_of_triangles(angle: float, pieces: int) -> None:
    """lambda = pi/w (antiplane analogue of M. L. Williams 1952, from memory)."""
    assert wedge_exponent(wedge([angle / pieces] * pieces, [IDENTITY] * pieces)) == pytest.approx(
        180 / angle, abs=BISECTION
    )


@pytest.mark.parametrize("angle", [20, 90, 135, 179.9, 180])
def test_convex_corners_are_not_singular(angle: float) -> None:
    assert wedge_exponent(wedge([angle / 2] * 2, [IDENTITY] * 2)) == pytest.approx(1.0, abs=BISECTION)


@pytest.mark.parametrize("ratio", [0.01, 0.1, 1.0, 10.0, 1000.0])
def test_two_materials_at_270_degrees(ratio: float) -> None:
    """Half plane G1 and quarter plane G2: lambda = (2/pi) atan sqrt(1 + 2 G1/G2), derived here; 0.86322 at G2/G1 = 0.1."""
    found = wedge_exponent(wedge([180, 90], [IDENTITY, ratio * IDENTITY]))
    assert found == pytest.approx(2 / np.pi * np.arctan(np.sqrt(1 + 2 / ratio)), abs=BISECTION)


def test_two_materials_published_digits() -> None:
    # the same case computed beforehand from the equation G1 tan(lambda a1) + G2 tan(lambda a2) = 0
    assert wedge_exponent(wedge([180, 90], [IDENTITY, 0.1 * IDENTITY])) == pytest.approx(0.863222348174127, abs=1e-12)


@pytest.mark.parametrize(("first", "second"), [(40, 110), (90, 90), (100, 20), (150, 170), (20, 300)])
@pytest.mark.parametrize("ratio", [1e-4, 0.05, 3.0, 1e3])
def test_two_materials_satisfy_their_equation(first: float, second: float, ratio: float) -> None:
    """G1 tan(lambda a1) + G2 tan(lambda a2) = 0 without poles: G1 sin cos + G2 cos sin = 0 (derived here), no smaller root."""
    found = wedge_exponent(wedge([first, second], [IDENTITY, ratio * IDENTITY]))
    a, b = np.radians([first, second])

    def equation(lam: np.ndarray | float) -> np.ndarray:
        return np.asarray(np.sin(lam * a) * np.cos(lam * b) + ratio * np.cos(lam * a) * np.sin(lam * b))

    below = equation(np.linspace(1e-6, found * (1 - 1e-9), 5000))
    assert below.min() > 0
    if found < 1:
        assert abs(equation(found)) < 1e-12 * (1 + ratio)


@pytest.mark.parametrize("contrast", [1e2, 1e3, 1e5, 1e7])
def test_close_pair_of_roots(contrast: float) -> None:
    """Two like soft wedges on a stiff one: roots at pi/(2 a) and a hair above; the lower must not be lost between steps.

    Antisymmetric field about the middle, free outer sides: tan(lambda 100°) tan(lambda 30°) = contrast (derived here).
    """
    found = wedge_exponent(wedge([100, 60, 100], [IDENTITY, contrast * IDENTITY, IDENTITY]))
    # close to the pole of tan: round-off grows by the contrast
    assert np.tan(found * np.radians(100)) * np.tan(found * np.radians(30)) == pytest.approx(
        contrast, rel=1e-13 * contrast
    )
    assert found < 0.9


angles = st.lists(st.floats(10, 110), min_size=1, max_size=3)


@settings(deadline=None, max_examples=40)
@given(angles, st.floats(-170, 170), st.floats(0.02, 50), st.floats(0, 180))
def test_anisotropy_is_an_affine_map(degrees: list[float], start: float, stretch: float, grain: float) -> None:
    """With one tensor G, x = G^(1/2) X turns the equation into Laplace's: lambda = pi/(mapped angle)."""
    G = rotated_tensor(stretch, 1.0, grain)
    values, vectors = np.linalg.eigh(G)
    root = vectors @ np.diag(values**-0.5) @ vectors.T
    rays = np.radians(np.linspace(start, start + sum(degrees), 2000))
    mapped = root @ np.array([np.cos(rays), np.sin(rays)])
    turned = np.unwrap(np.arctan2(mapped[1], mapped[0]))
    expected = min(1.0, np.pi / (turned[-1] - turned[0]))
    assert wedge_exponent(wedge(degrees, [G] * len(degrees), start)) == pytest.approx(expected, abs=1e-11)


@settings(deadline=None, max_examples=40)
@given(
    st.lists(st.tuples(st.floats(10, 85), st.floats(0.1, 10), st.floats(0.2, 5), st.floats(0, 180)), min_size=1, max_size=4),
    st.floats(-180, 180),
    st.floats(1e-3, 1e3),
)  # fmt: skip
def test_turning_mirroring_and_scaling_change_nothing(
    sectors: list[tuple[float, float, float, float]], turn: float, scale: float
) -> None:
    degrees = [s[0] for s in sectors]
    here = wedge_exponent(wedge(degrees, [rotated_tensor(g, g * k, a) for _, g, k, a in sectors]))
    turned = wedge_exponent(
        wedge(degrees, [scale * rotated_tensor(g, g * k, a + turn) for _, g, k, a in sectors], turn)
    )
    back = wedge_exponent(
        wedge(degrees[::-1], [rotated_tensor(g, g * k, -a) for _, g, k, a in sectors[::-1]], -sum(degrees))
    )
    assert turned == pytest.approx(here, abs=1e-11)
    assert back == pytest.approx(here, abs=1e-11)


def test_a_filled_notch_with_a_slit_lies_between_hole_and_full_circle() -> None:
    filled = [wedge_exponent(wedge([270, 90], [IDENTITY, g * IDENTITY])) for g in (1e-9, 1e-2, 0.1, 1.0)]
    assert filled[0] == pytest.approx(2 / 3, abs=1e-8)  # as soft as nothing: 270 degrees
    assert filled[-1] == pytest.approx(1 / 2, abs=BISECTION)  # the same material: a slit
    assert np.all(np.diff(filled) < 0)
