"""Roots of many polynomials at once, each in a bracket of its own, and the places where polynomials turn."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

FloatArray = npt.NDArray[np.float64]

_STEPS = 60  # Newton needs about 6; a bracket that is only ever halved needs 53 to reach round-off


def evaluate(coefficients: FloatArray, u: FloatArray) -> FloatArray:
    """Return polynomials with coefficients (K, n), lowest first, at u (K,) or (K, m): the shape of u."""
    columns = coefficients if u.ndim == 1 else coefficients[:, None]
    value = np.zeros_like(u) + columns[..., -1]
    for k in range(coefficients.shape[1] - 2, -1, -1):
        value = value * u + columns[..., k]
    return value


def derivative(coefficients: FloatArray) -> FloatArray:
    """Return the coefficients of the derivatives of polynomials (K, n), lowest first, shape (K, n - 1)."""
    return np.asarray(coefficients[:, 1:] * np.arange(1, coefficients.shape[1]))


def bracketed_roots(coefficients: FloatArray, low: FloatArray, high: FloatArray) -> FloatArray:
    """Return a root in [low, high] of each polynomial (K, n); low, high and the result have the shape (K,) or (K, m).

    Newton's steps inside a bracket that shrinks with every sign, halved when a step leaves it. Without a change of sign: `high`.
    """
    low, high = low.astype(float), high.astype(float)
    slopes = derivative(coefficients)
    rising = evaluate(coefficients, low) < 0
    none = rising == (evaluate(coefficients, high) < 0)
    u, result_without = (low + high) / 2, high.copy()
    for _ in range(_STEPS):
        value = evaluate(coefficients, u)
        below = (value < 0) == rising
        low, high = np.where(below, u, low), np.where(below, high, u)
        with np.errstate(divide="ignore", invalid="ignore"):
            step = u - value / evaluate(slopes, u)
            inside = (step >= low) & (step <= high)
        following = np.where(inside, step, (low + high) / 2)
        done = np.abs(following - u).max(initial=0.0) <= 1e-16
        u = following
        if done:
            break
    return np.where(none, result_without, u)


def turning_points(coefficients: FloatArray) -> FloatArray:
    """Return 0, p - 1 places that include all in (0, 1) where the polynomials (K, p + 1) turn, and 1: sorted, (K, p + 1).

    Between neighbours each polynomial only grows or only falls. The roots of each derivative lie between those of the next one
    (Rolle's theorem), so they are bracketed from the linear one down; places not needed fall on turns of a derivative or an end.
    """
    count, degree = len(coefficients), coefficients.shape[1] - 1
    chain = [coefficients]
    for _ in range(degree - 1):
        chain.append(derivative(chain[-1]))
    breaks = np.tile([0.0, 1.0], (count, 1))
    for slope in chain[:0:-1]:
        roots = bracketed_roots(slope, breaks[:, :-1], breaks[:, 1:])
        breaks = np.hstack([np.zeros((count, 1)), roots, np.ones((count, 1))])
    return breaks
