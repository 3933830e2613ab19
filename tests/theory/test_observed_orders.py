"""How fast constants and nodal stresses converge on smooth sections, for every degree.

Observed, and why:
- The energy norm of the error falls as h^p (tests/fem/test_convergence.py), so constants by energy fall as h^2p at best.
- On curved sides the section itself is off: an arc interpolated at even nodes misses area (and every moment) by h^(p+1) for odd p
  and h^(p+2) for even p, like the Newton-Cotes rules. That is the order of the constants wherever it is below 2p.
- Nodal stresses, the mean over a part's triangles at a node, converge with h^p at least: their largest error is at the boundary,
  where nothing averages out.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import Solved, solved

every_order = pytest.mark.parametrize("order", range(1, 6))


def arc_order(order: int) -> int:
    return min(2 * order, order + 1 + (order % 2 == 0))


def rate(error: Callable[[int], float], n: int) -> float:
    return float(np.log2(error(n) / error(2 * n)))


def ring(n: int, order: int) -> Solved:
    return solved(structured.ring_sector(0.5, 1.0, (0, 360), 8 * n, n, order), 0.3)


@every_order
def test_torsion_constant_of_an_ellipse(order: int) -> None:
    exact = oracles.ellipse_torsion(1.5, 1.0)[0]
    observed = rate(lambda n: abs(solved(structured.ellipse(1.5, 1.0, n, order)).stiffness.GIT / exact - 1), 2)
    assert observed > arc_order(order) - 0.4


@every_order
def test_shear_area_of_a_ring(order: int) -> None:
    exact = oracles.ring_shear_coefficient(0.5, 0.3) * np.pi * 0.75
    observed = rate(lambda n: abs(ring(n, order).shear_area(1.0)[1] / exact - 1), 4 if order < 4 else 2)
    # degree 2: 2p and p + 2 are both 4, with errors of either sign; 3.64 here, 3.88 one mesh finer
    assert observed > arc_order(order) - 0.4


@every_order
def test_nodal_stress_of_a_ring(order: int) -> None:
    def error(n: int) -> float:
        section = ring(n, order)
        y, z = section.fields.part_nodes.positions.T
        return float(np.abs(section.fields.tau[:, 1] - oracles.ring_flexure(y, z, 0.5, 1.0, 0.3)).max())

    # from below: 0.96, 1.90, 2.84 and (one mesh coarser) 3.59, 4.51, which is 3.78, 4.74 on the next
    assert rate(error, 8 if order < 4 else 4) > order - 0.5


@every_order
def test_torsion_constant_of_an_eccentric_tube(order: int) -> None:
    """Smooth and not a polynomial; Macdonald's series."""

    def constant(n: int, p: int) -> float:
        return solved(structured.eccentric_ring(1.0, 0.5, 0.2, 6 * n, n, p)).stiffness.GIT

    exact = oracles.eccentric_tube_torsion_constant(0.5, 0.2)
    observed = rate(lambda n: abs(constant(n, order) / exact - 1), 2)
    assert observed > arc_order(order) - 0.5


@every_order
def test_right_angles_limit_the_torsion_constant_of_a_rectangle(order: int) -> None:
    """omega goes like r² log r in the corners, so the energy error falls as h^4 at most, for p = 2 as h^4 |log h| (3.7 here)."""
    exact = oracles.rectangle_torsion_constant(1.0, 1.0)
    observed = rate(lambda n: abs(solved(structured.rectangle(1, 1, n, n, order)).stiffness.GIT / exact - 1), 8)
    assert min(2 * order, 4) - 0.4 < observed < min(2 * order, 4) + 0.1


@pytest.mark.parametrize(("order", "n"), [(2, 4), (4, 1)])
def test_a_sharp_corner_limits_every_degree(order: int, n: int) -> None:
    """Re-entrant corner of 270 degrees: stress ~ r^(-1/3), energy error ~ h^(4/3); only grading helps."""
    values = [solved(structured.l_shape(4, 2, order, 1 / cells)).stiffness.GIT for cells in (n, 2 * n, 4 * n)]
    first, second = -np.diff(values)
    assert min(first, second) > 0  # the energy of the displacement solution bounds G IT from above
    assert np.log2(first / second) == pytest.approx(4 / 3, abs=0.08)
