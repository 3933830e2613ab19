"""What the reader says of joints that cannot be made as they stand, each rule with its own words."""

import pytest

from tests.model.two_boards import MATERIAL, fault_lines, faults_of, part, section_of

FLANGE = part("flange", "rectangle width=200 height=20", "at=[0, 110]")
WEB = part("web", "rectangle width=10 height=200", "at=[0, 0]")
FAYING = "the faces between (-5, 100) and (5, 100)"
ROW = "A row's position is its y, or its z where the faces meet along a line steeper than 45 degrees."


def joint(kind: str, *more: str, between: str = '["flange", "web"]', name: str = "j") -> str:
    lines = [f'name = "{name}"', f"between = {between}", f'kind = "{kind}"', *more]
    return "[[joints]]\n" + "\n".join(lines) + "\n"


def weld(*more: str, **named: str) -> str:
    return joint("fillet weld", *more, **named)


def rows(*more: str, **named: str) -> str:
    return joint("fasteners", *more, **named)


@pytest.mark.parametrize(
    ("text", "line"),
    [
        (
            weld(),
            "needs throat or leg. The throat of a fillet between faces at 90 degrees is 0.707 times its leg.",
        ),
        (
            weld("throat = 5", "leg = 7"),
            "must give throat or leg, not both. The throat of a fillet between faces at 90 degrees is 0.707 times its leg.",
        ),
        (weld("throat = -5"), ": throat must be > 0 (got -5 mm). Give the throat of the weld, or its leg."),
        (
            weld("throat = 5", "sides = 3"),
            ': sides must be 1, 2 or one of "left", "right", "top", "bottom" (got 3). Write sides = 1, 2, or the welded end: '
            '"left", "right", "top" or "bottom".',
        ),
        (
            weld("throat = 5", "sides = true"),
            ': sides must be 1, 2 or one of "left", "right", "top", "bottom" (got true). Write sides = 1, 2, or the welded '
            'end: "left", "right", "top" or "bottom".',
        ),
        (
            weld("throat = 5", 'sides = "rigth"'),
            ': sides must be 1, 2 or one of "left", "right", "top", "bottom" (got "rigth"). Did you mean "right"?',
        ),
        (
            weld("throat = 5", 'sides = "top"'),
            f': sides must be "left" or "right" for {FAYING} (got "top"). Or split the joint in two.',
        ),
        (
            weld("throat = 5", "sides = 1"),
            f': sides is 1, but {FAYING} can be welded at both ends. Write sides = "left" or "right", or 2.',
        ),
        (
            weld("throat = 5", "penetration = 5"),
            ": penetration must leave an unfused root: the faces touch along 10 mm, fused from the two ends together "
            '(got 5 mm). A joint fused over its full width is kind = "glue".',
        ),
        (
            weld("throat = 5", "penetration = 12", 'sides = "left"'),
            ": penetration must leave an unfused root: the faces touch along 10 mm, fused from the end (got 12 mm). "
            'A joint fused over its full width is kind = "glue".',
        ),
        (
            weld("throat = 5", "penetration = -1"),
            ": penetration must be >= 0 (got -1 mm). Give how far the weld reaches in between the parts, or leave it out.",
        ),
        (
            weld("throat = 90", 'sides = "left"'),
            'has a leg of 127.3 mm, longer than the straight face of "flange" at (-5, 100), which is 95 mm. Make the weld '
            "smaller, or weld the other side.",
        ),
        (
            weld("throat = 5", "strength = 0"),
            ": strength must be > 0 (got 0 MPa). Give the design shear stress on the throat, or leave it out.",
        ),
        (
            weld("throat = 5", 'material = "stel"'),
            ': material is not in [materials] (got "stel"). Did you mean "steel"?',
        ),
        (
            weld("throat = 5", "rows = [1]"),
            ': rows is not a key of a fillet weld. Known: "name", "between", "kind", "throat", "leg", "sides", '
            '"penetration", "strength", "material".',
        ),
        (
            weld("throat = 5", between='["flange", "flange"]'),
            ': between names "flange" twice. A joint lies between different parts.',
        ),
        (
            rows("rows = [-20]", "diameter = 4", "capacity = 1"),
            f": rows[0] lies outside the faying line, which runs from y = -5 to 5 mm (got -20 mm). {ROW}",
        ),
        (
            rows("rows = [4]", "diameter = 4", "capacity = 1"),
            ": rows[0] has a strip, 4 mm wide, that leaves the faying line, which runs from y = -5 to 5 mm (got 4 mm). Move "
            "the row inward by half the diameter or more.",
        ),
        (
            rows("rows = [-1, 2]", "diameter = 4", "capacity = 1"),
            ": rows must lie more than one diameter apart, but -1 and 2 are 3 mm apart. Count both rows as one, or give "
            "their places.",
        ),
        (
            rows("rows = [0, 2]", "diameter = 2", "capacity = 1"),
            ": rows must lie more than one diameter apart, but 0 and 2 are 2 mm apart. Count both rows as one, or give "
            "their places.",
        ),
        (
            rows("rows = []", "diameter = 4", "capacity = 1"),
            ": rows must be a list of one or more positions [y1, y2, ...] (got []). Give the position of each row, y, or z "
            "where the faces meet along a line steeper than 45 degrees.",
        ),
        (
            rows('rows = ["a"]', "diameter = 4", "capacity = 1"),
            ': rows[0] must be a number (got "a"). Give the position of each row, y, or z where the faces meet along a line '
            "steeper than 45 degrees.",
        ),
        (
            rows("rows = [0]", "diameter = 4", "capacity = 1", "spacing = -3"),
            ": spacing must be > 0 (got -3 mm). Give the spacing along the beam, or leave it out to be told.",
        ),
        (
            rows("rows = [0]", "diameter = 4", "capacity = 0"),
            ": capacity must be > 0 (got 0 N). Give the design shear force of one fastener.",
        ),
        (
            rows("rows = [0]", "diameter = 0", "capacity = 1"),
            ": diameter must be > 0 (got 0 mm). Give the diameter: the width of the strip that each row holds together.",
        ),
        (
            joint("glue", "throat = 5"),
            ': throat is not a key of a glue joint. Known: "name", "between", "kind", "strength".',
        ),
        (
            joint("contact", "strength = 5"),
            ': strength is not a key of a contact joint. Known: "name", "between", "kind".',
        ),
        (
            joint("rivets"),
            ': kind is not a known kind of joint (got "rivets"). Known: "glue", "contact", "fillet weld", "fasteners".',
        ),
        (
            joint('glue"\nkind2 = "x'),
            ': kind2 is not a key of a glue joint. Did you mean "kind"?',
        ),
    ],
)  # fmt: skip
def test_each_rule_has_its_words(text, line):
    separator = "" if line.startswith(":") else " "
    assert faults_of(FLANGE, WEB, text) == [f'a.toml: joints[0] "j"{separator}{line}']


