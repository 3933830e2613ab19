"""Our intervals for IT against published two-sided bounds that hold for every section of their class.

T = IT/4 is the functional of those papers (the stress function of div grad u = -1). From memory:
G. Polya, Torsional rigidity, principal frequency, electrostatic capacity and symmetrization, Quart. Appl. Math. 6, 1948 (of all
simply connected sections of an area the circle has the largest IT);
G. Polya, Two more inequalities between physical and geometrical quantities, J. Indian Math. Soc. 24, 1960, and E. Makai, On the
principal frequency of a membrane and the torsional rigidity of a beam, 1962 (convex sections: A³/(3 L²) <= T <= 2 A³/(3 L²));
E. Nicolai's inequality IT <= 4 Iu Iv/(Iu + Iv), equal for ellipses: G. Polya, G. Szego, Isoperimetric Inequalities in Mathematical
Physics, 1951. The circle and the thin rectangle confirm the constants below.
"""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.spatial import ConvexHull

from tests.chain import Solved, solved
from tests.structured import rectangle, triangle
from tests.theory.test_bounds import certify
from xsec_fem.fem.edge_integrals import edge_lengths


def perimeter(section: Solved) -> float:
    return float(edge_lengths(section.mesh, section.edges, section.edges.free).sum())


def published(section: Solved) -> tuple[float, float]:
    """The narrowest of the bounds for a convex section, G = E/2 = 1 at nu = 0."""
    area, length = float(section.area.part_areas.sum()), perimeter(section)
    second = section.area.EI / 2
    nicolai = 4 * np.linalg.det(second) / np.trace(second)
    high = min(area**2 / (2 * np.pi), 8 * area**3 / (3 * length**2), nicolai)
    return 4 * area**3 / (3 * length**2), high


def test_constants_of_the_bounds():
    """A thin rectangle meets the lower bound, a circle the isoperimetric one and Nicolai's: closed forms only."""
    width, t = 1.0, 1e-6
    lower = 4 * (width * t) ** 3 / (3 * (2 * (width + t)) ** 2)
    assert lower == pytest.approx(width * t**3 / 3, rel=1e-5)  # of order t/width
    area, IT = np.pi, np.pi / 2
    assert area**2 / (2 * np.pi) == pytest.approx(IT, rel=1e-14)
    assert 4 * (np.pi / 4) ** 2 / (np.pi / 2) == pytest.approx(IT, rel=1e-14)


@pytest.mark.parametrize("aspect", [1.0, 2.0, 10.0, 40.0])
def test_rectangles(aspect):
    section = solved(rectangle(aspect, 1.0, max(4, int(2 * aspect)), 4, 4))
    low, high = certify(section).GIT
    least, most = published(section)
    assert least <= high
    assert low <= most
    assert least <= section.stiffness.GIT <= most


@settings(max_examples=15, deadline=None)
@given(st.lists(st.tuples(st.floats(-1, 1), st.floats(-1, 1)), min_size=3, max_size=3, unique=True))
def test_random_triangles(corners):
    hull_area = abs(np.linalg.det(np.column_stack([np.array(corners), np.ones(3)]))) / 2
    if hull_area < 0.05:
        corners = [(-1.0, 0.0), (1.0, 0.0), (corners[0][0], 1.0)]
    order = ConvexHull(np.array(corners)).vertices
    section = solved(triangle(np.array(corners)[order], 6, 3))
    low, high = certify(section).GIT
    least, most = published(section)
    assert least <= high
    assert low <= most
