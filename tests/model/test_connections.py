"""What holds two parts together, by name."""

import pytest

from tests.model.test_joint_faults import FLANGE, WEB, joint, weld
from tests.model.two_boards import part, section_of
from xsec_fem.model.connections import Connections


@pytest.mark.parametrize(
    ("pair", "name"),
    [
        (("flange", "web"), "weld"),
        (("web", "flange"), "weld"),
        (("flange", "weld bead 1"), "weld"),
        (("web", "weld bead 2"), "weld"),
        (("cap", "flange"), "glue"),
        (("web", "foot"), None),
        (("foot", "weld bead 1"), None),
        (("cap", "web"), None),
    ],
)
def test_joint_between(pair, name):
    section = section_of(
        FLANGE, WEB, part("cap", "rectangle width=100 height=10", "at=[0, 125]"),
        part("foot", "rectangle width=100 height=10", "at=[0, -105]"), weld("throat = 4", name="weld"),
        joint("glue", between='["cap", "flange"]', name="glue"),
    )  # fmt: skip
    assert Connections.of(section).joint_between(pair) == name


def test_beads_of_a_joint():
    connections = Connections.of(section_of(FLANGE, WEB, weld("throat = 4", name="weld")))
    assert connections.beads(connections.joints[0]) == {"weld bead 1", "weld bead 2"}
