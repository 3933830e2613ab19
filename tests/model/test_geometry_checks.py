"""Holes, overlaps, bodies, joints and probes, at every size and with arcs that are cut into chords differently."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.model.two_boards import faults_of, part, section_of

GLUE = '[[joints]]\nname = "g"\nkind = "glue"\nbetween = [{}, {}]\n'


def hole(shape: str, at: str) -> str:
    word, *numbers = shape.split()
    return "[[parts.holes]]\n" + "\n".join([f'shape = "{word}"', *numbers, f"at = {at}"]) + "\n"


BOARD = part("b", "rectangle width=100 height=40", "at = [200, 0]")  # y from 150 to 250, z from -20 to 20
HOLE_REMEDY = " Holes are placed in the section's axes, not in those of the part; a notch belongs into the outline."


@pytest.mark.parametrize(
    ("at", "rule"),
    [
        ("[0, 0]", "lies outside its part"),
        ("[256, 0]", "lies outside its part"),  # touches from outside
        ("[200, 17]", "crosses the edge of its part at (205.196, 20)"),  # sqrt(6² - 3²) = 5.19615
        ("[200, 14]", "touches the edge of its part at (200, 20)"),
        ("[200, 13.9999]", None),
        ("[200, 14.1]", "crosses the edge of its part at (201.091, 20)"),  # sqrt(6² - 5.9²) = 1.0909
    ],
)
def test_a_hole_lies_inside_its_part(at, rule):
    tables = BOARD, hole("circle diameter=12", at)
    if rule is None:
        assert len(section_of(*tables).parts[0].face.holes) == 1
    else:
        assert faults_of(*tables) == [f'a.toml: parts[0] "b": holes[0] {rule}.{HOLE_REMEDY}']


@pytest.mark.parametrize(
    ("at", "rule"),
    [
        ("[208, 0]", "holes[1] overlaps holes[0] by 24.8 mm² at (204, 0)"),  # lens of two circles r 6, 8 apart
        ("[212, 0]", "holes[1] touches holes[0] at (206, 0)"),
        ("[212.0001, 0]", None),
    ],
)
def test_holes_are_apart(at, rule):
    """Lens 2 r² acos(d/2r) - d/2 sqrt(4r² - d²) = 24.780 (plane geometry, derived here)."""
    assert 2 * 36 * math.acos(8 / 12) - 4 * math.sqrt(144 - 64) == pytest.approx(24.78, abs=0.01)
    tables = BOARD, hole("circle diameter=12", "[200, 0]"), hole("circle diameter=12", at)
    if rule is None:
        assert len(section_of(*tables).parts[0].face.holes) == 2
    else:
        assert faults_of(*tables) == [f'a.toml: parts[0] "b": {rule}. Merge the two into one outline.']


def test_a_hole_keeps_clear_of_the_hollow_of_its_part():
    tube = part("t", "ring diameter=100 thickness=10")
    assert faults_of(tube, hole("circle diameter=6", "[42, 0]")) == [
        'a.toml: parts[0] "t": holes[0] overlaps the hollow of its part by 3.01 mm² at (39.5821, 0). '
        "Merge the two into one outline."
    ]
    d, a, b = 42, 40, 3  # lens of two circles (plane geometry)
    y = (d * d + a * a - b * b) / (2 * d)
    half = math.sqrt(a * a - y * y)
    lens = a * a * math.acos(y / a) + b * b * math.acos((d - y) / b) - d * half
    assert lens == pytest.approx(3.01, abs=0.005)
    assert len(section_of(tube, hole("circle diameter=6", "[45, 0]")).parts[0].face.holes) == 2


@pytest.mark.parametrize("size", [1e-3, 1, 1e4])
@pytest.mark.parametrize("far", [0, 100])  # the same drawing far from the origin, in sizes
def test_overlaps_are_found_at_every_size(size, far):
    def box(name, y, z, w, h):
        return part(
            name, f"rectangle width={w * size!r} height={h * size!r}", f"at=[{(y + far) * size!r}, {z * size!r}]"
        )

    touching = box("a", 0, 0, 1, 1), box("b", 1, 0, 1, 1)
    assert len(section_of(*touching).parts) == 2
    lines = faults_of(box("a", 0, 0, 1, 1), box("b", 1 - 1e-5, 0, 1, 1))
    area = f"{1e-5 * size**2:.3g}"
    assert lines[0].startswith(f'a.toml: parts "a" and "b" overlap by {area} mm² at (')
    assert len(lines) == 1
    apart = faults_of(box("a", 0, 0, 1, 1), box("b", 1 + 1e-5, 0, 1, 1))
    assert apart[0].startswith('a.toml: parts[1] "b" touches nothing: two bodies that would bend apart.')
    assert f'"a", is {1e-5 * size:.3g} mm away' in apart[0]


@pytest.mark.parametrize("size", [1e-3, 1, 1e4])
@given(turn=st.floats(0, 360), ratio=st.floats(0.1, 0.9))
@settings(max_examples=8, deadline=None)
def test_touching_arcs_cut_into_other_chords_neither_overlap_nor_gape(size, turn, ratio):
    """A round bar in a tube, the bar turned: its chords begin elsewhere, but the two share their whole circle."""
    inner = ratio * size
    tube = part("tube", f"ring diameter={size!r} thickness={(size - inner) / 2!r}")
    bar = part("bar", f"circle diameter={2 * (size / 2 - (size - inner) / 2)!r}", f"rotate = {turn!r}")
    section = section_of(tube, bar, GLUE.format('"tube"', '"bar"'))
    assert [code for code, _ in section.cautions if code != "size"] == []


def test_a_bar_too_thick_for_its_tube_overlaps_it():
    bar = part("bar", "circle diameter=80.01", "rotate = 17")
    lines = faults_of(part("tube", "ring diameter=100 thickness=10"), bar)
    assert len(lines) == 1
    # a ring of mean radius 40.0025 and width 0.005: area 2 pi r w = 1.2567 (plane geometry)
    assert lines[0].startswith('a.toml: parts "tube" and "bar" overlap by 1.26 mm² at (')


def test_thin_layers_under_wide_faces_hold_together():
    """Aluminium faces 1.5, epoxy 0.2 and foam 60, all 100 wide, on exact decimals of the stack."""
    layers, z = [], 0.0
    for name, t in [("f1", 1.5), ("e1", 0.2), ("foam", 60), ("e2", 0.2), ("f2", 1.5)]:
        layers.append(part(name, f"rectangle width=100 height={t}", f"at=[0, {z}]", 'anchor = "bottom"'))
        z = round(z + t, 10)
    joints = GLUE.format('["f1", "e1"]', '"foam"')
    section = section_of(*layers, joints)
    assert len(section.parts) == 5
    assert [message for code, message in section.cautions if code == "idle joint side"] == [
        'joints[0] "g": "f1" touches nothing of the joint\'s other side, so it carries none of its flow.'
    ]


def square(name: str, y: float, z: float, *more: str) -> str:
    return part(name, "rectangle width=10 height=10", f"at = [{y}, {z}]", *more)


def test_one_loose_part_is_named_with_its_nearest_neighbour():
    lines = faults_of(square("web", 0, 0), square("flange", 0, 10), square("plate top", 0, 20.5))
    assert lines == [
        'a.toml: parts[2] "plate top" touches nothing: two bodies that would bend apart. '
        'The nearest part, "flange", is 0.5 mm away at (5, 15.5).'
    ]


def test_several_loose_parts_are_each_named():
    lines = faults_of(square("a", 0, 0), square("b", 0, 10), square("c", 30, 0), square("d", 60, 0))
    assert [line.partition(".  ")[0].partition(":")[2].partition(". ")[0] for line in lines] == [
        ' parts[2] "c" touches nothing: three bodies that would bend apart',
        ' parts[3] "d" touches nothing: three bodies that would bend apart',
    ]


def test_bodies_of_several_parts_are_listed():
    lines = faults_of(square("a", 0, 0), square("b", 0, 10), square("c", 30, 0), square("d", 30, 10))
    assert lines == [
        'a.toml: parts form two bodies that would bend apart: "a", "b" | "c", "d". '
        "Close the gaps between them; parts in contact are bonded."
    ]


@pytest.mark.parametrize(
    ("second", "at"),
    [
        (square("b", 10, 10), "(5, 5)"),
        (part("b", "circle diameter=10", "at = [0, 10]"), "(0, 5)"),
        (part("b", "circle diameter=400", "at = [0, 205]"), "(0, 5)"),
        (part("b", "polygon points=[[5,5],[15,7],[15,20]]"), "(5, 5)"),
    ],
    ids=["corner", "tangent", "nearly flat", "tip"],
)
def test_a_single_common_point_is_no_bond(second, at):
    lines = faults_of(square("a", 0, 0), second)
    assert len(lines) == 1
    assert f"in a single point only, at {at}: two bodies that would bend apart. Let them share an edge." in lines[0]


def test_a_bar_in_a_wider_tube_touches_in_a_point_only():
    lines = faults_of(
        part("tube", "ring diameter=100 thickness=9.9"), part("bar", "circle diameter=80", "at = [0.1, 0]")
    )
    assert 'parts[1] "bar"' in lines[0] or 'parts[0] "tube"' in lines[0]
    assert "in a single point only, at (40.1, 0)" in lines[0]


@pytest.mark.parametrize("shared", [0.01, 0.1, 5])
def test_a_short_common_edge_is_a_bond(shared):
    assert len(section_of(square("a", 0, 0), square("b", 10, 10 - shared)).parts) == 2


def test_a_point_contact_beside_a_bond_is_a_caution():
    section = section_of(square("a", 0, 0), square("b", 10, 0), square("c", 10, 10))
    codes = dict(section.cautions)
    assert codes["point contact"].startswith('Parts "a" and "c" meet in a single point at (5, 5): nothing is carried')


def test_an_embedded_part_displaces_its_host():
    host = part("host", "rectangle width=40 height=40")
    section = section_of(host, square("core", 0, 0, 'embedded_in = "host"'), GLUE.format('"core"', '"host"'))
    assert section.part("core").embedded_in == "host"
    lines = faults_of(host, square("core", 0, 0))
    assert lines[0].startswith(
        'a.toml: parts "host" and "core" overlap by 100 mm² at (0, 0). Move one of them, or write'
    )


def test_an_embedded_part_may_cut_its_host_in_two_and_hold_it_together():
    web = part("web", "rectangle width=10 height=60", 'embedded_in = "slab"')
    assert len(section_of(part("slab", "rectangle width=100 height=20"), web).parts) == 2


def test_faults_of_embedded_parts():
    host = part("host", "rectangle width=40 height=40")
    assert faults_of(host, square("core", 25, 0, 'embedded_in = "host"')) == [
        'a.toml: parts[1] "core": embedded_in names "host", but the part does not overlap it. '
        "Move it into that part, or leave embedded_in out for parts that only touch."
    ]
    assert 'embedded_in names "host", but the part leaves nothing of it' in "\n".join(
        faults_of(host, part("core", "rectangle width=50 height=50", 'embedded_in = "host"'))
    )
    two = square("c1", 0, 0, 'embedded_in = "host"'), square("c2", 5, 0, 'embedded_in = "host"')
    assert faults_of(host, *two)[0].startswith('a.toml: parts "c1" and "c2" overlap by 50 mm² at (2.5, 0).')
    chain = square("c1", 0, 0, 'embedded_in = "host"'), part("c2", "circle diameter=4", 'embedded_in = "c1"')
    assert 'must name a part that is not embedded itself, but "c1" is embedded in "host"' in faults_of(host, *chain)[0]
    ring = square("c1", 0, 0, 'embedded_in = "c2"'), square("c2", 0, 0, 'embedded_in = "c1"')
    assert sum("must name a part that is not embedded itself" in line for line in faults_of(*ring)) == 2


def test_a_joint_needs_sides_that_touch():
    pair = square("a", 0, 0), square("b", 10, 0), square("c", 20, 0)
    assert faults_of(*pair, GLUE.format('"a"', '"c"')) == [
        'a.toml: joints[0] "g": between names sides that do not touch: their nearest faces are 10 mm apart at (5, -5). '
        "Name parts that share a face."
    ]
    corner = square("a", 0, 0), square("b", 10, 0), square("c", 10, 10)
    assert "they meet in a single point only, at (5, 5)" in faults_of(*corner, GLUE.format('"a"', '"c"'))[0]
    assert section_of(*pair, GLUE.format('"b"', '["a", "c"]')).joints[0].second == ("a", "c")


@pytest.mark.parametrize(
    ("at", "outside"),
    [
        ("[0, 0]", None),
        ("[5, 5]", None),
        ("[5.0001, 0]", "0.0001 mm away at (5, 0)"),
        ("[8, 9]", "5 mm away at (5, 5)"),
    ],
)
def test_a_probe_lies_in_the_section(at, outside):
    tables = square("a", 0, 0), f'[[probes]]\nname = "p"\nat = {at}\n'
    if outside is None:
        assert len(section_of(*tables).probes) == 1
    else:
        value = f"{at} mm"
        assert faults_of(*tables) == [
            f'a.toml: probes[0] "p": at lies outside the section: its nearest point is {outside} (got {value}). '
            "Move the probe."
        ]


def test_a_probe_in_a_hole_lies_outside():
    tables = BOARD, hole("circle diameter=12", "[200, 0]"), "[[probes]]\nat = [201, 0]\n"
    assert "its nearest point is 5 mm away at (206, " in faults_of(*tables)[0]


def test_checks_that_need_all_parts_wait_for_them():
    lines = faults_of(square("a", 0, 0), square("b", 30, 0), part("c", "rectangle width=-20 height=10", "at=[15, 0]"))
    assert len(lines) == 1
    assert 'parts[2] "c": width must be > 0' in lines[0]


def test_an_outline_that_is_thin_as_a_round_off_is_a_fault():
    assert (
        "is thinner than" in faults_of(square("a", 0, 0), part("b", "rectangle width=10 height=1e-9", "at=[0, 5]"))[0]
    )


def test_a_shape_too_small_for_its_place_is_a_fault():
    assert faults_of(part("a", "circle diameter=1", "at = [0, 2e6]")) == [
        'a.toml: parts[0] "a" is too far from the origin for its size, at [0, 2000000]. '
        "Put it nearer to the origin, or check its numbers and their units."
    ]


def test_a_hole_larger_than_its_part_is_a_fault():
    assert "is larger than its part" in faults_of(square("a", 0, 0), hole("circle diameter=1e9", "[0, 0]"))[0]
