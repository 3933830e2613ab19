"""Elastic constants of the parts: turned tensors, and what is refused."""

from __future__ import annotations

import numpy as np
import pytest

from tests.chain import stacked
from xsec_fem.theory.moduli import Moduli, rotated_tensor


@pytest.mark.parametrize(
    ("degrees", "expected"),
    [
        (0, [[3, 0], [0, 1]]),
        (90, [[1, 0], [0, 3]]),
        (180, [[3, 0], [0, 1]]),
        (45, [[2, 1], [1, 2]]),
        (-45, [[2, -1], [-1, 2]]),
        (30, [[2.5, np.sqrt(3) / 2], [np.sqrt(3) / 2, 1.5]]),
    ],
)
def test_rotated_tensor(degrees: float, expected: list[list[float]]) -> None:
    """R diag(3, 1) Rᵀ: the first axis points at the grain angle, counter-clockwise from y."""
    np.testing.assert_allclose(rotated_tensor(3, 1, degrees), expected, atol=1e-15)
    grain = np.array([np.cos(np.radians(degrees)), np.sin(np.radians(degrees))])
    np.testing.assert_allclose(rotated_tensor(3, 1, degrees) @ grain, 3 * grain, atol=1e-14)


def test_isotropic() -> None:
    plain = Moduli.isotropic(210.0, 0.3)
    assert plain.E.tolist() == [210.0]
    np.testing.assert_allclose(plain.G[0], 210 / 2.6 * np.eye(2), rtol=1e-15)
    np.testing.assert_array_equal(plain.nu[0], 0.3 * np.eye(2))
    np.testing.assert_array_equal(Moduli.isotropic(11600, 0.35, 650).G[0], 650 * np.eye(2))


def test_without_nu_keeps_e_and_g() -> None:
    moduli = stacked([Moduli.isotropic(210.0, 0.3), Moduli.isotropic(70.0, 0.33)])
    plain = moduli.without_nu()
    assert not plain.nu.any()
    assert plain.equal_nu
    np.testing.assert_array_equal(plain.E, moduli.E)
    np.testing.assert_array_equal(plain.G, moduli.G)
    assert moduli.nu.any()  # the original is as before


@pytest.mark.parametrize(("first", "second", "equal"), [(0.3, 0.3, True), (0.3, 0.31, False), (0.3, 0.3 + 1e-14, True)])
def test_equal_nu(first: float, second: float, equal: bool) -> None:
    assert stacked([Moduli.isotropic(1.0, first), Moduli.isotropic(2.0, second)]).equal_nu is equal


@pytest.mark.parametrize(
    ("E", "G", "nu", "message"),
    [
        ([1.0], np.eye(2), np.zeros((1, 2, 2)), r"1 values of E, but G has shape \(2, 2\) and nu \(1, 2, 2\)"),
        ([1.0, 2.0], np.eye(2)[None], np.zeros((1, 2, 2)), r"2 values of E, but G has shape \(1, 2, 2\)"),
        ([1.0], np.eye(2)[None], np.zeros((2, 2, 2)), r"nu \(2, 2, 2\)"),
        ([0.0], np.eye(2)[None], np.zeros((1, 2, 2)), r"part 0: E = 0\.0 and G = .* must be positive"),
        ([-5.0], np.eye(2)[None], np.zeros((1, 2, 2)), r"part 0: E = -5\.0"),
        ([np.nan], np.eye(2)[None], np.zeros((1, 2, 2)), r"part 0: E = nan"),
        ([1.0, 1.0], np.stack([np.eye(2), np.diag([1.0, -2.0])]), np.zeros((2, 2, 2)), r"part 1: .*-2\.0.* must be positive"),
        ([1.0], np.array([[[1.0, 3.0], [3.0, 1.0]]]), np.zeros((1, 2, 2)), r"part 0: .* must be positive"),  # indefinite
    ],
)  # fmt: skip
def test_faults(E: list[float], G: np.ndarray, nu: np.ndarray, message: str) -> None:
    with pytest.raises(ValueError, match=message):
        Moduli(np.array(E), G, nu)
