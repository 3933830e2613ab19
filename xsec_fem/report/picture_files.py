"""The picture files of a result or of a section: which there are, how they are named."""

from __future__ import annotations

import warnings
from pathlib import Path
from typing import TYPE_CHECKING

from xsec_fem.errors import MissingLibraryError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Section
from xsec_fem.report.drawing_mesh import drawing_mesh
from xsec_fem.report.sheet import DPI
from xsec_fem.report.sketch_picture import sketch_figure
from xsec_fem.report.stress_picture import QUANTITIES, Canvas, stress_figure
from xsec_fem.report.wording import unique_slugs
from xsec_fem.results import Properties, Result

if TYPE_CHECKING:
    from matplotlib.figure import Figure

_SVG_SALT = "xsec_fem"  # the same picture gives the same file


def write_pictures(result: Result, folder: Path, svg: bool = False) -> list[Path]:
    """Write sketch and contours of every case at 150 dpi into an existing folder, as .svg too when asked; return the files.

    Names: sketch.png; tau_xz.png with one case, case_name_tau_xz.png with several. Raises MissingLibraryError without matplotlib.
    """
    require_matplotlib()
    canvas = Canvas.of(drawing_mesh(result.fields.part_nodes, result.away_from_corners))
    prefixes = unique_slugs([case.name for case in result.cases]) if len(result.cases) > 1 else [""]
    files = write_sketch(result.section, folder, svg, result.mesh, result.properties)
    for case, prefix in zip(result.cases, prefixes, strict=False):
        for quantity in QUANTITIES:
            name = f"{prefix}_{quantity.key}" if prefix else quantity.key
            files += save(stress_figure(result, case, quantity, canvas), folder / name, svg)
    return files


def write_sketch(
    section: Section, folder: Path, svg: bool = False, mesh: Mesh | None = None, properties: Properties | None = None
) -> list[Path]:
    """Write sketch.png (150 dpi), and .svg when asked, into an existing folder; return the files, none without parts to draw.

    Raises MissingLibraryError without matplotlib.
    """
    require_matplotlib()
    figure = sketch_figure(section, mesh, properties)
    return [] if figure is None else save(figure, folder / "sketch", svg)


def save(figure: Figure, stem: Path, svg: bool) -> list[Path]:
    """Write a figure as stem.png at 150 dpi, and as stem.svg when asked; return the files."""
    import matplotlib

    files = [stem.with_name(stem.name + ".png")]
    with warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing")  # drawn as an empty box; nothing else is lost
        figure.savefig(files[0], dpi=DPI)
        if svg:
            files.append(stem.with_name(stem.name + ".svg"))
            with matplotlib.rc_context({"svg.hashsalt": _SVG_SALT, "svg.fonttype": "none"}):
                figure.savefig(files[1], dpi=DPI, metadata={"Date": None})
    return files


def require_matplotlib() -> None:
    """Raise MissingLibraryError when matplotlib cannot be loaded; the message names the command that mends it."""
    try:
        import matplotlib.figure  # noqa: F401
    except (ImportError, OSError, TypeError) as error:
        raise MissingLibraryError(
            f"no pictures: matplotlib cannot be loaded ({error}): run `xsec-fem doctor`, it prints the command that mends it"
        ) from error
