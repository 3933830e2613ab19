"""Writing of VTK's XML file of an unstructured grid (.vtu), so that no large library is loaded for it.

Arrays are compressed with zlib, one block each, in base64: header [blocks, block size, size of a last smaller block,
compressed size] as 64-bit integers, then the block (VTK file formats, "XML file formats", compressed inline data).
"""

from __future__ import annotations

import base64
import sys
import zlib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from xml.sax.saxutils import quoteattr

import numpy as np
import numpy.typing as npt

TRIANGLE, QUADRATIC_TRIANGLE, LAGRANGE_TRIANGLE = 5, 22, 69  # VTK's numbers of cell types

_TYPES = {"f8": "Float64", "i8": "Int64", "i4": "Int32", "u1": "UInt8"}
_QUICK = 1  # zlib level: half the size of the raw data in a third of the time of the default level


@dataclass(frozen=True)
class Grid:
    """Points (N, 2), cells (M, n) all of one VTK type, and values per point (N, ...) and per cell (M, ...)."""

    points: npt.NDArray[np.float64]
    cells: npt.NDArray[np.int64]
    cell_type: int
    point_data: Mapping[str, npt.NDArray[np.float64]] = field(default_factory=dict)
    cell_data: Mapping[str, npt.NDArray[np.int64]] = field(default_factory=dict)


def write_vtu(path: Path, grid: Grid) -> None:
    """Write the grid; coordinates and vectors (N, 2) get a third component 0. OSError when the file cannot be written."""
    path.write_text("\n".join(_lines(grid)) + "\n", encoding="utf-8")


def _lines(grid: Grid) -> Iterator[str]:
    order = "LittleEndian" if sys.byteorder == "little" else "BigEndian"
    count, per_cell = grid.cells.shape
    yield '<?xml version="1.0"?>'
    yield (
        f'<VTKFile type="UnstructuredGrid" version="1.0" byte_order="{order}" header_type="UInt64" '
        'compressor="vtkZLibDataCompressor">'
    )
    yield f'<UnstructuredGrid><Piece NumberOfPoints="{len(grid.points)}" NumberOfCells="{count}">'
    yield f"<Points>{_array('Points', grid.points)}</Points>"
    yield "<Cells>"
    yield _array("connectivity", grid.cells.ravel())
    yield _array("offsets", per_cell * np.arange(1, count + 1, dtype=np.int64))
    yield _array("types", np.full(count, grid.cell_type, np.uint8))
    yield "</Cells>"
    yield from ("<PointData>", *(_array(name, values) for name, values in grid.point_data.items()), "</PointData>")
    yield from ("<CellData>", *(_array(name, values) for name, values in grid.cell_data.items()), "</CellData>")
    yield "</Piece></UnstructuredGrid></VTKFile>"


def _array(name: str, values: npt.NDArray[np.generic]) -> str:
    if values.ndim == 2 and values.shape[1] == 2:
        values = np.column_stack([values, np.zeros(len(values))])
    values = np.ascontiguousarray(values)
    raw = values.tobytes()
    packed = zlib.compress(raw, _QUICK)
    header = np.array([1, len(raw), 0, len(packed)], np.uint64).tobytes()
    text = (base64.b64encode(header) + base64.b64encode(packed)).decode("ascii")
    kind = _TYPES[values.dtype.str[1:]]
    components = f' NumberOfComponents="{values.shape[1]}"' if values.ndim == 2 else ""
    return f'<DataArray type="{kind}" Name={quoteattr(name)}{components} format="binary">{text}</DataArray>'
