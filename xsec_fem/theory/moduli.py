"""Elastic constants of the parts as the theory needs them: E, the tensor G and the tensor nu."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]


def rotated_tensor(first: float, second: float, degrees: float) -> FloatArray:
    """Return R diag(first, second) Rᵀ, shape (2, 2), R the rotation by the grain angle [deg], counter-clockwise.

    The unit is that of the two values, MPa for shear moduli. Source: Sokolnikoff 1956 (change of axes of a tensor of second order).
    """
    quarters, rest = divmod(degrees, 90.0)
    if rest == 0.0 or first == second:  # exact, so that equal materials stay equal
        return np.diag([second, first] if quarters % 2 and first != second else [first, second]).astype(np.float64)
    c, s = np.cos(np.radians(degrees)), np.sin(np.radians(degrees))
    turn = np.array([[c, -s], [s, c]])
    tensor: FloatArray = turn @ np.diag([first, second]) @ turn.T
    return tensor


_SAME_NU = 1e-12  # typed values differ by more; turned tensors differ by round-off


@dataclass(frozen=True)
class Moduli:
    """Constants per part of a mesh.

    Attributes
    ----------
    E : (P,) modulus along the beam [MPa].
    G : (P, 2, 2) shear moduli between the beam's axis and the section's plane [MPa].
    nu : (P, 2, 2) Poisson's ratios for stress along the beam [-].

    Raises
    ------
    ValueError
        When shapes disagree or a modulus is not positive; the message names the part's index.
    """

    E: FloatArray
    G: FloatArray
    nu: FloatArray

    def __post_init__(self) -> None:
        count = len(self.E)
        if self.G.shape != (count, 2, 2) or self.nu.shape != (count, 2, 2):
            raise ValueError(f"{count} values of E, but G has shape {self.G.shape} and nu {self.nu.shape}")
        for part in range(count):
            if not (self.E[part] > 0 and np.linalg.eigvalsh(self.G[part]).min() > 0):
                raise ValueError(f"part {part}: E = {self.E[part]} and G = {self.G[part].tolist()} must be positive")

    @classmethod
    def isotropic(cls, E: float, nu: float, G: float | None = None) -> Moduli:
        """Return the constants of one isotropic part, arrays of shape (1,) and (1, 2, 2); G is E/(2(1+nu)) when absent [MPa].

        Raises ValueError when E or G is not positive. Source: Timoshenko & Goodier 1970 (E/(2(1+nu))).
        """
        shear = E / (2 * (1 + nu)) if G is None else G
        return cls(np.array([E], float), shear * np.eye(2)[None], nu * np.eye(2)[None])

    def without_nu(self) -> Moduli:
        """Return the same constants with nu = 0 in the in-plane terms, arrays of the same shape."""
        return replace(self, nu=np.zeros_like(self.nu))

    @property
    def equal_nu(self) -> bool:
        """True when all parts have the same nu tensor: then the theory is exact also for layered sections."""
        return bool(np.allclose(self.nu, self.nu[0], rtol=0.0, atol=_SAME_NU))
