"""The evidence table: bounds that narrow at the order of the degree, intervals that nest."""

import math
from dataclasses import replace

import pytest

from tests.pipeline.sections import HEAD, section
from xsec_fem import solve
from xsec_fem.pipeline.convergence import convergence

SQUARE = HEAD + 'shape = "rectangle"\nwidth = 2\nheight = 1\n'
TUBE = HEAD + 'shape = "circle"\ndiameter = 2\n[[parts.holes]]\nshape = "circle"\ndiameter = 1\nat = [0.2, 0]\n'


@pytest.mark.parametrize(
    ("text", "degree", "order"), [(SQUARE, 2, 2), (SQUARE, 4, 2), (TUBE, 2, 2), (TUBE, 3, 3), (TUBE, 4, 4)]
)
def test_observed_order(text, degree, order):
    """The degree on a smooth section; 2 at right-angled corners, where torsion has a term r² log r whatever the degree."""
    read = section(text)
    rows = convergence(solve(replace(read, solve=replace(read.solve, order=degree))))
    assert len(rows) == 5
    # single steps on unstructured meshes scatter, so the order is taken over the series; log r costs the square some tenths
    whole = -2 * math.log(rows[-1].energy_error / rows[0].energy_error) / math.log(rows[-1].nodes / rows[0].nodes)
    assert whole > order - 0.5


def test_intervals_of_all_meshes_hold_the_exact_value():
    rows = convergence(solve(section(SQUARE)))
    exact = 2 * 0.228681677
    for row in rows:
        low, high = row.IT_interval
        assert low <= exact + 1e-8  # the digits of k1 above
        assert high >= exact - 1e-8
    assert rows[0].observed_order is None
    assert all(row.observed_order is not None for row in rows[1:])
