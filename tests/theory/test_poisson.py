"""The Poisson term: the isotropic form, the tensor form by turning the axes, and the compatibility it must satisfy."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import oracles, structured
from tests.chain import Solved, solved
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.moduli import Moduli, rotated_tensor
from xsec_fem.theory.poisson import poisson_term

POINTS = np.random.default_rng(2).normal(size=(1, 30, 2))
A = np.array([[0.7, -0.3], [0.2, 1.1]])


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
def test_isotropic_form(nu: float) -> None:
    """d = nu (a (y² - z²)/2 + b y z, a y z + b (z² - y²)/2): Love, ch. XV."""
    y, z = POINTS[..., 0], POINTS[..., 1]
    found = poisson_term(nu * np.eye(2)[None], POINTS, A)
    for k, (a, b) in enumerate(A):
        expected = nu * np.stack([a * (y**2 - z**2) / 2 + b * y * z, a * y * z + b * (z**2 - y**2) / 2], axis=-1)
        np.testing.assert_allclose(found[:, :, k], expected, atol=1e-14)


@settings(deadline=None, max_examples=50)
@given(st.floats(-0.2, 0.5), st.floats(-0.2, 0.5), st.floats(-180, 180), st.floats(-180, 180))
def test_turning_the_material_is_turning_the_section(first: float, second: float, grain: float, turn: float) -> None:
    c, s = np.cos(np.radians(turn)), np.sin(np.radians(turn))
    R = np.array([[c, -s], [s, c]])
    here = poisson_term(rotated_tensor(first, second, grain)[None], POINTS, A)
    there = poisson_term(rotated_tensor(first, second, grain + turn)[None], POINTS @ R.T, A @ R.T)
    np.testing.assert_allclose(there, here @ R.T, atol=1e-13)


@settings(deadline=None, max_examples=50)
@given(st.floats(-0.2, 0.5), st.floats(-0.2, 0.5), st.floats(0, 180))
def test_compatibility_with_the_in_plane_strains(first: float, second: float, grain: float) -> None:
    """A slice strains by e = -x (a . r) N in its plane; its rotation w has grad w = (e_yz,y - e_yy,z, e_zz,y - e_yz,z).

    The shear strains gamma = grad psi - d follow from u_x and the in-plane displacements, so curl gamma = 2 dw/dx, that is
    curl d = -2 dw/dx, whatever psi: derived here.
    """
    N, h = rotated_tensor(first, second, grain), 1e-3
    for a in A:

        def strain(r: np.ndarray, a: np.ndarray = a) -> np.ndarray:
            return -(r @ a)[..., None, None] * N

        def d(r: np.ndarray, a: np.ndarray = a) -> np.ndarray:
            return np.asarray(poisson_term(N[None], r, a[None])[:, :, 0])

        ey, ez = np.array([h, 0.0]), np.array([0.0, h])
        # central differences of linear and quadratic functions: exact
        curl = ((d(POINTS + ey) - d(POINTS - ey))[..., 1] - (d(POINTS + ez) - d(POINTS - ez))[..., 0]) / (2 * h)
        by_y = (strain(POINTS + ey) - strain(POINTS - ey)) / (2 * h)
        by_z = (strain(POINTS + ez) - strain(POINTS - ez)) / (2 * h)
        slope = np.stack([by_y[..., 0, 1] - by_z[..., 0, 0], by_y[..., 1, 1] - by_z[..., 0, 1]], axis=-1)
        # the slope is constant, so the rotation is slope . r
        np.testing.assert_allclose(curl, -2 * (slope * POINTS).sum(axis=-1), atol=1e-10)


def test_a_gradient_added_to_the_term_changes_no_stress() -> None:
    """Only the curl of d counts: psi takes up the rest. Here d of the section turned by 37 degrees and back."""
    here = solved(structured.star_polygon([1, 0.7, 1.2, 0.9, 1.1], 2, 4), 0.3)
    nu = np.array([rotated_tensor(0.3, 0.3, 37.0)])
    there = Solved(here.mesh, Moduli(here.moduli.E, here.moduli.G, nu))
    np.testing.assert_allclose(there.fields.tau, here.fields.tau, atol=1e-11)


@pytest.mark.parametrize(("Gxy", "Gxz"), [(0.25, 1.0), (1.0, 0.25), (0.06, 0.7)])
def test_orthotropic_rectangle_against_its_series(Gxy: float, Gxz: float) -> None:
    """One material, its axes along the sides; derived here.

    The stress function obeys phi,yy/Gxz + phi,zz/Gxy = -2 nu_xy y/EI, which z' = z sqrt(Gxy/Gxz) turns into the isotropic series'
    equation; nu_xz does not enter under Vz.
    """
    nu_xy, width, depth = 0.4, 1.2, 1.0
    moduli = Moduli(np.array([1.0]), np.diag([Gxy, Gxz])[None], np.diag([nu_xy, 0.15])[None])
    section = Solved(structured.rectangle(width, depth, 20, 12, 5), moduli)
    k = np.sqrt(Gxz / Gxy)
    y, z = np.array([0.0, width / 2, 0.2, -0.3]), np.array([0.0, 0.0, 0.1, 0.25])
    stretched, plain = (oracles.rectangle_flexure(y, z / k, width, depth / k, g) for g in (2 * nu_xy * Gxz, 0.0))
    curl = (stretched - plain) / k**3  # the series divides by the stretched rectangle's second moment
    exact = np.stack([curl[:, 0] / k, (depth**2 / 4 - z**2) / (2 * width * depth**3 / 12) + curl[:, 1]], axis=-1)
    field = section.fields.combine(SectionForces(Vz=1.0))
    found = [(stress.tau_xy, stress.tau_xz) for (stress,) in (field.at(*point) for point in zip(y, z, strict=True))]
    np.testing.assert_allclose(found, exact, atol=1e-5)  # nodal stress of order 5, interpolated
