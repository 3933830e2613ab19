"""Parts as polylines, and the lines they share."""

from __future__ import annotations

import math

import pytest

from tests.report.sections import BOARDS, TEE, TUBE
from xsec_fem.model.reader import parse_section
from xsec_fem.report.part_outlines import bounding_box, part_outlines, shared_lines

HEAD = 'units = "N mm"\n[materials.m]\nE = 1000\nnu = 0.3\n'
BAR_IN_PIPE = (
    HEAD
    + """
[[parts]]
name = "pipe"
material = "m"
shape = "ring"
diameter = 100
thickness = 20
[[parts]]
name = "core"
material = "m"
shape = "circle"
diameter = 60
"""
)
INSERT = (
    HEAD
    + """
[[parts]]
name = "block"
material = "m"
shape = "rectangle"
width = 100
height = 60
[[parts]]
name = "insert"
material = "m"
shape = "rectangle"
width = 20
height = 10
embedded_in = "block"
"""
)


@pytest.mark.parametrize(
    ("text", "pairs"),
    [
        (BOARDS, {("lower", "upper"): 100.0}),
        (TEE, {("flange", "web"): 6.0}),
        (BAR_IN_PIPE, {("pipe", "core"): 60 * math.pi}),
        (INSERT, {("block", "insert"): 60.0}),
        (TUBE, {}),
    ],
)
def test_shared_lines(text, pairs):
    found = shared_lines(part_outlines(parse_section(text)))
    assert {line.parts for line in found} == set(pairs)
    for line in found:
        # the line is a bit longer at its ends (1e-4 of the section's size each), chords are shorter by 1e-5
        assert line.length == pytest.approx(pairs[line.parts], abs=3e-4 * 120)


def test_outlines_know_their_holes_and_walls():
    (tube,) = part_outlines(parse_section(TUBE))
    assert len(tube.loops) == 2
    # pi (D - t) t of the ring; chords of 1 degree are short of the arc by (pi/360)²/6 = 1.3e-5 in length, 4e-5 in area
    assert tube.solid.area == pytest.approx(math.pi * 0.198 * 0.002, rel=1e-4)
    assert tube.wall == pytest.approx(0.002, rel=1e-4)
    assert bounding_box([tube]) == pytest.approx((-0.1, -0.1, 0.1, 0.1))


def test_outlines_from_the_mesh_match_those_of_the_file(solved):
    from dataclasses import replace

    from xsec_fem.model.section import MeshRegion

    result = solved("tee")
    parts = tuple(
        replace(part, face=None, mesh_region=MeshRegion(path=None, region=part.name)) for part in result.section.parts
    )
    section = replace(result.section, parts=parts)
    assert part_outlines(section) == []
    drawn = part_outlines(result.section)
    for a, b in zip(drawn, part_outlines(section, result.mesh), strict=True):
        assert a.name == b.name
        assert (
            a.solid.symmetric_difference(b.solid).area < 1e-9 * a.solid.area
        )  # straight sides: the same, to round-off
