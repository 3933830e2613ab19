"""Mesh files, .msh and .vtu, in and out: the only place that loads meshio, whose failures become plain messages."""

from __future__ import annotations

import contextlib
import io
import tempfile
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import Fault, InputError, MeshingError, MissingLibraryError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.gmsh_files import read_msh, write_msh
from xsec_fem.meshing.regions import FileMesh, Region, file_error
from xsec_fem.meshing.vtu_fields import part_arrays
from xsec_fem.meshing.vtu_file import LAGRANGE_TRIANGLE, QUADRATIC_TRIANGLE, TRIANGLE, Grid, write_vtu

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_TRIANGLES = ("triangle", "triangle6", "triangle10", "triangle15", "triangle21", "VTK_LAGRANGE_TRIANGLE")
_IGNORED = ("vertex", "line")  # points and lines of any order carry no area
_NODES = (3, 6, 10, 15, 21)
_FLAT = 1e-9  # a mesh thicker than this share of its size does not lie in the plane
_PART = "part "  # our own 0/1 cell arrays: "part NAME"
_REMEDY = "Write it again as a plain .msh or .vtu with triangles of one order"


def read_mesh_file(path: Path) -> FileMesh:
    """Read triangles of order 1 to 5 with their regions from a .msh or .vtu file; nodes of shape (N, 2) in the file's unit.

    Regions are physical groups (.msh), an integer cell array "region" and 0/1 cell arrays "part NAME" (.vtu). Raises
    InputError with the file and what to do when it cannot be used, MissingLibraryError without meshio.
    """
    if path.suffix.lower() not in (".msh", ".vtu"):
        raise file_error(path, "must end in .msh or .vtu", "Convert it", repr(path.suffix))
    try:
        found = _from_meshio(path, _loaded(path))
    except _Unreadable as error:
        if path.suffix.lower() != ".msh":
            raise file_error(path, f"cannot be read as a mesh ({error})", _REMEDY) from error
        found = _by_gmsh(path, error)
    triangles = _checked(path, found)
    return FileMesh(_in_plane(path, found), triangles, found.regions)


def write_mesh_file(path: Path, mesh: Mesh) -> None:
    """Write the mesh, full precision, all nodes, parts kept, as .msh or .vtu by its ending.

    Raises InputError for another ending or when the file cannot be written.
    """
    ending = path.suffix.lower()
    if ending not in (".msh", ".vtu"):
        fault = Fault(str(path), "mesh_file", "must end in .msh or .vtu", repr(path.suffix), "Change the ending")
        raise InputError([fault])
    try:
        if ending == ".msh":
            with tempfile.TemporaryDirectory() as folder:  # gmsh says too little of a place it cannot write to
                draft = Path(folder) / "mesh.msh"
                write_msh(draft, mesh)
                path.write_bytes(draft.read_bytes())
            return
        # Nodes of a Lagrange triangle of VTK: corners, edges 01 12 20, then inside as a smaller triangle: gmsh's order
        kind = {1: TRIANGLE, 2: QUADRATIC_TRIANGLE}.get(mesh.order, LAGRANGE_TRIANGLE)
        write_vtu(path, Grid(mesh.nodes, mesh.triangles, kind, {}, part_arrays(mesh.part_of, mesh.part_names)))
    except OSError as error:
        raise file_error(path, f"cannot be written: {error.strerror}", "Choose another place") from error


class _Unreadable(Exception):
    """meshio could not read a file; the text is what it said."""


def _loaded(path: Path) -> Any:
    """The file as a meshio mesh. Its readers are called by name: `meshio.read` guesses, prints, and exits the process."""
    try:
        import meshio
    except ImportError as error:
        raise MissingLibraryError(
            f"meshio cannot be loaded ({error}), {path.name} needs it: run `xsec-fem doctor`, it prints the command "
            "that mends it"
        ) from error
    if not path.is_file():
        raise file_error(path, "does not exist", "Check the path")
    read = meshio.gmsh.read if path.suffix.lower() == ".msh" else meshio.vtu.read
    try:
        with contextlib.redirect_stdout(io.StringIO()), contextlib.redirect_stderr(io.StringIO()):
            return read(str(path))
    except Exception as error:  # its readers let anything through: ValueError, KeyError, IndexError, ParseError ...
        raise _Unreadable(" ".join(str(error).split()) or f"it does not look like a {path.suffix} file") from error


