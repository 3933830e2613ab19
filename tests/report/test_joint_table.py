"""joints.csv."""

from __future__ import annotations

import csv
import io

import pytest

from xsec_fem.report.joint_table import COLUMNS, joints_csv


def test_header_units_and_one_row_a_joint(solved):
    rows = list(csv.reader(io.StringIO(joints_csv(solved("boards")))))
    assert rows[0] == list(COLUMNS)
    units = dict(zip(COLUMNS, rows[1], strict=True))
    assert (units["flow"], units["mean"], units["peak_y"]) == ("N/mm", "MPa", "mm")
    assert len(rows) == 3
    row = dict(zip(COLUMNS, rows[2], strict=True))
    assert (row["case"], row["joint"], row["kind"], row["separates"]) == ("support", "glue", "glue", "True")
    # 4000 (100 40 20)/(100 80³/12) = 75 N/mm, exact in the discrete equations
    assert float(row["flow"]) == pytest.approx(75.0, rel=1e-9)


def test_no_joint_no_row(solved):
    assert joints_csv(solved("tee")).count("\n") == 2
