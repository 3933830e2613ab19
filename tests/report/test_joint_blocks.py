"""Joints in the summary and in joints.csv: whole joints, beads and rows, units beside their numbers."""

import csv
import io

import pytest

from tests.recovery.joint_sections import joint_of, result_of, rows, shear, tee, tube, tube_glue
from tests.recovery.joint_sections import part as drawn
from xsec_fem.report.blocks import Lines, Table
from xsec_fem.report.joint_blocks import joint_blocks, required_text, utilisation_text
from xsec_fem.report.joint_table import joints_csv


@pytest.fixture(scope="module")
def welded():
    return result_of(*tee(4.0, 0.0, "strength = 1"), shear())


@pytest.fixture(scope="module")
def bolted():
    return result_of(
        drawn("base", "rectangle width=60 height=40"), drawn("cap", "rectangle width=60 height=10", "at=[0, 25]"),
        rows("diameter = 8", "capacity = 2000", "rows = [-20, 20]", "spacing = 50", between='["cap", "base"]'), shear(),
    )  # fmt: skip


def tables(result):
    return [block for block in joint_blocks(result, result.cases[0]) if isinstance(block, Table)]


def as_rows(result):
    return list(csv.DictReader(io.StringIO(joints_csv(result))))


def test_beads_have_a_table_of_their_own(welded):
    whole, beads = tables(welded)
    assert [row[0] for row in whole.rows] == ["weld"]
    assert whole.rows[0][-2].endswith(" OVER")
    assert whole.rows[0][-1].startswith("throat ")
    assert [row[1] for row in beads.rows] == ["bead 1", "bead 2"]
    assert [row[5] for row in beads.rows] == ["0.500", "0.500"]


def test_rows_show_the_force_of_one(bolted):
    whole, found = tables(bolted)
    assert whole.rows[0][7].endswith(" N")
    assert whole.rows[0][-1].startswith("spacing ")
    force = joint_of(bolted, "j").bonds[0].force
    assert float(found.rows[0][8]) == pytest.approx(force, rel=1e-4)  # five digits are shown


def test_shared_flow_is_marked_and_said():
    result = result_of(*tube(4, 4, 8), tube_glue("left", "right"), shear())
    blocks = joint_blocks(result, result.cases[0])
    (table,) = (block for block in blocks if isinstance(block, Table))
    assert all(row[3].endswith(" (shared)") for row in table.rows)
    (lines,) = (block for block in blocks if isinstance(block, Lines))
    assert lines.lines[0] == (
        "left web: The joint does not separate the section: V S/I gives only the sum over 'left web' and 'right web'."
    )
    assert as_rows(result)[1]["shared_with"] == "right web"


def test_csv_has_a_row_for_the_joint_and_one_for_each_bead(welded):
    units, whole, *beads = as_rows(welded)
    joint = joint_of(welded, "weld")
    assert (units["flow"], units["mean"], units["demand"]) == ("N/mm", "MPa", "demand_unit")
    assert (whole["bond"], whole["demand_unit"], whole["required_is"]) == ("", "MPa", "throat")
    assert float(whole["required"]) == joint.required["throat"]
    assert [bead["bond"] for bead in beads] == ["bead 1", "bead 2"]
    assert sum(float(bead["flow"]) for bead in beads) == pytest.approx(float(whole["flow"]), rel=1e-14)
    assert max(float(bead["utilisation"]) for bead in beads) == pytest.approx(joint.utilisation, rel=1e-14)


def test_csv_of_fasteners_is_in_forces(bolted):
    _, whole, *found = as_rows(bolted)
    assert (whole["demand_unit"], whole["required_is"], whole["required_unit"]) == ("N", "spacing", "mm")
    assert [row["demand_unit"] for row in found] == ["N", "N"]
    assert max(float(row["demand"]) for row in found) == float(whole["demand"])


def test_words_of_a_missing_number(welded):
    assert utilisation_text(None) == "-"
    assert utilisation_text(0.5) == "0.500"
    assert utilisation_text(1.25) == "1.250 OVER"
    assert required_text(joint_of(welded, "weld"), welded.section.units).endswith(" mm")
