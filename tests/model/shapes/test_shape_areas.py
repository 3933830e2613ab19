"""Area, centroid and second moments of shapes against formulas, and of all shapes against a fine polyline."""

import math

import numpy as np
import pytest
from shape_examples import EXAMPLES, IDS

from tests.model.area_moments import area_moments
from xsec_fem.model.outline import Isometry
from xsec_fem.model.shapes import SHAPES

EXACT = 1e-12  # closed formula against Gauss points: round-off of some 50 terms
PI = math.pi


def face_of(word, **numbers):
    shape = SHAPES[word].model_validate(numbers)
    assert shape.problems() == []
    return shape.face()


def moments_of(word, **numbers):
    return area_moments(face_of(word, **numbers))


def polygon_moments(points):
    """Area, centroid and central second moments of a polygon (n, 2), by the shoelace sums (from memory)."""
    origin = points.mean(axis=0)
    y, z = (points - origin).T
    y1, z1 = np.roll(y, -1), np.roll(z, -1)
    c = y * z1 - y1 * z
    area = c.sum() / 2
    yc, zc = ((y + y1) * c).sum() / 6, ((z + z1) * c).sum() / 6
    yy, zz = (c * (y * y + y * y1 + y1 * y1)).sum() / 12, (c * (z * z + z * z1 + z1 * z1)).sum() / 12
    yz = (c * (y * z1 + 2 * y * z + 2 * y1 * z1 + y1 * z)).sum() / 24
    sums = np.array([area, yc, zc, yy, zz, yz]) * np.sign(area)
    return sums, origin


def face_sums(face, max_deg):
    """Area, first and second moments of a polygonised face about the origin, holes taken off."""
    total = np.zeros(6)
    for k, loop in enumerate(face.loops):
        sums, (oy, oz) = polygon_moments(loop.polyline(max_deg))
        a, sy, sz, yy, zz, yz = sums
        about_origin = [
            a, sy + a * oy, sz + a * oz,
            yy + 2 * oy * sy + a * oy * oy, zz + 2 * oz * sz + a * oz * oz, yz + oy * sz + oz * sy + a * oy * oz,
        ]  # fmt: skip
        total += np.array(about_origin) * (1 if k == 0 else -1)
    return total


@pytest.mark.parametrize(("word", "numbers"), EXAMPLES, ids=IDS)
def test_moments_agree_with_a_fine_polyline(word, numbers):
    face = face_of(word, **numbers)
    m = area_moments(face)
    mine = np.array([
        m.area, m.area * m.yc, m.area * m.zc,
        m.yy + m.area * m.yc**2, m.zz + m.area * m.zc**2, m.yz + m.area * m.yc * m.zc,
    ])  # fmt: skip
    y0, z0, y1, z1 = face.bounds()
    size = max(abs(y0), abs(z0), abs(y1), abs(z1))
    scale = abs(face.outer.area) * np.array([1, size, size, size**2, size**2, size**2])
    # chords of h = 0.1 deg = 1.75e-3 rad leave out h^2/6 = 5.1e-7 of each sector, and at most 4 times that of its
    # second moment; the loop's whole area bounds the sectors' (convex rounding is smaller, holes are inside)
    gap = np.array([1, 2, 2, 4, 4, 4]) * 5.1e-7
    assert np.all(np.abs(mine - face_sums(face, 0.1)) <= gap * scale * 2)
    assert face.area == pytest.approx(m.area, rel=EXACT)


def test_rectangle():
    m = moments_of("rectangle", width=140, height=40)
    assert (m.area, m.yc, m.zc) == pytest.approx((5600, 0, 0), rel=EXACT, abs=1e-12)
    assert (m.yy, m.zz, m.yz) == pytest.approx((40 * 140**3 / 12, 140 * 40**3 / 12, 0), rel=EXACT, abs=1e-8)


def spandrel(r):
    """Area between a right corner and its fillet, its centroid's distance from the corner, own I: derived here."""
    area = (1 - PI / 4) * r**2
    distance = r * (10 - 3 * PI) / (12 - 3 * PI)
    # about the fillet's centre: square r^4/3 less quarter disc pi r^4/16
    own = r**4 * (1 / 3 - PI / 16) - area * (r - distance) ** 2
    return area, distance, own


def test_rounded_rectangle():
    b, h, r = 140.0, 40.0, 6.0
    m = moments_of("rectangle", width=b, height=h, corner_radius=r)
    a, d, own = spandrel(r)
    assert m.area == pytest.approx(b * h - 4 * a, rel=EXACT)
    assert m.yy == pytest.approx(h * b**3 / 12 - 4 * (own + a * (b / 2 - d) ** 2), rel=EXACT)
    assert m.zz == pytest.approx(b * h**3 / 12 - 4 * (own + a * (h / 2 - d) ** 2), rel=EXACT)


