"""Exponents where materials meet all round a point."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.theory.corner_exponent import Sector, closed_wedge_exponent, wedge_mode

ROUND_OFF = 1e-12  # bisection to 2^-54 of an interval, on a function of condition about 1/contrast


def turn(angles_deg, shears, start=0.3):
    """Sectors of the given angles and isotropic G, adding up to one turn."""
    ends = start + np.radians(np.concatenate([[0.0], np.cumsum(angles_deg)]))
    return [Sector(a, b, G * np.eye(2)) for a, b, G in zip(ends[:-1], ends[1:], shears, strict=True)]


@pytest.mark.parametrize("contrast", [1.5, 10.0, 161.4476387975881])
def test_chessboard(contrast):
    """Four quarters of two materials: lambda = 4/pi atan(1/sqrt(contrast)); 161.4476 gives 0.1.

    R. B. Kellogg, On the Poisson equation with intersecting interfaces, Appl. Anal. 4, 1975 (from memory; the tangent form is
    derived from its symmetry: flow-free and value-free diagonals).
    """
    found = closed_wedge_exponent(turn([90] * 4, [1.0, contrast, 1.0, contrast]))
    assert found == pytest.approx(4 / np.pi * np.arctan(contrast**-0.5), abs=ROUND_OFF)


@pytest.mark.parametrize("angle", [30, 90, 135])
@pytest.mark.parametrize("contrast", [0.01, 0.5, 3.0, 100.0])
def test_wedge_in_a_matrix(angle, contrast):
    """Modes even and odd about the bisector, derived here: g1 tan(l a) + g2 tan(l (pi - a)) = 0, and with g1, g2 swapped."""
    found = closed_wedge_exponent(turn([angle, 360 - angle], [contrast, 1.0]))
    half = np.radians(angle) / 2

    def smallest(first, second):
        grid = np.linspace(1e-4, 1, 20001)
        # tangents multiplied out, so that there are no poles
        values = first * np.sin(grid * half) * np.cos(grid * (np.pi - half)) + second * np.cos(grid * half) * np.sin(
            grid * (np.pi - half)
        )
        change = np.flatnonzero(values[:-1] * values[1:] < 0)
        return grid[change[0]] if len(change) else np.inf

    expected = min(smallest(contrast, 1.0), smallest(1.0, contrast))
    assert found == pytest.approx(expected, abs=1e-4)  # the step of the grid
    assert found < 1.0


@pytest.mark.parametrize("angles", [[360], [180, 180], [100, 260], [90, 90, 180]])
def test_one_material_is_not_singular(angles):
    assert closed_wedge_exponent(turn(angles, [2.0] * len(angles))) == 1.0


def test_straight_line_between_materials_is_not_singular():
    assert closed_wedge_exponent(turn([180, 180], [1.0, 50.0])) == 1.0


@settings(max_examples=25, deadline=None)
@given(st.floats(20, 160), st.floats(0.05, 20), st.floats(0.3, 3), st.floats(0, np.pi))
def test_affine_map_keeps_the_exponent(angle, contrast, stretch, direction):
    """x' = A x turns G into A G Aᵀ (up to a factor) and keeps the powers of r: an anisotropic wedge with a known answer."""
    sectors = turn([angle, 130, 230 - angle], [contrast, 1.0, 2.0])
    c, s = np.cos(direction), np.sin(direction)
    Q = np.array([[c, -s], [s, c]])
    A = Q @ np.diag([stretch, 1.0]) @ Q.T

    def mapped(ray):
        image = A @ [np.cos(ray), np.sin(ray)]
        return ray + (np.arctan2(image[1], image[0]) - ray + np.pi) % (2 * np.pi) - np.pi  # turned by less than 90 deg

    images = [Sector(mapped(x.start), mapped(x.end), A @ x.G @ A.T) for x in sectors]
    before, after = closed_wedge_exponent(sectors), closed_wedge_exponent(images)
    assert after == pytest.approx(
        before, abs=1e-9
    )  # angles through arctan and a solve a sector: a few hundred roundings


def test_mode_closes_on_itself():
    sectors = turn([90, 270], [10.0, 1.0])
    lam = closed_wedge_exponent(sectors)
    mode = wedge_mode(sectors, lam, closed=True)
    ends = [
        (mode.values(k, np.array([sector.start]))[0], mode.values(k, np.array([sector.end]))[0])
        for k, sector in enumerate(sectors)
    ]
    assert ends[0][1] == pytest.approx(ends[1][0], abs=1e-10)
    assert ends[1][1] == pytest.approx(ends[0][0], abs=1e-10)
