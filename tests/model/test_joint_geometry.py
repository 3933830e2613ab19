"""Beads, strips and the nodes they need, from the outlines of the parts."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.model.test_joint_faults import FLANGE, WEB, rows, weld
from tests.model.two_boards import part, section_of
from xsec_fem.model.faying import faying_lines, free_end
from xsec_fem.model.joint_geometry import with_joint_geometry
from xsec_fem.model.outline import Isometry


def beads(section):
    return [part for part in section.parts if part.bead_of]


def test_a_tee_gets_a_bead_on_either_side():
    section = section_of(FLANGE, WEB, weld("throat = 5"))
    (joint,) = section.joints
    assert [bead.name for bead in beads(section)] == ["j bead 1", "j bead 2"]
    assert [bond.name for bond in joint.bonds] == ["bead 1", "bead 2"]
    # legs of a right-angled fillet: throat * sqrt(2); area half the square of the leg
    assert [bond.leg for bond in joint.bonds] == pytest.approx(2 * [5 * math.sqrt(2)])
    assert [bead.face.area for bead in beads(section)] == pytest.approx([25.0, 25.0], rel=1e-12)
    assert [math.dist(*bond.throat) for bond in joint.bonds] == pytest.approx([5.0, 5.0], rel=1e-12)
    assert [bond.throat[0] for bond in joint.bonds] == [(-5.0, 100.0), (5.0, 100.0)]
    assert set(joint.vertices) == {(-5.0, 100.0), (5.0, 100.0)}
    assert {bead.material for bead in beads(section)} == {"steel"}


def test_throat_and_leg_say_the_same():
    by_leg = section_of(FLANGE, WEB, weld(f"leg = {5 * math.sqrt(2)!r}"))
    by_throat = section_of(FLANGE, WEB, weld("throat = 5"))
    for one, other in zip(by_leg.joints[0].bonds, by_throat.joints[0].bonds, strict=True):
        assert one.throat[0] == other.throat[0]
        assert one.throat[1] == pytest.approx(other.throat[1], abs=1e-12)


def test_penetration_moves_the_root_and_deepens_the_throat():
    bond = section_of(FLANGE, WEB, weld("throat = 5", "penetration = 2", 'sides = "left"')).joints[0].bonds[0]
    assert bond.strip == ((-5.0, 100.0), (-3.0, 100.0))
    assert bond.throat[0] == (-3.0, 100.0)
    assert math.dist(*bond.throat) == pytest.approx(5 + 2 * math.cos(math.pi / 4), rel=1e-12)


@settings(deadline=None, max_examples=30)
@given(st.floats(40, 140), st.floats(-180, 180))
def test_throat_between_inclined_faces_wherever_they_point(angle, turn):
    """throat = leg cos(phi/2), with phi between the fusion faces, in any position."""
    lean = 100 / math.tan(math.radians(angle))
    points = [(-20, 0), (20, 0), (20 + lean, -100), (-20 + lean, -100)]
    move = Isometry.rotation(turn)
    turned = "[" + ", ".join(f"[{y!r}, {z!r}]" for y, z in (move(p) for p in points)) + "]"
    plate = [move(p) for p in [(-200, 0), (200, 0), (200, 30), (-200, 30)]]
    plate_text = "[" + ", ".join(f"[{y!r}, {z!r}]" for y, z in plate) + "]"
    section = section_of(
        part("flange", "polygon", f"points = {plate_text}"),
        part("web", "polygon", f"points = {turned}"),
        weld("throat = 4"),
    )
    bonds = section.joints[0].bonds
    assert sorted(bond.angle_deg for bond in bonds) == pytest.approx(sorted([angle, 180 - angle]), abs=1e-6)
    for bond, bead in zip(bonds, beads(section), strict=True):
        assert math.dist(*bond.throat) == pytest.approx(4, rel=1e-9)
        assert bead.face.area == pytest.approx(bond.leg**2 * math.sin(math.radians(bond.angle_deg)) / 2, rel=1e-9)
        assert bead.face.outer.ccw


def test_bead_names_do_not_clash():
    taken = part("j bead 1", "rectangle width=200 height=5", "at=[0, 122.5]")
    section = section_of(FLANGE, WEB, taken, weld("throat = 5"))
    assert [bead.name for bead in beads(section)] == ["j bead 1 (2)", "j bead 2"]


def test_every_stretch_is_welded():
    feet = [part(f"foot {k}", "rectangle width=10 height=40", f"at=[{y}, 80]") for k, y in ((1, -50), (2, 50))]
    section = section_of(
        FLANGE, *feet, part("sill", "rectangle width=120 height=10", "at=[0, 55]"),
        weld("throat = 4", between='["flange", ["foot 1", "foot 2"]]'),
    )  # fmt: skip
    assert [bond.throat[0][0] for bond in section.joints[0].bonds] == [-55.0, -45.0, 45.0, 55.0]


def test_rows_are_strips_as_wide_as_the_diameter():
    wide = part("cap", "rectangle width=120 height=10", "at=[0, 125]")
    text = rows("rows = [-40, 40]", "diameter = 12", "capacity = 1", between='["cap", "flange"]')
    (joint,) = section_of(FLANGE, WEB, wide, text).joints
    assert [bond.name for bond in joint.bonds] == ["row y = -40", "row y = 40"]
    assert {tuple(sorted(bond.strip)) for bond in joint.bonds} == {
        ((-46.0, 120.0), (-34.0, 120.0)), ((34.0, 120.0), (46.0, 120.0)),
    }  # fmt: skip
    assert len(joint.vertices) == 6


def test_steep_faces_take_rows_by_z():
    side = part("side", "rectangle width=8 height=100", "at=[9, 0]")
    text = rows("rows = [30, -30]", "diameter = 10", "capacity = 1", between='["side", "web"]')
    (joint,) = section_of(FLANGE, WEB, side, text).joints
    assert [bond.name for bond in joint.bonds] == ["row z = 30", "row z = -30"]
    assert tuple(sorted(joint.bonds[0].strip)) == ((5.0, 25.0), (5.0, 35.0))


def test_a_row_on_two_faces_is_named_by_its_places():
    plates = [part(f"plate {k}", "rectangle width=200 height=10", f"at=[0, {z}]") for k, z in ((1, 125), (2, 95))]
    text = rows("rows = [50]", "diameter = 10", "capacity = 1", between='["flange", ["plate 1", "plate 2"]]')
    (joint,) = section_of(FLANGE, *plates, text).joints
    assert sorted(bond.name for bond in joint.bonds) == ["row y = 50 at (50, 100)", "row y = 50 at (50, 120)"]


def test_geometry_is_made_once():
    section = section_of(FLANGE, WEB, weld("throat = 5"))
    assert with_joint_geometry(section) == section


def test_arcs_of_a_saddle_are_a_faying_line():
    saddle = part("saddle", "rectangle width=60 height=30", "at=[0, 0]", 'anchor = "top"')
    hole = '[[parts.holes]]\nshape = "circle"\ndiameter = 10\nat = [0, -15]\n'
    bar = part("bar", "circle diameter=10", "at=[0, -15]")
    section = section_of(saddle + hole, bar)
    faces = {part.name: part.face for part in section.parts}
    (line,) = faying_lines(faces, ("saddle",), ("bar",), 1e-6)
    assert line.length == pytest.approx(10 * math.pi, rel=1e-12)
    assert line.straight_runs(1e-6) == []


def test_free_faces_of_an_end():
    section = section_of(FLANGE, WEB)
    faces = {part.name: part.face for part in section.parts}
    (line,) = faying_lines(faces, ("flange",), ("web",), 1e-6)
    for at_start in (True, False):
        end = free_end(line, faces, at_start, 1e-6)
        assert math.degrees(end.phi) == pytest.approx(90)
        assert end.second == pytest.approx((0.0, -1.0))
        assert end.first == pytest.approx((math.copysign(1, end.at[0]), 0.0))
        assert end.inward == pytest.approx((-math.copysign(1, end.at[0]), 0.0))
        assert (end.first_length, end.second_length) == pytest.approx((95.0, 200.0))