def test_round_shapes():
    m = moments_of("circle", diameter=12)
    assert (m.area, m.yy, m.zz) == pytest.approx((36 * PI, PI * 6**4 / 4, PI * 6**4 / 4), rel=EXACT)
    m = moments_of("ellipse", width=50, height=30)
    assert (m.area, m.yy, m.zz) == pytest.approx((375 * PI, PI * 15 * 25**3 / 4, PI * 25 * 15**3 / 4), rel=EXACT)
    m = moments_of("ring", diameter=200, thickness=8)
    assert (m.area, m.yy) == pytest.approx((PI * (100**2 - 92**2), PI * (100**4 - 92**4) / 4), rel=EXACT)


@pytest.mark.parametrize(("begin", "end"), [(0, 90), (-45, 45), (30, 210), (10, 300), (0, 360)])
@pytest.mark.parametrize("thickness", [None, 6])
def test_sector(begin, end, thickness):
    if thickness is not None and end - begin == 360:
        end -= 1
    numbers = {"radius": 50, "from_deg": begin, "to_deg": end}
    m = moments_of("sector", **numbers, **({} if thickness is None else {"thickness": thickness}))
    angle, middle = math.radians(end - begin), math.radians((begin + end) / 2)
    r0 = 0 if thickness is None else 50 - thickness
    area = angle / 2 * (50**2 - r0**2)
    reach = 2 / 3 * math.sin(angle / 2) * (50**3 - r0**3) / area  # from the centre along the bisector
    assert m.area == pytest.approx(area, rel=EXACT)
    assert (m.yc, m.zc) == pytest.approx((reach * math.cos(middle), reach * math.sin(middle)), rel=1e-11, abs=1e-11)
    polar = angle / 4 * (50**4 - r0**4) - area * reach**2
    assert m.yy + m.zz == pytest.approx(polar, rel=EXACT)


@pytest.mark.parametrize("r", [0.0, 15.0])
def test_i_shape(r):
    h, b, tw, tf = 300.0, 150.0, 7.1, 10.7
    m = moments_of("i_shape", depth=h, width=b, web=tw, flange=tf, root_radius=r)
    a, d, own = spandrel(r) if r else (0.0, 0.0, 0.0)
    clear = h - 2 * tf
    assert m.area == pytest.approx(2 * b * tf + clear * tw + 4 * a, rel=EXACT)
    zz = (b * h**3 - (b - tw) * clear**3) / 12 + 4 * (own + a * (clear / 2 - d) ** 2)
    yy = (2 * tf * b**3 + clear * tw**3) / 12 + 4 * (own + a * (tw / 2 + d) ** 2)
    assert (m.zz, m.yy) == pytest.approx((zz, yy), rel=EXACT)


def test_unequal_flanges():
    m = moments_of("i_shape", depth=805, width=300, web=10, flange=20, bottom_width=400, bottom_flange=25)
    # top 300x20, web 760x10, bottom 400x25: by hand zc = 337.8 above the bottom, I = 2.7132e9 (4 and 5 digits)
    assert m.zc + 402.5 == pytest.approx(337.8, abs=0.05)
    assert m.zz == pytest.approx(2.7132e9, rel=2e-5)


@pytest.mark.parametrize(
    ("word", "numbers", "outstands"),
    [
        ("i_shape", {"depth": 300, "width": 125, "web": 10.8, "flange": 16.2}, 4),
        ("tee", {"depth": 150, "width": 125, "web": 10.8, "flange": 16.2}, 2),
        ("channel", {"depth": 200, "width": 75, "web": 8.5, "flange": 11.5}, 2),
    ],
)
@pytest.mark.parametrize("taper", [0.05, 0.14])
def test_taper_turns_the_inner_face_about_mid_outstand(word, numbers, outstands, taper):
    plain, tapered = moments_of(word, **numbers), moments_of(word, **numbers, taper=taper)
    assert tapered.area == pytest.approx(plain.area, rel=EXACT)
    # each outstand c gets a wedge at the web and loses one at the tip: its first moment along y falls by s c^3/12
    c = (numbers["width"] - numbers["web"]) / (1 if word == "channel" else 2)
    if word == "channel":
        assert (tapered.yc - plain.yc) * plain.area == pytest.approx(-outstands * taper * c**3 / 12, rel=1e-9)
    else:
        assert tapered.yc == pytest.approx(0, abs=1e-12)
        half = numbers["web"] / 2 + c / 2
        assert plain.yy - tapered.yy == pytest.approx(outstands * 2 * half * taper * c**3 / 12, rel=1e-9)


