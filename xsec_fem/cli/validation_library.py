"""Where the validation library is: inside the package when it was installed from a wheel, beside it in a checkout."""

from __future__ import annotations

import sys
from importlib import import_module
from importlib.util import find_spec
from pathlib import Path
from types import ModuleType

from xsec_fem.errors import MissingLibraryError

_INSTALLED = "xsec_fem.validation"
_CHECKOUT = "validation"


def validation_module(name: str) -> ModuleType:
    """Return the validation library's module of that name, "runner" for example.

    Raises MissingLibraryError when the library is neither in the package nor beside it.
    """
    if find_spec(_INSTALLED) is not None:
        return import_module(f"{_INSTALLED}.{name}")
    checkout = Path(__file__).resolve().parents[2]
    if not (checkout / _CHECKOUT / "case.py").is_file():
        raise MissingLibraryError(
            f"the validation library is neither in this installation nor in {checkout}: reinstall"
        )
    if str(checkout) not in sys.path:
        sys.path.insert(0, str(checkout))
    found = import_module(_CHECKOUT).__file__
    if Path(found or "").resolve().parent != checkout / _CHECKOUT:
        raise MissingLibraryError(f"another package named '{_CHECKOUT}' hides the library of {checkout}: {found}")
    return import_module(f"{_CHECKOUT}.{name}")


def in_checkout() -> bool:
    """True when the library lies beside the package, where its README can be rewritten."""
    return find_spec(_INSTALLED) is None