def test_a_bead_needs_room():
    lug = part("lug", "rectangle width=3 height=3", "at=[6.5, 98.5]")
    assert faults_of(FLANGE, WEB, lug, weld("throat = 5")) == [
        'a.toml: joints[0] "j" has a bead that would overlap "lug" at (6.5, 98.5). Make the weld smaller, or weld another side.'
    ]


def test_beads_of_two_welds_do_not_overlap():
    plate = part("plate", "rectangle width=60 height=8", "at=[35, 84]")
    both = weld("throat = 6") + weld("throat = 6", between='["plate", "web"]', name="k")
    lines = faults_of(FLANGE, WEB, plate, both)
    assert len(lines) == 1
    assert lines[0].startswith('a.toml: joints[1] "k" has a bead that would overlap "j bead 2" at (')


def test_sides_that_do_not_touch_are_told_with_distance_and_place():
    far = part("far", "rectangle width=20 height=20", "at=[0, -110]")
    assert faults_of(FLANGE, WEB, far, weld("throat = 5", between='["flange", "far"]')) == [
        'a.toml: joints[0] "j": between names sides that do not touch: their nearest faces are 200 mm apart at (10, 100). '
        "Name parts that share a face."
    ]


def test_a_pair_belongs_to_one_joint():
    two = weld("throat = 5") + rows("rows = [0]", "diameter = 2", "capacity = 1", name="k")
    assert faults_of(FLANGE, WEB, two) == [
        'a.toml: joints[1] "k": between claims "flange" and "web", which joints[0] "j" joins already. One joint holds a pair '
        "of parts: merge the two."
    ]


