"""The summary of a section before solving, as a whole."""

from __future__ import annotations

from dataclasses import replace

from tests.report.sections import BOARDS
from xsec_fem.model.reader import parse_section
from xsec_fem.report.blocks import plain_text
from xsec_fem.report.section_summary import section_summary

WHOLE = """\
Two boards
==========
  file: built in Python; units: N mm (stress in MPa)
  read without fault: 2 parts, 1 joint, 1 cut, 1 probe, 1 load case

Parts
  no.  part   material  shape      area [mm²]  embedded in
    1  lower  board     rectangle        4000  -
    2  upper  board     rectangle        4000  -

Parts that touch
  parts          along, about [mm]  joint
  lower | upper                100  glue

Load cases
  support: Vz = 4000 N through the shear centre

Files written
  sketch.png
"""


def test_the_whole_text():
    assert plain_text(section_summary(parse_section(BOARDS), ["sketch.png"])) == WHOLE


def test_cautions_are_told():
    section = replace(parse_section(BOARDS), cautions=(("code", "Have a look at this."),))
    assert "Warnings\n  Have a look at this.\n" in plain_text(section_summary(section, []))
