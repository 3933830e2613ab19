"""Orthonormal polynomials on the reference triangle, with their gradients, stable to high degree.

pi_ij = c_ij t^i P_i(x/t) P_j^(2i+1,0)(2 eta - 1),   x = 2 xi + eta - 1,  t = 1 - eta,  c_ij² = (2i + 1)(2i + 2j + 2),

P_i Legendre, P_j^(a,0) Jacobi polynomials (J. Proriol, C. R. Acad. Sci. Paris 245, 1957; T. Koornwinder, Two-variable analogues of
the classical orthogonal polynomials, 1975). t^i P_i(x/t) comes from Bonnet's recurrence multiplied by powers of t, so
that nothing is divided by t and the corner (0, 1) is a point like any other.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]


def polynomial_count(degree: int) -> int:
    """Return the dimension of the polynomials of that degree on the triangle; 0 for degree -1."""
    return (degree + 1) * (degree + 2) // 2


def _times(a: FloatArray, b: FloatArray) -> FloatArray:
    """Product of two functions given as rows value, d/dxi, d/deta: (3, Q)."""
    return np.stack([a[0] * b[0], a[1] * b[0] + a[0] * b[1], a[2] * b[0] + a[0] * b[2]])


def _scaled_legendre(degree: int, x: FloatArray, t2: FloatArray) -> list[FloatArray]:
    """t^i P_i(x/t) for i = 0..degree: (n + 1) S_(n+1) = (2n + 1) x S_n - n t² S_(n-1)."""
    found = [np.stack([np.ones_like(x[0]), 0 * x[0], 0 * x[0]]), x]
    for n in range(1, degree):
        found.append(((2 * n + 1) * _times(x, found[n]) - n * _times(t2, found[n - 1])) / (n + 1))
    return found[: degree + 1]


def _jacobi(degree: int, a: int, s: FloatArray) -> list[FloatArray]:
    """P_j^(a,0)(s) for j = 0..degree by the three-term recurrence (Abramowitz & Stegun 1964, 22.7.1 with beta = 0)."""
    one = np.stack([np.ones_like(s[0]), 0 * s[0], 0 * s[0]])
    found = [one, (a * one + (a + 2) * s) / 2]
    for n in range(1, degree):
        m = 2 * n + a
        step = (m + 1) * ((m + 2) * m * _times(s, found[n]) + a * a * found[n])
        found.append((step - 2 * (n + a) * n * (m + 2) * found[n - 1]) / (2 * (n + 1) * (n + a + 1) * m))
    return found[: degree + 1]


def orthonormal_polynomials(degree: int, points: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Return values, shape (Q, n), and gradients, shape (Q, n, 2) [-], at reference points (Q, 2), n = (degree + 1)(degree + 2)/2.

    Sorted by total degree, so that the first n' are the basis of any lower degree; the first is the constant sqrt 2.
    Source: Proriol 1957, Koornwinder 1975 (module docstring).
    """
    xi, eta = np.asarray(points, float).T
    one, zero = np.ones_like(xi), np.zeros_like(xi)
    x, t, s = (
        np.stack(rows)
        for rows in ([2 * xi + eta - 1, 2 * one, one], [1 - eta, zero, -one], [2 * eta - 1, zero, 2 * one])
    )
    legendre = _scaled_legendre(degree, x, _times(t, t))
    jacobi = [_jacobi(degree - i, 2 * i + 1, s) for i in range(degree + 1)]
    rows = [
        np.sqrt((2 * i + 1) * (2 * total + 2)) * _times(legendre[i], jacobi[i][total - i])
        for total in range(degree + 1)
        for i in range(total + 1)
    ]
    table = np.stack(rows, axis=-1)  # (3, Q, n)
    return table[0], np.moveaxis(table[1:], 0, -1)
