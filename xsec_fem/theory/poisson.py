"""The Poisson term d of the flexure problem, behind one function of the part and the point.

A bent slice strains sideways by -nu sigma/E. With bending varying along the beam, sigma = -E x f and f = a . r, the in-plane
displacements leave the shear strains grad psi - d, with

    d = (a . r) N r - 1/2 (r . N r) a,       N = R diag(nu_xy, nu_xz) Rᵀ  (nu times identity when isotropic).

Isotropic: A. E. H. Love, A Treatise on the Mathematical Theory of Elasticity, 4th ed. 1927, ch. XV (flexure of a beam by a
terminal load); the tensor form follows by the same integration, derived here: d is the one field, up to a gradient and
a rigid turn that is zero in the mean, whose antisymmetric part of the gradient is that of the in-plane strains.
An in-plane solve for parts of unequal N would replace this function and nothing else.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mapping import by_component

FloatArray = npt.NDArray[np.float64]


def poisson_term(nu: FloatArray, r: FloatArray, a: FloatArray) -> FloatArray:
    """Return d at points of one batch: shape (m, Q, k, 2) [1/N].

    nu : (m, 2, 2) tensor of each triangle's part [-].
    r : (m, Q, 2) position from the E-weighted centroid [mm].
    a : (k, 2) one row a problem, a = inverse of EI times the unit force [1/(N mm²)].
    Source: Love 1927, ch. XV (module docstring).
    """
    y, z = r[..., 0, None], r[..., 1, None]
    N = nu[:, None, None]
    Nr = N[..., 0, 0] * y + N[..., 0, 1] * z, N[..., 1, 0] * y + N[..., 1, 1] * z
    ar = y * a[:, 0] + z * a[:, 1]
    half_rNr = 0.5 * (y * Nr[0] + z * Nr[1])
    result = by_component(ar.shape)
    for component in (0, 1):
        result[..., component] = ar * Nr[component] - half_rNr * a[:, component]
    return result
