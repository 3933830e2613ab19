"""The sketch, before and after solving."""

from __future__ import annotations

from dataclasses import replace

import pytest
from matplotlib.text import Annotation

from tests.report.figure_checks import assert_texts_on_page
from tests.report.sections import ALL
from xsec_fem.model.reader import parse_section
from xsec_fem.model.section import MeshRegion
from xsec_fem.report.sketch_picture import JOINT_COLOUR, sketch_figure
from xsec_fem.units import UNIT_SYSTEMS


def page_text(figure) -> str:
    return " ".join(text.get_text() for text in figure.texts).replace("\u00a0", " ")


def drawn_words(figure) -> list[str]:
    return [text.get_text() for text in figure.axes[0].texts if text.get_text()]


@pytest.mark.parametrize("name", ALL)
@pytest.mark.parametrize("with_result", [False, True])
def test_everything_is_named_and_on_the_page(solved, name, with_result):
    result = solved(name)
    section = result.section
    figure = sketch_figure(section, *((result.mesh, result.properties) if with_result else ()))
    assert_texts_on_page(figure)
    text = page_text(figure)
    assert section.title in text
    for item in (*section.parts, *section.joints, *section.cuts, *section.probes, *section.actions):
        assert item.name in text
    axes = figure.axes[0]
    assert (axes.get_xlabel(), axes.get_ylabel()) == (f"y [{section.units.length}]", f"z [{section.units.length}]")
    assert ("centroid" in text.lower()) == (with_result or "known after solving" in text or "load_point" in text)
    words = drawn_words(figure)
    assert {"y", "z"} <= set(words)
    assert {str(k + 1) for k in range(len(section.parts))} <= set(words)


def test_overall_dimensions_have_units():
    words = drawn_words(sketch_figure(parse_section(ALL["boards"])))
    assert {"100 mm", "80 mm"} <= set(words)


def test_centres_axes_and_loads_after_solving(solved):
    result = solved("tee")
    figure = sketch_figure(result.section, result.mesh, result.properties)
    words = drawn_words(figure)
    assert {"u", "v", "Vz", "Vy"} <= set(words)
    assert {"C", "S"} <= set(words) or "C, S" in words
    tips = [text.xy for text in figure.axes[0].texts if isinstance(text, Annotation) and text.arrowprops]
    assert (40.0, 112.0) in tips  # the given load point


def test_before_solving_only_given_load_points_are_drawn():
    words = drawn_words(sketch_figure(parse_section(ALL["tee"])))
    assert "Vy" in words
    assert "Vz" not in words
    assert "C" not in words


def test_joints_are_bold_lines_where_the_sides_touch():
    figure = sketch_figure(parse_section(ALL["boards"]))
    lines = [line for line in figure.axes[0].lines if line.get_color() == JOINT_COLOUR]
    assert len(lines) == 1
    y, z = lines[0].get_data()
    # the line may reach past the ends by 1e-4 of the section's size
    assert (min(y), max(y)) == pytest.approx((-50, 50), abs=0.02)
    assert max(abs(z)) < 0.02


def test_a_far_shear_centre_is_left_out_with_a_note(solved):
    result = solved("tee")
    far = replace(result.properties, ysc=1e5)
    text = page_text(sketch_figure(result.section, result.mesh, far))
    assert "too far away to be shown" in text
    assert "too far" not in page_text(sketch_figure(result.section, result.mesh, result.properties))


def test_a_section_far_from_its_origin_keeps_its_scale():
    text = ALL["mast"].replace("height = 20", "height = 20\nat = [1e5, 0]")
    figure = sketch_figure(parse_section(text))
    assert abs(figure.axes[0].get_xlim()[0] - 1e5) < 50
    assert_texts_on_page(figure)


def test_parts_of_a_mesh_file_need_the_mesh(solved):
    result = solved("axial")
    part = replace(result.section.parts[0], face=None, mesh_region=MeshRegion(path=None))
    section = replace(result.section, parts=(part,))
    assert sketch_figure(section) is None
    assert {"20 mm"} <= set(drawn_words(sketch_figure(section, result.mesh)))


def test_many_parts_fit():
    parts = "".join(
        f'[[parts]]\nname = "a lamella with a long name {k}"\nmaterial = "m"\nshape = "rectangle"\nwidth = 100\n'
        f"height = 5\nat = [0, {5 * k}]\n"
        for k in range(60)
    )
    section = parse_section(f'units = "N mm"\n[materials.m]\nE = 1\nnu = 0\n{parts}')
    figure = sketch_figure(section)
    assert_texts_on_page(figure)
    assert "and 20 more parts" in page_text(figure)


@pytest.mark.parametrize("units", UNIT_SYSTEMS)
def test_units_are_those_of_the_file(units):
    figure = sketch_figure(parse_section(ALL["axial"].replace('"N mm"', f'"{units}"')))
    assert f"units {units}" in page_text(figure)
