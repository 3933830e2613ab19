"""A line on stderr for each mesh solved, on a terminal only: piped output and --quiet stay silent."""

from __future__ import annotations

import sys
from collections.abc import Callable

from xsec_fem.report.trust_blocks import at_most, percent
from xsec_fem.results import MeshStep


def step_printer(accuracy: float, quiet: bool) -> Callable[[MeshStep], None] | None:
    """Return what is to be called after each mesh, None where nobody looks; `accuracy` is the one asked for [-]."""
    if quiet or not sys.stderr.isatty():
        return None
    from rich.console import Console
    from rich.text import Text

    console = Console(stderr=True, highlight=False)

    def tell(step: MeshStep) -> None:
        console.print(Text(step_line(step, accuracy), style="dim"))

    return tell


def step_line(step: MeshStep, accuracy: float) -> str:
    """Return one mesh as a line: nodes, the largest bound of the energy errors, what was asked for."""
    enough = step.energy_error <= accuracy
    error, asked = at_most(step.energy_error), percent(accuracy)
    return (
        f"mesh of {step.nodes} nodes: energy error at most {error}, asked for {asked}{'' if enough else ': refining'}"
    )
