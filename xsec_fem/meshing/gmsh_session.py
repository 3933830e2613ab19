"""gmsh behind one door: started without the user's configuration, silent, always finalised, its errors made ours.

gmsh keeps one global state per process, so a lock lets one thread at a time in. When the caller's own program has
gmsh running already, a model of our own is added and taken away again, and the options are put back.
"""

from __future__ import annotations

import re
import tempfile
import threading
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

from xsec_fem.errors import MeshingError, MissingLibraryError

_LOCK = threading.RLock()
_LOG_LINES = 6
_LEFT_OVER = (
    20_000  # attempts to get over what is left of an earlier file: more than the reader's buffer of 16 kB holds
)
_CLEAN = 3  # scripts read without a fault in a row before the reader counts as empty: single characters can be valid
_MODEL = "xsec_fem"
_OPTIONS = {
    "General.Terminal": 0,
    "General.NumThreads": 1,
    "General.AbortOnError": 2,  # raise
    "Geometry.ToleranceBoolean": 1e-4,  # sections are 64 to 128 across: gaps and overlaps of typed digits are closed
    "Mesh.Algorithm": 6,  # frontal Delaunay: as fast as 5 and better shaped triangles
    "Mesh.MeshSizeExtendFromBoundary": 0,
    "Mesh.MeshSizeFromPoints": 0,
    "Mesh.MeshSizeFromCurvature": 0,
    "Mesh.MeshSizeMin": 0,
    "Mesh.MeshSizeMax": 1e22,
    "Mesh.LcIntegrationPrecision": 1e-3,  # the default 1e-9 only costs time: sizes are wishes
    "Mesh.ElementOrder": 1,
    "Mesh.SaveAll": 0,
    "Mesh.Binary": 0,
    "Mesh.MshFileVersion": 4.1,
}


def load_gmsh() -> Any:
    """Import gmsh and return the module; MissingLibraryError says which library is missing."""
    try:
        import gmsh
    except (ImportError, OSError, TypeError) as error:
        found = re.search(r"[\w.+-]+\.(?:so|dll|dylib)[\w.]*", str(error))
        what = f"{found.group()} is missing" if found else str(error)
        raise MissingLibraryError(
            f"gmsh cannot be loaded ({what}): run `xsec-fem doctor`, it prints the command that mends it"
        ) from error
    return gmsh


@contextmanager
def gmsh_session(name: str = _MODEL) -> Iterator[Any]:
    """Give the gmsh module with one empty current model; everything is put away at the end.

    Raises MissingLibraryError when gmsh cannot be loaded, MeshingError with the last log lines when gmsh fails.
    """
    gmsh = load_gmsh()
    with _LOCK, _running(gmsh, name):
        gmsh.logger.start()
        try:
            yield gmsh
        except Exception as error:
            if type(error) is not Exception:  # gmsh raises the bare class; anything else is not its own
                raise
            lines = [str(error), *gmsh.logger.get()[-_LOG_LINES:]]
            raise MeshingError("gmsh failed: " + " | ".join(dict.fromkeys(filter(None, lines)))) from error
        finally:
            gmsh.logger.stop()


def merge_script(gmsh: Any, path: str) -> None:
    """Merge a geometry script into the current model; gmsh's own exception when it cannot be read.

    gmsh's reader keeps what it left of a file that it gave up, for the life of the process, and trips over it character by
    character in later files. So it is first given empty scripts, in a model thrown away, until it reads them without a fault.
    """
    model = gmsh.model.getCurrent()
    gmsh.model.add(_MODEL + " left over")
    with tempfile.TemporaryDirectory() as folder:
        empty = Path(folder) / "empty.geo"
        empty.write_text("// nothing\n")
        clean = 0
        for _ in range(_LEFT_OVER):
            try:
                gmsh.merge(str(empty))
            except Exception:
                clean = 0
            else:
                clean += 1
            if clean == _CLEAN:
                break
    gmsh.model.remove()
    gmsh.model.setCurrent(model)
    gmsh.logger.stop()  # what the reader said of earlier files is not told of this one
    gmsh.logger.start()
    gmsh.merge(path)


@contextmanager
def _running(gmsh: Any, name: str) -> Iterator[None]:
    """Start gmsh, or borrow the one that runs, and undo it."""
    if not gmsh.isInitialized():
        gmsh.initialize(readConfigFiles=False, interruptible=False)
        try:
            _set_options(gmsh, _OPTIONS)
            gmsh.model.add(name)
            yield
        finally:
            gmsh.finalize()
        return
    before, model = {key: gmsh.option.getNumber(key) for key in _OPTIONS}, gmsh.model.getCurrent()
    _set_options(gmsh, _OPTIONS)
    gmsh.model.add(name)
    try:
        yield
    finally:
        gmsh.model.setCurrent(name)
        gmsh.model.remove()
        _set_options(gmsh, before)
        gmsh.model.setCurrent(model)


def _set_options(gmsh: Any, options: dict[str, float]) -> None:
    for key, value in options.items():
        gmsh.option.setNumber(key, value)
