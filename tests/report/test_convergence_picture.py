"""The picture of convergence: errors, observed order, intervals of IT."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from tests.report.figure_checks import assert_headings_and_notes_apart, assert_texts_on_page
from xsec_fem.report.convergence_picture import convergence_figure
from xsec_fem.results import ConvergenceRow


def rows(errors, nodes=(100, 400, 1600), order=4):
    return tuple(
        ConvergenceRow(order, n, n // 8, e, None, 5.5 + e, (5.5 - e, 5.5 + e), 8.0, (7.9, 8.1))
        for n, e in zip(nodes, errors, strict=True)
    )


@pytest.fixture
def figure(solved):
    # errors that fall with h³: order 3 exactly, since nodes grow as h^-2
    return convergence_figure(replace(solved("tube"), convergence=rows([0.08, 0.01, 0.00125])))


def test_errors_and_asked_accuracy_on_logarithmic_axes(figure):
    errors, constants = figure.axes
    assert (errors.get_xscale(), errors.get_yscale(), constants.get_xscale()) == ("log", "log", "log")
    assert errors.get_xlabel() == "nodes [-]"
    assert errors.get_ylabel() == "energy error at most [-]"
    assert constants.get_ylabel() == "IT [m⁴]"
    assert errors.lines[0].get_ydata().tolist() == [0.08, 0.01, 0.00125]
    words = [text.get_text() for text in errors.texts]
    assert words == ["asked for: 0.01", "observed\norder 3.0"]
    triangle = next(line for line in errors.lines if len(line.get_xdata()) == 4)
    (x0, x1, _, _), (top, bottom, _, _) = triangle.get_data()
    assert -2 * np.log(bottom / top) / np.log(x1 / x0) == pytest.approx(3.0)


def test_the_interval_of_every_mesh(figure):
    bars = figure.axes[1].collections[1].get_segments()
    assert [bar[:, 1].tolist() for bar in bars] == [[5.5 - e, 5.5 + e] for e in (0.08, 0.01, 0.00125)]
    assert figure.axes[1].lines[-1].get_ydata().tolist() == [5.58, 5.51, 5.50125]


def test_texts_stay_on_the_page_and_the_reason_is_told(figure):
    assert_texts_on_page(figure)
    assert_headings_and_notes_apart(figure)
    text = " ".join(text.get_text() for text in figure.texts).replace("\u00a0", " ")
    assert "Convergence: 3 meshes, triangles of degree 4" in text
    assert "Not strict: " in text


@pytest.mark.parametrize(
    "table", [rows([0.01, 0.01, 0.02]), rows([0.0, 0.0, 0.0])[:1], rows([0.1, 0.1, 0.05], nodes=(100, 100, 100))]
)
def test_no_order_where_there_is_none(solved, table):
    figure = convergence_figure(
        replace(solved("boards"), convergence=tuple(replace(r, energy_error=r.energy_error or 1e-9) for r in table))
    )
    assert not any("order" in text.get_text() for text in figure.axes[0].texts)
    assert_texts_on_page(figure)


def test_degrees_instead_of_meshes_and_nothing_without_rows(solved):
    result = solved("boards")
    table = tuple(replace(row, degree=k + 1) for k, row in enumerate(rows([0.1, 0.01, 0.001])))
    figure = convergence_figure(replace(result, convergence=table))
    assert any("one mesh, degrees 1 to 5" in text.get_text() for text in figure.texts)
    assert convergence_figure(result) is None
