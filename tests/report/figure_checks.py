"""What must hold for every picture, read off the figure: texts inside the page and apart, units on the axes, equal scale."""

from __future__ import annotations

from itertools import combinations

from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.text import Text


def extents(figure) -> list[tuple[str, object]]:
    """(text, box in dots) of every text that is drawn: tick labels beyond the limits of their axis exist but are not."""
    canvas = FigureCanvasAgg(figure)
    canvas.draw()
    hidden = {id(label) for axes in figure.axes for axis in (axes.xaxis, axes.yaxis) for label in _beyond(axis)}
    texts = [text for text in figure.findobj(Text) if text.get_text().strip() and text.get_visible()]
    return [
        (text.get_text(), text.get_window_extent(canvas.get_renderer())) for text in texts if id(text) not in hidden
    ]


def _beyond(axis) -> list[Text]:
    low, high = sorted(axis.get_view_interval())
    slack = 1e-9 * (high - low)
    ticks = [tick for tick in axis.majorTicks if not low - slack <= tick.get_loc() <= high + slack]
    return [label for tick in ticks for label in (tick.label1, tick.label2)]


def assert_texts_on_page(figure) -> None:
    width, height = figure.get_size_inches() * figure.dpi
    for text, box in extents(figure):
        assert box.x0 >= 0, text
        assert box.x1 <= width, text
        assert box.y0 >= 0, text
        assert box.y1 <= height, text


def assert_headings_and_notes_apart(figure) -> None:
    """Texts of the page itself overlap neither each other nor any axes with its labels; the figure must be drawn already."""
    renderer = figure.canvas.get_renderer()
    boxes = [(text.get_text(), text.get_window_extent(renderer)) for text in figure.texts]
    boxes += [(f"axes {k}", axes.get_tightbbox(renderer)) for k, axes in enumerate(figure.axes)]
    for (a, box_a), (b, box_b) in combinations(boxes, 2):
        across = min(box_a.x1, box_b.x1) - max(box_a.x0, box_b.x0)
        up = min(box_a.y1, box_b.y1) - max(box_a.y0, box_b.y0)
        # two dots of overlap at 150 dpi are the rounding of letters' boxes, which include empty rows
        assert min(across, up) <= 2, (a, b)
