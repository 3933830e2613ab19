"""Rolled and cold-formed shapes against published tables (printed with 3 or 4 digits, so half a last digit)."""

import pytest

from tests.model.area_moments import area_moments
from xsec_fem.model.shapes import SHAPES


def table_units(word, **numbers):
    """A [cm2], I about the horizontal and the vertical axis [cm4], from numbers in mm."""
    shape = SHAPES[word].model_validate(numbers)
    assert shape.problems() == []
    m = area_moments(shape.face())
    return m.area / 1e2, m.zz / 1e4, m.yy / 1e4, m


# EN 10365:2017 dimensions, A, Iy, Iz as printed in section tables of European mills (IPE: read in a copy of an open
# section table, r from memory; HEA, HEB: from memory).
I_SHAPES = [
    ("IPE 200", 200, 100, 5.6, 8.5, 12, 28.48, 1943, 142.4),
    ("IPE 300", 300, 150, 7.1, 10.7, 15, 53.81, 8356, 603.8),
    ("IPE 500", 500, 200, 10.2, 16, 21, 115.5, 48200, 2142),
    ("HEA 200", 190, 200, 6.5, 10, 18, 53.83, 3692, 1336),
    ("HEA 300", 290, 300, 8.5, 14, 27, 112.5, 18260, 6310),
    ("HEB 300", 300, 300, 11, 19, 27, 149.1, 25170, 8563),
]


@pytest.mark.parametrize(
    ("name", "h", "b", "tw", "tf", "r", "A", "Iy", "Iz"), I_SHAPES, ids=[row[0] for row in I_SHAPES]
)
def test_european_i_shapes(name, h, b, tw, tf, r, A, Iy, Iz):
    found = table_units("i_shape", depth=h, width=b, web=tw, flange=tf, root_radius=r)
    # four printed digits: half a last digit is at most 5e-4 of the value
    assert found[:3] == pytest.approx((A, Iy, Iz), rel=5e-4)


# EN 10365 / DIN 1026-1, from memory: A, Iy, Iz, ys (centroid from the web's back); inner slope 8 %, tf at b/2.
CHANNELS = [
    ("UPN 200", 200, 75, 8.5, 11.5, 11.5, 6.0, 32.2, 1910, 148, 2.01),
    ("UPN 300", 300, 100, 10, 16, 16, 8.0, 58.8, 8030, 495, 2.70),
]


@pytest.mark.parametrize(
    ("name", "h", "b", "tw", "tf", "r1", "r2", "A", "Iy", "Iz", "ys"), CHANNELS, ids=[row[0] for row in CHANNELS]
)
def test_european_tapered_channels(name, h, b, tw, tf, r1, r2, A, Iy, Iz, ys):
    # the table's thickness is at b/2 from the tip, ours at mid-outstand (b - tw)/2 from it: thinner by 0.08 tw/2
    flange = tf - 0.08 * tw / 2
    found = table_units(
        "channel", depth=h, width=b, web=tw, flange=flange, root_radius=r1, toe_radius=r2, taper=0.08
    )  # fmt: skip
    # three printed digits: half a last digit is at most 5e-3 of the value
    assert found[:3] == pytest.approx((A, Iy, Iz), rel=5e-3)
    assert (found[3].yc + b / 2) / 10 == pytest.approx(ys, rel=5e-3)


def test_cold_formed_hollow_section():
    # EN 10219-2:2006, 50 x 30 x 2, outer radius 2 t, inner t: A 2.94 cm2, 9.54 and 4.29 cm4 (read in a copy)
    A, upright, lying, _ = table_units(
        "box", depth=50, width=30, web=2, flange=2, outer_radius=4, inner_radius=2
    )  # fmt: skip
    assert (A, upright, lying) == pytest.approx((2.94, 9.54, 4.29), rel=2e-3)  # 0.005 of 2.94 and of 4.29


# AISC Shapes Database v15.0 (2017), inches, read in a copy: A, Ix, Iy. The root radius is not printed; (kdes - tf) is
# used, a detailing value, which moves A by up to 1 % (four spandrels 0.86 r^2): hence the tolerance.
AISC = [
    ("W8X31", 8.0, 8.0, 0.285, 0.435, 0.829, 9.13, 110, 37.1),
    ("W14X90", 14.0, 14.5, 0.44, 0.71, 1.31, 26.5, 999, 362),
    ("W36X150", 35.9, 12.0, 0.625, 0.94, 1.69, 44.3, 9040, 270),
]


@pytest.mark.parametrize(("name", "d", "bf", "tw", "tf", "kdes", "A", "Ix", "Iy"), AISC, ids=[row[0] for row in AISC])
def test_american_wide_flanges(name, d, bf, tw, tf, kdes, A, Ix, Iy):
    shape = SHAPES["i_shape"].model_validate(
        {"depth": d, "width": bf, "web": tw, "flange": tf, "root_radius": kdes - tf}
    )
    m = area_moments(shape.face())
    assert (m.area, m.zz, m.yy) == pytest.approx((A, Ix, Iy), rel=0.01)