def _from_meshio(path: Path, raw: Any) -> FileMesh:
    blocks = [(str(block.type), np.asarray(block.data)) for block in raw.cells]
    flat = [k for k, (kind, _) in enumerate(blocks) if not kind.startswith(_IGNORED)]
    kinds = sorted({(blocks[k][0], blocks[k][1].shape[-1]) for k in flat})
    if not flat:
        raise file_error(path, "has no triangles", _REMEDY)
    if len(kinds) > 1 or kinds[0][0] not in _TRIANGLES or kinds[0][1] not in _NODES:
        rule = "must hold triangles of one order from 1 to 5"
        raise file_error(path, rule, _REMEDY, ", ".join(f"{kind} with {n} nodes" for kind, n in kinds))
    triangles = np.vstack([blocks[k][1] for k in flat]).astype(np.int64)

    def cells(name: str) -> Any:
        return np.concatenate([np.ravel(raw.cell_data[name][k]) for k in flat])

    names = {int(number): name for name, (number, dim) in _physical_names(raw).items() if dim == 2}
    regions: list[Region] = []
    for name in raw.cell_data:
        if name in ("gmsh:physical", "region"):
            regions += _numbered(path, cells(name), names)
        elif name.startswith(_PART) and name[len(_PART) :]:
            regions.append(Region(None, name[len(_PART) :], np.flatnonzero(cells(name))))
    return FileMesh(np.asarray(raw.points, float), triangles, tuple(regions))


def _numbered(path: Path, values: Any, names: dict[int, str]) -> list[Region]:
    """One region per value of an integer cell array; 0 in a .msh means no physical group."""
    numbers = np.asarray(values).astype(np.int64)
    if (numbers != values).any():
        wrong = float(values[numbers != values][0])
        raise file_error(path, 'cell array "region" must hold whole numbers', "Write region numbers", f"{wrong:g}")
    msh = path.suffix.lower() == ".msh"
    return [
        Region(int(number), names.get(int(number)), np.flatnonzero(numbers == number))
        for number in np.unique(numbers)
        if number or not msh
    ]


def _physical_names(raw: Any) -> dict[str, Sequence[int]]:
    return {name: value for name, value in (raw.field_data or {}).items() if np.shape(value) == (2,)}


def _by_gmsh(path: Path, first: _Unreadable) -> FileMesh:
    """meshio leaves out some of gmsh's own variants (unnamed groups, parametric nodes); gmsh reads them all."""
    try:
        return read_msh(path)
    except (MeshingError, MissingLibraryError) as error:
        raise file_error(path, f"cannot be read as a mesh ({first})", _REMEDY) from error


def _in_plane(path: Path, found: FileMesh) -> FloatArray:
    """The nodes (N, 2), after checking that those in use are finite and lie in a plane."""
    used = found.nodes[np.unique(found.triangles)]
    if not np.isfinite(used).all():
        raise file_error(path, "has coordinates that are not numbers", _REMEDY)
    if found.nodes.shape[1] > 2:
        size, thickness = float(np.ptp(used[:, :2], axis=0).max()), float(np.ptp(used[:, 2]))
        if thickness > _FLAT * size:
            rule = "must lie in a plane of constant third coordinate"
            value = f"{used[:, 2].min():g} to {used[:, 2].max():g}"
            raise file_error(path, rule, "y is its first coordinate, z its second", value)
    return np.ascontiguousarray(found.nodes[:, :2])


def _checked(path: Path, found: FileMesh) -> IntArray:
    """The triangles, after checking that their nodes exist and no triangle uses a node twice."""
    triangles = found.triangles
    if triangles.min() < 0 or triangles.max() >= len(found.nodes):
        value = f"{triangles.min()} to {triangles.max()}, {len(found.nodes)} nodes"
        raise file_error(path, "has triangles with nodes that do not exist", _REMEDY, value)
    ordered = np.sort(triangles, axis=1)
    twice = np.flatnonzero((ordered[:, 1:] == ordered[:, :-1]).any(axis=1))
    if len(twice):
        value = f"triangle {twice[0]}: {triangles[twice[0]].tolist()}"
        raise file_error(path, "has triangles that use a node twice", _REMEDY, value)
    return triangles
