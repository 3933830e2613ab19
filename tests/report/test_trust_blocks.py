"""Guaranteed accuracy and the evidence of a series of meshes, in words and as a table."""

from __future__ import annotations

from dataclasses import replace

import pytest

from xsec_fem.pipeline.convergence import convergence
from xsec_fem.report.blocks import plain_text
from xsec_fem.report.intervals import certified
from xsec_fem.report.property_table import properties_table
from xsec_fem.report.summary import summary
from xsec_fem.report.trust_blocks import accuracy_blocks, at_most, convergence_blocks, percent
from xsec_fem.results import Caution


def test_errors_strictness_and_meshes_are_told(solved):
    result = solved("sharp")
    text = plain_text(accuracy_blocks(result))
    errors = ", ".join(f"{name} {at_most(result.certificate.energy_error[name])}" for name in ("Vy", "Vz", "T"))
    assert text == (
        "Guaranteed accuracy\n"
        f"  energy error of the stress field at most: {errors}\n"
        "  the intervals beside the constants are strict: nothing but round-off is left out\n"
        f"  solved on {len(result.mesh_steps)} meshes of {', '.join(str(step.nodes) for step in result.mesh_steps)} nodes: "
        f"largest of the three {', '.join(at_most(step.energy_error) for step in result.mesh_steps)} (asked for: 1 %)\n"
    )
    assert len(result.mesh_steps) > 1


def test_the_reason_is_there_when_intervals_are_not_strict(solved):
    text = plain_text(accuracy_blocks(solved("tube")))
    assert "not strict: " in text
    assert "curved sides" in text
    assert "solved on 1 mesh of" in text


def test_without_a_certificate_it_says_so(solved):
    result = replace(solved("boards"), certificate=None)
    assert "none: bounds were not asked for, and the mesh was not refined" in plain_text(accuracy_blocks(result))
    failed = replace(result, warnings=(Caution("no certificate", "No guaranteed bounds."),))
    assert "none: see the warnings" in plain_text(accuracy_blocks(failed))
    assert "guaranteed interval" not in plain_text(summary(result))


@pytest.mark.parametrize("symbol", ["IT", "Asy", "Asz", "ysc", "zsc", "ysc_trefftz", "zsc_trefftz"])
def test_constants_have_their_interval_beside_them(solved, symbol):
    result, size = solved("sharp"), 10.0
    value, interval = certified(
        getattr(result.properties, symbol), getattr(result.certificate, symbol), size if "sc" in symbol else 0.0
    )
    rows = {
        row[0]: row for row in properties_table(result.properties, result.section.units, size, result.certificate).rows
    }
    assert rows[symbol][1] == value
    assert rows[symbol][3] == interval
    assert rows["A"][3] == ""


def test_the_stiffness_has_the_interval_of_the_constant(solved):
    result = solved("sharp")
    rows = {
        row[0]: row for row in properties_table(result.properties, result.section.units, 10.0, result.certificate).rows
    }
    G = 210000 / 2.6
    low, high = (float(end) for end in rows["GIT"][3].strip("[]").split(", "))
    assert low <= G * result.certificate.IT[0] * (1 + 1e-12)  # G in floating point
    assert high >= G * result.certificate.IT[1] * (1 - 1e-12)


def test_the_convergence_table(solved):
    result = solved("sharp")
    assert convergence_blocks(result) == []
    rows = convergence(result)
    text = plain_text(summary(replace(result, convergence=rows)))
    table = text.split("\nConvergence\n")[1].splitlines()
    assert table[0].split()[:3] == ["degree", "nodes", "triangles"]
    assert "IT [mm⁴]" in table[0]
    assert len(rows) == 5
    for row, line in zip(rows, table[1:6], strict=True):
        cells = line.split("  ")
        assert [cell.strip() for cell in cells if cell.strip()][:4] == [
            str(row.degree), str(row.nodes), str(row.elements), at_most(row.energy_error),
        ]  # fmt: skip
        assert certified(row.IT, row.IT_interval)[1] in line
    assert table[1].split()[5] == "-"
    assert table[6].strip().startswith("Order: -2 d log(error)/d log(nodes)")


@pytest.mark.parametrize(
    ("share", "text"),
    [
        (0.01004, "1.01 %"),
        (0.01, "1 %"),
        (0.0048301, "0.484 %"),
        (0.2, "20 %"),
        (3.1e-7, "3.1e-5 %"),
        (0.0, "0 %"),
        (0.9999, "100 %"),
    ],
)
def test_bounds_are_rounded_up(share, text):
    assert at_most(share) == text
    assert percent(0.01004) == "1 %"
