"""Pictures of stresses, checked on the figure: what a reader must find on each of them."""

from __future__ import annotations

import re
from functools import lru_cache

import numpy as np
import pytest
from matplotlib.colorbar import Colorbar
from matplotlib.patches import Circle, Rectangle
from matplotlib.quiver import Quiver
from matplotlib.text import Annotation

from tests.report.figure_checks import assert_headings_and_notes_apart, assert_texts_on_page
from tests.report.sections import ALL
from xsec_fem.report.numbers import number
from xsec_fem.report.stress_picture import QUANTITIES, RASTERISE_ABOVE, stress_figure

BY_KEY = {quantity.key: quantity for quantity in QUANTITIES}
# both components are drawn alike: one is enough for most sections
EVERY = [(name, key) for name in ALL for key in BY_KEY if key != "tau_xy" or name == "tee"]


def page_text(figure) -> str:
    return " ".join(text.get_text() for text in figure.texts).replace("\u00a0", " ")


@lru_cache
def draw(solved, canvas, name, key):
    """The result and its picture of the first case; drawn once and read by many tests."""
    result = solved(name)
    return result, stress_figure(result, result.cases[0], BY_KEY[key], canvas(name))


@pytest.mark.parametrize(("name", "key"), EVERY)
def test_a_picture_says_what_it_shows(solved, canvas, name, key):
    result, figure = draw(solved, canvas, name, key)
    text = page_text(figure)
    case, units = result.cases[0], result.section.units
    for words in (result.section.title, case.name, BY_KEY[key].words, f"[{units.stress}]"):
        assert words in text
    for action, unit in (("N", units.force), ("Vy", units.force), ("Vz", units.force), ("T", units.moment)):
        value = getattr(case.actions, action)
        assert (f"{action} = {number(value)} {unit}" in text) == (value != 0)


@pytest.mark.parametrize(("name", "key"), EVERY)
def test_axes_have_units_and_equal_scale(solved, canvas, name, key):
    result, figure = draw(solved, canvas, name, key)
    length = result.section.units.length
    drawings = [axes for axes in figure.axes if axes.get_xlabel()]
    assert drawings
    for axes in drawings:
        assert axes.get_xlabel() == f"y [{length}]"
        assert axes.get_ylabel() == f"z [{length}]"
        box = axes.get_window_extent()
        across, up = np.ptp(axes.get_xlim()) / box.width, np.ptp(axes.get_ylim()) / box.height
        assert across == pytest.approx(up, rel=1e-9)  # round-off of the layout only


@pytest.mark.parametrize(("name", "key"), EVERY)
def test_there_is_one_colour_bar_with_a_unit(solved, canvas, name, key):
    result, figure = draw(solved, canvas, name, key)
    bars = [axes for axes in figure.axes if isinstance(getattr(axes, "_colorbar", None), Colorbar)]
    assert len(bars) == 1
    assert bars[0].get_ylabel() == f"{BY_KEY[key].symbol} [{result.section.units.stress}]"
    assert len(bars[0].get_yticks()) >= 2


@pytest.mark.parametrize(("name", "key"), EVERY)
def test_texts_stay_on_the_page_and_apart(solved, canvas, name, key):
    _, figure = draw(solved, canvas, name, key)
    assert_texts_on_page(figure)
    assert_headings_and_notes_apart(figure)


@pytest.mark.parametrize(("name", "key"), EVERY)
def test_the_page_is_150_dpi_and_fits_a_report(solved, canvas, name, key):
    _, figure = draw(solved, canvas, name, key)
    width, height = figure.get_size_inches()
    assert figure.dpi == 150
    assert 5 < width < 13
    assert 3 < height < 10


def test_the_largest_value_is_marked_at_its_place(solved, canvas):
    result, figure = draw(solved, canvas, "boards", "tau")
    top = result.cases[0].tau_max
    marks = [text for text in figure.axes[0].texts if isinstance(text, Annotation) and text.get_text()]
    assert [mark.get_text() for mark in marks] == [number(top.value, 4)]
    assert marks[0].xy == (top.y, top.z)
    assert f"Largest |τ| = {number(top.value)} MPa" in page_text(figure)
    assert f"in {top.part}." in page_text(figure)


def test_a_component_marks_its_extremes_away_from_corners(solved, canvas):
    result, figure = draw(solved, canvas, "tee", "tau_xz")
    clear = result.away_from_corners
    lowest = result.cases[0].stress.tau_xz[clear].min()
    assert f"Lowest τxz = {number(lowest)} MPa" in page_text(figure)
    assert not clear.all()


def test_corners_have_rings_and_do_not_stretch_the_scale(solved, canvas):
    result, figure = draw(solved, canvas, "tee", "tau")
    rings = [patch for patch in figure.axes[0].patches if isinstance(patch, Circle)]
    assert sorted(ring.center for ring in rings) == [(-3.0, 100.0), (3.0, 100.0)]
    assert "stress not read within the ring" in page_text(figure)
    bar = next(axes for axes in figure.axes if hasattr(axes, "_colorbar"))
    top = result.cases[0].tau_max.value
    # the step between bands is at most a quarter of the value shown, so the last limit is below 1.5 times the maximum
    assert max(bar.get_yticks()) < 1.5 * top
    beyond = result.cases[0].stress.tau.max() > max(bar.get_yticks())
    assert ("its end is extended" in page_text(figure)) == beyond


def test_a_thin_wall_gets_a_detail_and_a_broad_one_does_not(solved, canvas):
    _, thin = draw(solved, canvas, "tube", "tau")
    _, broad = draw(solved, canvas, "boards", "tau")
    titles = [axes.get_title(loc="left") for axes in thin.axes if axes.get_title(loc="left")]
    assert len(titles) == 1
    assert re.fullmatch(r"Detail, \d+ times larger", titles[0])
    assert any(isinstance(patch, Rectangle) for patch in thin.axes[0].patches)
    assert len(broad.axes) == 2


def test_directions_are_drawn_with_the_magnitude_only(solved, canvas):
    for key in BY_KEY:
        _, figure = draw(solved, canvas, "boards", key)
        arrows = [artist for artist in figure.axes[0].collections if isinstance(artist, Quiver)]
        assert len(arrows) == (key == "tau")
    assert "Arrows show the direction" in page_text(figure)


def test_without_shear_the_field_is_said_to_be_zero(solved, canvas):
    _, figure = draw(solved, canvas, "axial", "tau_xz")
    assert "τxz is zero everywhere" in page_text(figure)
    assert not figure.axes[0].texts


def test_the_outline_of_every_part_is_drawn(solved, canvas):
    _, figure = draw(solved, canvas, "boards", "tau_xz")
    segments = [line for artist in figure.axes[0].collections for line in getattr(artist, "get_segments", list)()]
    boxes = {tuple(np.round([*line.min(axis=0), *line.max(axis=0)], 6)) for line in segments}
    assert boxes == {(-50, -40, 50, 0), (-50, 0, 50, 40)}


def test_large_meshes_are_rasterised_in_vector_files(solved, canvas):
    small, large = canvas("boards"), canvas("tube")
    assert len(small.mesh.triangles) < RASTERISE_ABOVE
    for name, drawn in (("boards", small), ("tube", large)):
        _, figure = draw(solved, canvas, name, "tau_xz")
        fills = [artist for artist in figure.axes[0].collections if artist.get_rasterized()]
        assert bool(fills) == (len(drawn.mesh.triangles) > RASTERISE_ABOVE)
