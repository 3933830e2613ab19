"""Gaps that look like contact: found between parts and inside one, never at wedges, fillets or contacts."""

import pytest
import shapely

from tests.model.two_boards import part, section_of
from xsec_fem.model.flat_parts import Scale
from xsec_fem.model.near_gaps import gap_width, narrow_gaps


def gaps(*tables: str) -> list[str]:
    return [message for code, message in section_of(*tables).cautions if code == "near gap"]


def test_two_halves_that_meet_on_one_side_only():
    """Two channels of 10 mm wall toe to toe, closed at the bottom and 0.02 apart at the top."""
    half = "polygon points=[[0,0],[100,0],[100,10],[10,10],[10,90],[{tip},90],[{tip},100],[0,100]]"
    left = part("left", half.format(tip=99.98))
    right = part("right", half.format(tip=100), 'mirror = "y"', "at = [200, 0]", 'anchor = "origin"')
    assert gaps(left, right) == ['"left" and "right": faces 0.02 mm apart at (99.99, 95): treated as not bonded.']


@pytest.mark.parametrize(
    ("gap", "found"), [(0.02, "0.02 mm apart at (0, 46)"), (0.038, "0.038 mm apart at (0, 46)"), (0.05, None)]
)
def test_a_sheet_that_closes_on_itself_but_for_a_slit(gap, found):
    """Wall 8, 2 area / perimeter 7.8 with its two ends: a gap below 7.8/200 = 0.039 is near."""
    points = f"[[{-gap / 2},46],[-60,46],[-60,-46],[60,-46],[60,46],[{gap / 2},46]]"
    said = gaps(part("tube", f"strip points={points} thickness=8"))
    assert said == ([f'"tube": faces {found}: treated as not bonded.'] if found else [])


def test_a_slit_between_arcs():
    """Half shells of 8 mm wall: one shares its edge with the other on the left and stays 0.02 short of it on the right."""
    upper = part("upper", "sector radius=100 from_deg=0.012 to_deg=180 thickness=8")  # 96 x 0.012 deg = 0.0201 mm
    said = gaps(upper, part("lower", "sector radius=100 from_deg=180 to_deg=360 thickness=8"))
    # centroid of a ring sector at 2/3 (R³ - r³)/(R² - r²) = 96.0556
    assert said == ['"upper" and "lower": faces 0.0201 mm apart at (96.0556, 0.0100589): treated as not bonded.']


@pytest.mark.parametrize(
    "tables",
    [
        [part("a", "i_shape depth=300 width=150 web=7 flange=10 root_radius=15")],
        [part("a", "polygon points=[[0,0],[100,0],[100,9.5],[50,10],[100,10.5],[100,20],[0,20]]")],
        [part("a", "polygon points=[[0,0],[100,0],[100,9.98],[50,10],[100,10.02],[100,20],[0,20]]")],
        [part("a", "rectangle width=100 height=10"), part("b", "circle diameter=30", "at = [0, 20]"),
         part("c", "polygon points=[[-10,5],[10,5],[10,20],[-10,20]]", 'embedded_in = "b"')],
    ],
    ids=["fillets", "wedge of 1.1 deg", "wedge of 0.05 deg", "tangent circle"],
)  # fmt: skip
def test_wedges_and_fillets_are_no_gaps(tables):
    assert gaps(*tables) == []


def test_the_closing_fills_gaps_but_not_the_cusp_of_tangent_circles():
    scale = Scale(size=40, chord=0, same=1e-6)
    circles = shapely.union(shapely.Point(-10, 0).buffer(10, 256), shapely.Point(10, 0).buffer(10, 256))
    assert narrow_gaps(circles, 0.1, scale) == []
    plates = shapely.union(shapely.box(0, 0, 20, 5), shapely.box(0, 5.05, 20, 9))
    (gap,) = narrow_gaps(plates, 0.1, scale)
    assert gap_width(gap) == pytest.approx(0.05, rel=1e-9)
    assert narrow_gaps(plates, 0.04, scale) == []


@pytest.mark.parametrize("width", [0.09, 0.03, 2e-3, 1e-4, 2e-5])
def test_gaps_of_every_width_are_found_once(width):
    plates = shapely.union_all([shapely.box(0, 0, 20, 5), shapely.box(0, 5 + width, 20, 9), shapely.box(0, 0, 1, 9)])
    (gap,) = narrow_gaps(plates, 0.1, Scale(size=20, chord=0, same=1e-6))
    assert gap_width(gap) == pytest.approx(width, rel=1e-6)