def test_tee_and_angle_and_zed_sharp():
    m = moments_of("tee", depth=120, width=80, web=8, flange=10)
    area = 80 * 10 + 110 * 8
    zc = (800 * 115 + 880 * 55) / area
    assert (m.area, m.zc + 60) == pytest.approx((area, zc), rel=EXACT)
    zz = 80 * 1e3 / 12 + 800 * (115 - zc) ** 2 + 8 * 110**3 / 12 + 880 * (55 - zc) ** 2
    assert m.zz == pytest.approx(zz, rel=EXACT)

    m = moments_of("angle", depth=150, width=90, thickness=10)
    area = 1500 + 800
    yc, zc = (1500 * 5 + 800 * 50) / area, (1500 * 75 + 800 * 5) / area
    assert (m.area, m.yc, m.zc) == pytest.approx((area, yc, zc), rel=EXACT)
    yz = 1500 * (5 - yc) * (75 - zc) + 800 * (50 - yc) * (5 - zc)
    assert m.yz == pytest.approx(yz, rel=EXACT)

    m = moments_of("zed", depth=200, width=140, web=4, flange=5)
    area, outstand = 200 * 4 + 2 * 5 * 68, 68
    assert (m.area, m.yc, m.zc) == pytest.approx((area, 0, 0), rel=EXACT, abs=1e-12)
    assert m.yz == pytest.approx(2 * 5 * outstand * (2 + 34) * 97.5, rel=EXACT)  # top flange to the right: positive


def test_lipped_channel():
    m = moments_of("channel", depth=200, width=75, web=3, flange=2, lip=25)
    assert m.area == pytest.approx(196 * 3 + 2 * 75 * 2 + 2 * 23 * 2, rel=EXACT)
    first = 196 * 3 * 1.5 + 300 * 37.5 + 92 * 74
    assert m.yc + 37.5 == pytest.approx(first / m.area, rel=EXACT)


@pytest.mark.parametrize("cells", [1, 2, 5])
def test_box(cells):
    m = moments_of("box", depth=60, width=120, web=3, flange=4, cells=cells)
    clear = (120 - 3 * (cells + 1)) / cells
    assert m.area == pytest.approx(120 * 60 - cells * clear * 52, rel=EXACT)
    assert m.zz == pytest.approx((120 * 60**3 - cells * clear * 52**3) / 12, rel=EXACT)
    assert m.yc == pytest.approx(0, abs=1e-12)


def test_polygon_radii_one_per_corner():
    square = [[0, 0], [10, 0], [10, 10], [0, 10]]
    m = moments_of("polygon", points=square, radii=[0, 1, 2, 3])
    assert m.area == pytest.approx(100 - (1 - PI / 4) * (1 + 4 + 9), rel=EXACT)
    assert moments_of("polygon", points=square, radius=2).area == pytest.approx(100 - (4 - PI) * 4, rel=EXACT)


def test_outline_of_arcs():
    stadium = [{"to": [10, 0]}, {"to": [10, 4], "through": [12, 2]}, {"to": [0, 4]}, {"to": [0, 0], "through": [-2, 2]}]
    m = moments_of("outline", start=[0, 0], steps=stadium)
    assert (m.area, m.yc, m.zc) == pytest.approx((40 + 4 * PI, 5, 2), rel=EXACT)
    # three quarters of a circle of radius 10 and the chord that closes it: 3/4 pi r^2 + r^2/2
    m = moments_of("outline", start=[10, 0], steps=[{"to": [0, -10], "through": [-10, 0]}])
    assert m.area == pytest.approx(75 * PI + 50, rel=EXACT)
    quarter = [{"to": [10, 0]}, {"to": [0, 10], "centre": [0, 0]}]
    assert moments_of("outline", start=[0, 0], steps=quarter).area == pytest.approx(25 * PI, rel=EXACT)


def test_plate_leans():
    m = moments_of("plate", **{"from": [0, 0], "to": [30, 40], "thickness": 6})
    assert (m.area, m.yc, m.zc) == pytest.approx((300, 15, 20), rel=EXACT)
    along, across = 6 * 50**3 / 12, 50 * 6**3 / 12
    assert m.yy == pytest.approx(0.36 * along + 0.64 * across, rel=EXACT)
    assert m.yz == pytest.approx(0.48 * (along - across), rel=EXACT)


@pytest.mark.parametrize(("word", "numbers"), EXAMPLES, ids=IDS)
@pytest.mark.parametrize("move", [Isometry.rotation(37).then(Isometry.translation((50, -20))), Isometry.mirror("y")])
def test_isometries_keep_area_and_invariants(word, numbers, move):
    face = face_of(word, **numbers)
    a, b = area_moments(face), area_moments(face.moved(move))
    assert b.area == pytest.approx(a.area, rel=1e-12)
    assert (b.yc, b.zc) == pytest.approx(move((a.yc, a.zc)), abs=1e-10)
    assert b.yy + b.zz == pytest.approx(a.yy + a.zz, rel=1e-12)
    # the determinant of the inertia tensor; slender shapes cancel up to four digits of it
    assert b.yy * b.zz - b.yz**2 == pytest.approx(a.yy * a.zz - a.yz**2, rel=1e-8)
