"""Pictures of the ratio, of stress by depth and of joints, read off the figure."""

from __future__ import annotations

from dataclasses import replace
from functools import lru_cache

import numpy as np
import pytest
from matplotlib import colormaps
from matplotlib.colorbar import Colorbar
from matplotlib.colors import to_hex
from matplotlib.text import Annotation

from tests.report.figure_checks import assert_headings_and_notes_apart, assert_texts_on_page
from tests.report.sections import ALL
from xsec_fem.report.depth_picture import FORMULA, LARGEST, MEAN, depth_figure
from xsec_fem.report.joints_picture import joints_figure
from xsec_fem.report.numbers import number
from xsec_fem.report.ratio_picture import ratio_figure

MAKERS = {"ratio": ratio_figure, "depth": depth_figure, "joints": joints_figure}
SHEARED = [name for name in ALL if name != "axial"]
EVERY = [(kind, name) for kind in ("ratio", "depth") for name in [*SHEARED, "profile", "sharp", "box"]]
EVERY += [("joints", name) for name in ("boards", "fillets", "rows")]


@lru_cache
def draw(solved, canvas, kind, name):
    result = solved(name)
    return result, MAKERS[kind](result, result.cases[0], canvas(name))


def page_text(figure) -> str:
    return " ".join(text.get_text() for text in figure.texts).replace("\u00a0", " ")


@pytest.mark.parametrize(("kind", "name"), EVERY)
def test_a_picture_says_what_it_shows_with_the_actions(solved, canvas, kind, name):
    result, figure = draw(solved, canvas, kind, name)
    text, case, units = page_text(figure), result.cases[0], result.section.units
    for words in (result.section.title, case.name):
        assert words in text
    for action in ("Vy", "Vz"):
        value = getattr(case.actions, action)
        assert (f"{action} = {number(value)} {units.force}" in text) == (value != 0)
    assert figure.dpi == 150


@pytest.mark.parametrize(("kind", "name"), EVERY)
def test_texts_stay_on_the_page_and_apart(solved, canvas, kind, name):
    _, figure = draw(solved, canvas, kind, name)
    assert_texts_on_page(figure)
    assert_headings_and_notes_apart(figure)
    width, height = figure.get_size_inches()
    assert 5 < width < 15
    assert 3 < height < 10


@pytest.mark.parametrize("name", [*SHEARED, "profile"])
def test_the_ratio_has_one_bar_without_a_unit_and_equal_scale(solved, canvas, name):
    result, figure = draw(solved, canvas, "ratio", name)
    bars = [axes for axes in figure.axes if isinstance(getattr(axes, "_colorbar", None), Colorbar)]
    assert len(bars) == 1
    assert bars[0].get_ylabel() == "ratio [-], steps on a log scale"
    figure.canvas.draw()
    labels = [tick.label2.get_text() or tick.label1.get_text() for tick in bars[0].yaxis.get_major_ticks()]
    assert {"0.8", "0.95", "1.05", "1.2"} <= set(labels)
    axes = figure.axes[0]
    length = result.section.units.length
    assert (axes.get_xlabel(), axes.get_ylabel()) == (f"y [{length}]", f"z [{length}]")
    box = axes.get_window_extent()
    across, up = np.ptp(axes.get_xlim()) / box.width, np.ptp(axes.get_ylim()) / box.height
    assert across == pytest.approx(up, rel=1e-9)  # round-off of the layout only


def test_the_worst_place_is_marked_with_its_ratio_and_told(solved, canvas):
    result, figure = draw(solved, canvas, "ratio", "profile")
    worst = result.cases[0].verdict.too_low
    marks = [text for text in figure.axes[0].texts if isinstance(text, Annotation) and text.get_text()]
    assert marks[0].get_text() == number(worst.ratio, 4)
    assert marks[0].xy == worst.at
    assert f"elasticity {number(worst.elasticity, 4)} MPa, V S/(I t) {number(worst.elementary, 4)} MPa" in page_text(
        figure
    )
    assert "verdict: poor" in page_text(figure)


def test_a_good_formula_is_white_but_for_the_mask(solved, canvas):
    _, figure = draw(solved, canvas, "ratio", "boards")
    axes = figure.axes[0]
    bands, mask = axes.collections[0], axes.collections[1]
    filled = [
        to_hex(colour) for colour, path in zip(bands.get_facecolor(), bands.get_paths(), strict=True) if len(path)
    ]
    pale = to_hex(colormaps["RdBu_r"](0.5 + 0.46 * 0.16))
    assert (
        filled[0] == "#ffffff"
    )  # beside the mask both stresses are small, and the ratio goes up to 1.1 in the corners
    assert set(filled) <= {"#ffffff", pale}
    assert mask.hatches == ["////"]
    # tau = 5 % of the largest where z² = 0.95 h²/4: the mask lies beyond 39 of 40, the parabola's chords in between
    assert min(abs(path.vertices[:, 1]).min() for path in mask.get_paths() if len(path)) == pytest.approx(39.0, abs=0.7)
    assert "verdict: good" in page_text(figure)
    assert not [text for text in axes.texts if text.get_text()]


def curves(figure) -> dict[str, tuple[np.ndarray, np.ndarray]]:
    chart = figure.axes[1]
    return {line.get_color(): line.get_data() for line in chart.lines if len(line.get_xdata()) > 10}