def test_a_flush_end_cannot_be_welded():
    edge = part("web", "rectangle width=10 height=200", "at=[95, 0]")
    assert faults_of(FLANGE, edge, weld("throat = 5")) == [
        'a.toml: joints[0] "j": sides is 2, but the faces between (90, 100) and (100, 100) leave room for 1: the angles are '
        "90 deg at the left and 180 deg at the right. A fillet needs an angle of 30 to 150 deg between the free faces."
    ]
    assert len(section_of(FLANGE, edge, weld("throat = 5", "sides = 1")).joints[0].bonds) == 1
    assert faults_of(FLANGE, edge, weld("throat = 5", 'sides = "right"')) == [
        'a.toml: joints[0] "j": sides cannot be "right" for the faces between (90, 100) and (100, 100): the angle there is '
        "180 deg. A fillet needs an angle of 30 to 150 deg between the free faces."
    ]


def test_a_curved_face_cannot_be_welded():
    half = part("half", "sector radius=20 from_deg=180 to_deg=360", "at=[0, 100]")
    lines = faults_of(FLANGE, half, weld("throat = 3", 'sides = "left"', between='["flange", "half"]'))
    assert lines == [
        'a.toml: joints[0] "j" meets a curved face of "half" at (-20, 100): the legs of a fillet weld lie on straight faces. '
        "Draw the weld as a part, and leave the joint between the two sides as contact."
    ]


def test_a_tangent_end_cannot_be_welded():
    bent = part("bent", "strip thickness=6 bend_radius=20", "points = [[-60, 97], [-100, 97], [-100, 0]]")
    section = section_of(FLANGE, bent, weld("throat = 3", "sides = 1", between='["flange", "bent"]'))
    assert [bond.throat[0] for bond in section.joints[0].bonds] == [(-60.0, 100.0)]
    (line,) = faults_of(FLANGE, bent, weld("throat = 3", between='["flange", "bent"]'))
    assert "leave room for 1: the angles are 0 deg at the left and 90 deg at the right" in line


def test_a_bar_in_its_hole_has_no_end_to_weld():
    plate = part("plate", "rectangle width=60 height=60") + '[[parts.holes]]\nshape = "circle"\ndiameter = 20\n'
    bar = part("bar", "circle diameter=20")
    lines = faults_of(plate, bar, weld("throat = 3", between='["plate", "bar"]'))
    assert len(lines) == 1
    assert "has faces that touch all round from (" in lines[0]
    assert lines[0].endswith('there is no end to weld. A joint fused over its full width is kind = "glue".')


def test_rows_need_a_straight_faying_line():
    plate = part("plate", "rectangle width=60 height=60") + '[[parts.holes]]\nshape = "circle"\ndiameter = 20\n'
    bar = part("bar", "circle diameter=20")
    more = rows("rows = [0]", "diameter = 2", "capacity = 1", between='["plate", "bar"]')
    assert faults_of(plate, bar, more) == [
        'a.toml: joints[0] "j": rows[0] lies on no straight faying line: the faces touch along curves only (got 0).'
    ]


def test_an_embedded_part_is_not_welded_to_its_host():
    host, inner = part("host", "rectangle width=60 height=60"), part("inner", "rectangle width=20 height=20")
    text = host + inner + 'embedded_in = "host"\n' + weld("throat = 3", between='["host", "inner"]')
    assert faults_of(text) == [
        'a.toml: joints[0] "j" cannot join "inner" to "host", in which it is embedded. Cut a hole into "host" instead of '
        "embedded_in."
    ]


def test_a_mesh_file_has_no_outline_to_weld(tmp_path):
    (tmp_path / "m.msh").write_text("mesh")
    regions = "".join(part(name, "file", 'path = "m.msh"', f'region = "{name}"') for name in ("flange", "web"))
    lines = fault_lines(MATERIAL + regions + weld("throat = 5"), tmp_path)
    assert lines == [
        'a.toml: joints[0] "j" needs drawn parts, but "flange" comes from a mesh file. Draw the parts here, or put the beads '
        'into the file and use kind = "contact".'
    ]
    section = section_of(regions, joint("contact"), folder=tmp_path)
    assert section.joints[0].kind == "contact"


def test_a_weld_uses_its_material():
    more = "[materials.filler]\nE = 200000\nnu = 0.3\n"
    section = section_of(more, FLANGE, WEB, weld("throat = 5", 'material = "filler"'))
    assert [part.material for part in section.parts if part.bead_of] == ["filler", "filler"]
    assert not [message for code, message in section.cautions if code == "unused material"]
