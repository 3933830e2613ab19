"""The convergence studies: orders as the theory of elements has them, and the pictures made of them."""

from __future__ import annotations

import pytest

from tests.validation.samples import sample
from validation.case import failed
from validation.convergence import Curve, Study, curves, studies
from validation.pictures import convergence_figure, differences_figure
from validation.runner import run


@pytest.fixture(scope="module")
def studied() -> dict[str, list[Curve]]:
    return {study.title: curves(study) for study in studies()}


# what the size h of an uneven mesh means, and meshes of 30 to 300 triangles, let the fitted orders vary by about 0.8
BAND = 0.8


@pytest.mark.parametrize("title", ["square, side 1", "rectangle 2 x 1, nu 0.3"])
@pytest.mark.parametrize("degree", [1, 2, 3, 4, 5])
def test_right_angles_limit_the_order(studied: dict[str, list[Curve]], title: str, degree: int) -> None:
    slope = studied[title][degree - 1].slope
    assert slope == pytest.approx(min(2 * degree, 4), abs=BAND)


@pytest.mark.parametrize("degree", [3, 4, 5])
def test_sharp_corner_limits_the_order_to_four_thirds(studied: dict[str, list[Curve]], degree: int) -> None:
    slope = studied["angle 100 x 100 x 10, sharp"][degree - 1].slope
    assert slope == pytest.approx(4 / 3, abs=0.15)  # smooth decay of one singular term: no scatter but the meshes'


@pytest.mark.parametrize("title", ["ellipse, half axes 1.5 and 1", "ring, radii 0.5 and 1, nu 0.3", "eccentric tube"])
@pytest.mark.parametrize("degree", [1, 2, 3, 4, 5])
def test_curved_sides(studied: dict[str, list[Curve]], title: str, degree: int) -> None:
    """2p, or where the sides' own error is larger p + 1 (odd p), p + 2 (even p); more where that error is small."""
    slope = studied[title][degree - 1].slope
    assert slope is not None
    assert slope > min(2 * degree, degree + 1 + (degree % 2 == 0)) - BAND


@pytest.mark.parametrize("title", [study.title for study in studies()])
def test_higher_degrees_are_better(studied: dict[str, list[Curve]], title: str) -> None:
    finest = [curve.error[-1] for curve in studied[title][:4]]
    assert finest == sorted(finest, reverse=True)


def test_slope_of_round_off_is_none() -> None:
    assert Curve(4, (0.2, 0.1), (1e-12, 2e-12), 1e-11).slope is None
    assert Curve(2, (0.2, 0.1), (16e-6, 1e-6), 1e-11).slope == pytest.approx(4.0)


def test_pictures(studied: dict[str, list[Curve]]) -> None:
    figure = convergence_figure([(study, studied[study.title]) for study in studies()])
    assert len(figure.axes) == 6
    legend = figure.axes[3].get_legend()
    assert legend is not None
    assert [text.get_text().split(" (")[0] for text in legend.get_texts()] == [
        f"p = {degree}" for degree in range(1, 6)
    ]


def test_differences_show_every_check() -> None:
    records = [*run([sample(id="a"), sample(id="b", group="others")], jobs=1), failed(sample(id="c"), "no mesh")]
    figure = differences_figure(records)
    [axes] = figure.axes
    assert [label.get_text() for label in axes.get_yticklabels()] == ["samples (2)", "others (1)"]
    dots = [line for line in axes.get_lines() if line.get_marker() == "o"]
    assert len(dots) == 2


def test_study_is_data() -> None:
    assert all(isinstance(study, Study) and study.exact > 0 and len(study.sizes) >= 4 for study in studies())
