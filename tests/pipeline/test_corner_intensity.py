"""K of the singular stress: against the exact torsion of a sector, and independent of where it is read."""

import math
from dataclasses import replace

import numpy as np
import pytest

from tests.pipeline.sections import L_SHARP, TWIST, section, sector
from xsec_fem import solve
from xsec_fem.pipeline.solution import solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.recovery.corner_intensity import corner_intensities


def sector_intensity(angle):
    """K for unit G and twist, radius 1: the first term of the stress function's series, derived here.

    phi = -r²/2 (1 - cos 2t/cos a) + sum over odd n of b_n r^(n pi/a) cos(n pi t/a) vanishes on all sides when b_n are the Fourier
    coefficients of (1 - cos 2t/cos a)/2: b_n = -8 sin(n pi/2) (a/pi)²/(pi n (n² - 4 a²/pi²)). |tau| -> |b_1| (pi/a) r^(pi/a - 1).
    """
    b1 = -8 * angle**2 / math.pi**3 / (1 - 4 * angle**2 / math.pi**2)
    return abs(b1) * math.pi / angle


@pytest.mark.parametrize("degrees", [225, 270, 300])
def test_vertex_of_a_sector(degrees):
    read = sector(degrees)
    result = solve(replace(read, solve=replace(read.solve, accuracy=1e-3, corner_distance=0.02)))
    (corner,) = result.corners
    (reading,) = result.cases[0].corners
    assert corner.angle_deg == pytest.approx(degrees, abs=1e-6)
    assert corner.exponent == pytest.approx(180 / degrees - 1, abs=1e-10)  # bisection to round-off
    K = reading.intensity * result.properties.GIT / 1.0  # unit torque -> unit G twist: G = 1 here
    # read at half of 0.02: the neglected rest is of order 0.01^(2 - lambda), below 0.4 % at 225 deg
    assert pytest.approx(sector_intensity(math.radians(degrees)), rel=0.004) == K


def test_independent_of_mesh_and_distance():
    read = section(L_SHARP + TWIST)
    found = []
    for accuracy in (0.01, 0.001):
        result = solve(replace(read, solve=replace(read.solve, accuracy=accuracy)))
        solution = solve_mesh(read, result.mesh, Stopwatch(), certificate=False)
        for distance in (0.2, 0.1, 0.05):
            corners = [replace(corner, distance=distance) for corner in solution.corners]
            found.append(corner_intensities(solution.warping, solution.stiffness, corners)[0])
    spread = np.ptp(found, axis=0) / np.abs(np.mean(found, axis=0))
    # shear: the rest is of order r²; torsion: r^(4/3), about 1 % at 0.1 of a wall of 1
    assert (spread < [0.003, 0.003, 0.015]).all()


def test_stress_beside_the_corner_follows_K():
    read = section(L_SHARP + TWIST)
    result = solve(replace(read, solve=replace(read.solve, accuracy=5e-4, corner_distance=0.01)))
    (reading,) = result.cases[0].corners
    assert reading.distance == 0.01
    # at a hundredth of the wall the regular part is about r^(1/3) = 0.2 of a term of order one beside K r^(-1/3) = 4.6
    assert reading.tau == pytest.approx(reading.intensity * 0.01 ** (-1 / 3), rel=0.06)
