"""Small section files as text, for tests of the whole chain."""

from pathlib import Path

from xsec_fem.model.reader import parse_section

HEAD = """
title = "test"
units = "N mm"
[materials.m]
E = 2.6
nu = 0.3
[[parts]]
name = "a"
material = "m"
"""
L_SHARP = HEAD + 'shape = "polygon"\npoints = [[0, 0], [8, 0], [8, 1], [1, 1], [1, 10], [0, 10]]\n'
TWIST = '[[actions]]\nname = "twist"\nT = 1\n'
I_SHAPE = HEAD + 'shape = "i_shape"\ndepth = 360\nwidth = 300\nweb = 12\nflange = 20\nroot_radius = 24\n'


def section(text, folder="."):
    return parse_section(text, "test.toml", Path(folder))


def sector(angle_deg):
    """A circular sector of radius 1 symmetric about +y; its vertex is a corner of that angle."""
    return section(
        HEAD + f'shape = "sector"\nradius = 1\nfrom_deg = {-angle_deg / 2}\nto_deg = {angle_deg / 2}\n' + TWIST
    )