@pytest.mark.parametrize("name", [*SHEARED, "profile", "sharp", "box"])
def test_curves_share_the_depth_axis_of_the_outline(solved, canvas, name):
    result, figure = draw(solved, canvas, "depth", name)
    outline, chart = figure.axes[:2]
    assert outline.get_ylim() == chart.get_ylim()
    low, high = outline.get_window_extent().y0, chart.get_window_extent().y0
    assert low == pytest.approx(high)
    units = result.section.units
    assert chart.get_xlabel() == f"shear stress [{units.stress}]"
    assert outline.get_ylabel().endswith(f"[{units.length}]")
    drawn, sweep = curves(figure), result.cases[0].comparison.sweep
    assert np.array_equal(drawn[FORMULA][0], sweep.elementary, equal_nan=True)
    assert np.array_equal(drawn[MEAN][0], sweep.mean, equal_nan=True)
    assert np.array_equal(drawn[LARGEST][0], sweep.largest, equal_nan=True)
    assert np.allclose(np.abs(drawn[LARGEST][1]), np.abs(sweep.levels))


def test_downward_shear_keeps_the_section_upright(solved, canvas):
    result, figure = draw(solved, canvas, "depth", "tee")
    assert result.cases[0].actions.Vz < 0
    outline = figure.axes[0]
    assert outline.get_ylabel() == "z [mm]"
    assert outline.get_ylim()[1] > 112 > 0 > outline.get_ylim()[0]
    depth = curves(figure)[LARGEST][1]
    assert depth[0] > depth[-1]  # the sweep runs along V, downward
    (arrow,) = [text for text in outline.texts if isinstance(text, Annotation) and not text.get_text()]
    assert arrow.xy[1] < arrow.xyann[1]


def test_sideways_shear_turns_the_section(solved, canvas):
    _, figure = draw(solved, canvas, "depth", "box")
    outline = figure.axes[0]
    assert outline.get_ylabel() == "y [mm]"
    assert outline.get_xlabel() == "across V [mm]"
    assert "turned so that V's line is upright" in page_text(figure)
    assert 30 < outline.get_ylim()[1] < 40


def test_a_wide_section_is_squeezed_and_says_so(solved, canvas):
    _, figure = draw(solved, canvas, "depth", "deck")
    assert "width is drawn to another scale" in page_text(figure)
    _, plain = draw(solved, canvas, "depth", "boards")
    assert "another scale" not in page_text(plain)


@pytest.mark.parametrize("make", [ratio_figure, depth_figure])
def test_no_picture_without_shear(solved, canvas, make):
    result = solved("axial")
    assert make(result, result.cases[0], canvas("axial")) is None


@pytest.mark.parametrize(("name", "count"), [("boards", 1), ("fillets", 1), ("rows", 2)])
def test_every_joint_has_its_flow_and_a_chart(solved, canvas, name, count):
    result, figure = draw(solved, canvas, "joints", name)
    drawing, *charts = figure.axes
    assert len(charts) == count
    for k, (chart, joint) in enumerate(zip(charts, result.cases[0].joints, strict=True)):
        assert chart.get_title(loc="left") == f"{k + 1}  {joint.name}: {number(joint.flow, 4)} N/mm"
        assert "[" in chart.get_ylabel()
    assert [text.get_text() for text in drawing.texts] == [str(k + 1) for k in range(count)]
    assert (drawing.get_xlabel(), drawing.get_ylabel()) == ("y [mm]", "z [mm]")


def test_the_chart_of_a_glue_line_is_its_profile(solved, canvas):
    result, figure = draw(solved, canvas, "joints", "boards")
    (joint,) = result.cases[0].joints
    profile = figure.axes[1].lines[0]
    assert np.abs(profile.get_ydata()).max() == pytest.approx(abs(joint.peak), rel=1e-12)
    assert profile.get_xdata()[-1] == pytest.approx(100.0)
    words = [text.get_text() for text in figure.axes[1].texts]
    assert words == [f"mean {number(joint.mean, 4)}, peak {number(joint.peak, 4)} MPa"]


def test_beads_and_rows_have_their_shares(solved, canvas):
    result, figure = draw(solved, canvas, "joints", "fillets")
    beads = [text.get_text() for text in figure.axes[1].get_legend().get_texts()]
    shares = [bond.share for bond in result.cases[0].joints[0].bonds]
    assert beads == [f"bead {k + 1}: {100 * share:.1f} %" for k, share in enumerate(shares)]
    result, figure = draw(solved, canvas, "joints", "rows")
    bolts = result.cases[0].joints[0]
    bars = figure.axes[1].patches
    assert [bar.get_height() for bar in bars] == pytest.approx([bond.flow for bond in bolts.bonds])
    assert sum(bond.share for bond in bolts.bonds) == pytest.approx(1.0)
    assert [
        f"({100 * bond.share:.1f} %)" in text.get_text()
        for bond, text in zip(bolts.bonds, figure.axes[1].texts, strict=True)
    ]


def test_many_joints_are_cut_to_the_most_used_and_none_gives_no_picture(solved, canvas):
    result = solved("boards")
    case = result.cases[0]
    many = tuple(replace(case.joints[0], name=f"glue {k}", capacity=10.0 + k) for k in range(9))
    figure = joints_figure(result, replace(case, joints=many), canvas("boards"))
    assert [axes.get_title(loc="left")[3:9] for axes in figure.axes[1:]] == [f"glue {k}" for k in range(6)]
    assert "3 more in joints.csv" in page_text(figure)
    assert joints_figure(result, replace(case, joints=()), canvas("boards")) is None
    contact = replace(case.joints[0], kind="contact")
    assert joints_figure(result, replace(case, joints=(contact,)), canvas("boards")) is None
