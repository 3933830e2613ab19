"""Text on paper: measured widths are on the safe side of what is drawn, and lines fit."""

from __future__ import annotations

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure

from xsec_fem.report.lettering import line_height, text_width, wrapped

FIGURE = Figure(dpi=150)
RENDERER = FigureCanvasAgg(FIGURE).get_renderer()


def drawn_width(text: str, size: float, weight: str) -> float:
    label = FIGURE.text(0, 0, text, size=size, weight=weight, parse_math=False)
    width = label.get_window_extent(RENDERER).width / 150
    label.remove()
    return width


@pytest.mark.parametrize("text", ["Largest |τ| = 0.97647 MPa at (y, z) = (70, 0) mm", "WWWW", "illi", "Träger $x_1$"])
@pytest.mark.parametrize(("size", "weight"), [(8.0, "normal"), (9.0, "normal"), (11.0, "bold")])
def test_width_is_that_of_the_drawing(text, size, weight):
    measured, drawn = text_width(text, size, weight == "bold"), drawn_width(text, size, weight)
    # letters are drawn on whole dots, up to one dot (1/150 inch) each, and 2 % is added on purpose
    assert measured == pytest.approx(drawn, rel=0.03, abs=1 / 150 * len(text))


@settings(max_examples=40, deadline=None)
@example("0000000000%:::", 0.515625)  # wide letters before narrow ones
@given(st.text(st.characters(codec="ascii", categories=["L", "N", "P", "Zs"]), max_size=120), st.floats(0.5, 5))
def test_lines_fit_and_nothing_is_lost(text, width):
    lines = wrapped(text, 9.0, width)
    assert all(text_width(line, 9.0) <= width for line in lines)
    assert "".join("".join(lines).split()) == "".join(text.split())


def test_numbers_stay_with_their_units_and_points_together():
    lines = wrapped("Vz = 18000 N mm at (20, 805) mm", 9.0, 1.3)
    assert [line.replace("\u00a0", " ") for line in lines] == ["Vz = 18000 N mm", "at (20, 805) mm"]


def test_line_height_is_larger_than_the_letters():
    assert line_height(9.0) > 9.0 / 72


def test_a_letter_that_the_font_lacks_does_no_harm():
    assert text_width("断面", 9.0) > 0
