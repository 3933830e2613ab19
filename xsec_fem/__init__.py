"""Exact transverse shear in beam sections built of parts.

    from xsec_fem import read_section, solve

    result = solve(read_section("meshes/five_boards.toml"))

Names load on first use, so that a command that only draws does not wait for the solver.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from xsec_fem.errors import Fault, InputError, MeshingError, MissingLibraryError, SolveError, XsecError
    from xsec_fem.model.reader import parse_section, read_section
    from xsec_fem.model.section import Actions, Section
    from xsec_fem.pipeline import solve
    from xsec_fem.results import Result

__all__ = [
    "Actions",
    "Fault",
    "InputError",
    "MeshingError",
    "MissingLibraryError",
    "Result",
    "Section",
    "SolveError",
    "XsecError",
    "parse_section",
    "read_section",
    "solve",
]

_HOMES = {
    "Actions": "xsec_fem.model.section",
    "Fault": "xsec_fem.errors",
    "InputError": "xsec_fem.errors",
    "MeshingError": "xsec_fem.errors",
    "MissingLibraryError": "xsec_fem.errors",
    "Result": "xsec_fem.results",
    "Section": "xsec_fem.model.section",
    "SolveError": "xsec_fem.errors",
    "XsecError": "xsec_fem.errors",
    "parse_section": "xsec_fem.model.reader",
    "read_section": "xsec_fem.model.reader",
    "solve": "xsec_fem.pipeline",
}


def __getattr__(name: str) -> Any:
    """Load a public name on first use; AttributeError for any other."""
    if name not in _HOMES:
        raise AttributeError(f"module 'xsec_fem' has no attribute {name!r}")
    value = getattr(import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    """List the public names."""
    return sorted(__all__)
