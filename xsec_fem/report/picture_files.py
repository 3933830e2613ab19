"""The picture files of a result or of a section: which there are, how they are named."""

from __future__ import annotations

import warnings
from collections.abc import Callable
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, Any

from xsec_fem.errors import MissingLibraryError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Section
from xsec_fem.report.convergence_picture import convergence_figure
from xsec_fem.report.depth_picture import depth_figure
from xsec_fem.report.drawing_mesh import drawing_mesh
from xsec_fem.report.joints_picture import joints_figure
from xsec_fem.report.ratio_picture import ratio_figure
from xsec_fem.report.section_canvas import Canvas
from xsec_fem.report.sheet import DPI
from xsec_fem.report.sketch_picture import sketch_figure
from xsec_fem.report.stress_picture import QUANTITIES, stress_figure
from xsec_fem.report.two_processes import run_jobs
from xsec_fem.report.wording import case_prefixes
from xsec_fem.results import Result

if TYPE_CHECKING:
    from matplotlib.figure import Figure

Drawing = tuple[Path, "Callable[[], Figure | None]"]  # path without its ending, and what makes the figure

_PNG_EFFORT = 3  # of 9: two thirds of the time of the default, for files a tenth larger
_SVG_SALT = "xsec_fem"  # the same picture gives the same file


def write_pictures(
    result: Result, folder: Path, svg: bool = False, two_processes: bool = False, every: bool = False
) -> list[Path]:
    """Write sketch and contours of every case at 150 dpi into an existing folder, as .svg too when asked; return the files.

    Names: sketch.png; tau_xz.png with one case, case_name_tau_xz.png with several; convergence.png when there is a table of it.
    With `every` also the joints and the comparison with V S/(I t). `two_processes` halves the time on Linux (see
    `two_processes`). Raises MissingLibraryError without matplotlib, OSError when a file cannot be written.
    """
    require_matplotlib()
    canvas = Canvas.of(drawing_mesh(result.fields.part_nodes, result.away_from_corners))
    drawings: list[Drawing] = [
        (folder / "sketch", partial(sketch_figure, result.section, result.mesh, result.properties))
    ]
    for case, prefix in zip(result.cases, case_prefixes(result), strict=True):
        for quantity in QUANTITIES:
            drawings.append(
                (_stem(folder, prefix, quantity.key), partial(stress_figure, result, case, quantity, canvas))
            )
        if every and case.joints:
            drawings.append((_stem(folder, prefix, "joints"), partial(joints_figure, result, case, canvas)))
    if every:
        drawings += _comparisons(result, folder, canvas)
    if result.convergence:
        drawings.append((folder / "convergence", partial(convergence_figure, result)))
    return _draw_all(drawings, svg, two_processes)


def write_comparison_pictures(
    result: Result, folder: Path, svg: bool = False, two_processes: bool = False
) -> list[Path]:
    """Write ratio.png and tau_by_depth.png of every case with shear at 150 dpi; names and errors as in `write_pictures`."""
    require_matplotlib()
    canvas = Canvas.of(drawing_mesh(result.fields.part_nodes, result.away_from_corners))
    return _draw_all(_comparisons(result, folder, canvas), svg, two_processes)


def _comparisons(result: Result, folder: Path, canvas: Canvas) -> list[Drawing]:
    drawings: list[Drawing] = []
    for case, prefix in zip(result.cases, case_prefixes(result), strict=True):
        if case.comparison is not None:
            drawings.append((_stem(folder, prefix, "ratio"), partial(ratio_figure, result, case, canvas)))
            drawings.append((_stem(folder, prefix, "tau_by_depth"), partial(depth_figure, result, case, canvas)))
    return drawings


def _stem(folder: Path, prefix: str, key: str) -> Path:
    return folder / (f"{prefix}_{key}" if prefix else key)


def _draw_all(drawings: list[Drawing], svg: bool, two_processes: bool) -> list[Path]:
    run_jobs([partial(_draw, stem, figure, svg) for stem, figure in drawings], two_processes)
    return [file for stem, _ in drawings for file in picture_names(stem, svg)]


def write_sketch(section: Section, folder: Path, svg: bool = False, mesh: Mesh | None = None) -> list[Path]:
    """Write sketch.png (150 dpi), and .svg when asked, into an existing folder; return the files, none without parts to draw.

    Raises MissingLibraryError without matplotlib, OSError when a file cannot be written.
    """
    require_matplotlib()
    figure = sketch_figure(section, mesh)
    if figure is None:
        return []
    save(figure, folder / "sketch", svg)
    return picture_names(folder / "sketch", svg)


def picture_names(stem: Path, svg: bool) -> list[Path]:
    """Return stem.png, and stem.svg when asked."""
    return [stem.with_name(stem.name + ending) for ending in ([".png", ".svg"] if svg else [".png"])]


def _draw(stem: Path, make: Callable[[], Figure | None], svg: bool) -> None:
    figure = make()
    if figure is not None:
        save(figure, stem, svg)


def save(figure: Figure, stem: Path, svg: bool) -> None:
    """Write a figure as stem.png at 150 dpi, and as stem.svg when asked."""
    with warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing")  # drawn as an empty box; nothing else is lost
        for file in picture_names(stem, svg):
            (_save_svg if file.suffix == ".svg" else _save_png)(figure, file)


def _save_png(figure: Figure, file: Path) -> None:
    """Draw at the figure's own 150 dpi and store without the alpha channel, which says nothing on white paper."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from PIL import Image

    canvas: Any = FigureCanvasAgg(figure)  # its methods carry no types
    canvas.draw()
    size = canvas.get_width_height(physical=True)
    image = Image.frombuffer("RGBA", size, canvas.buffer_rgba(), "raw", "RGBA", 0, 1).convert("RGB")
    image.save(file, format="png", compress_level=_PNG_EFFORT, dpi=(DPI, DPI))


def _save_svg(figure: Figure, file: Path) -> None:
    """Store as vectors with text as text; the same picture gives the same file."""
    import matplotlib

    with matplotlib.rc_context({"svg.hashsalt": _SVG_SALT, "svg.fonttype": "none"}):
        figure.savefig(file, dpi=DPI, metadata={"Date": None})


def require_matplotlib() -> None:
    """Raise MissingLibraryError when matplotlib cannot be loaded; the message names the command that mends it."""
    try:
        import matplotlib.figure  # noqa: F401
    except (ImportError, OSError, TypeError) as error:
        raise MissingLibraryError(
            f"no pictures: matplotlib cannot be loaded ({error}): run `xsec-fem doctor`, it prints the command that mends it"
        ) from error
