"""A shape that lives in another file: a drawing, or a mesh."""

from __future__ import annotations

from pathlib import PurePath
from typing import Annotated, ClassVar

from pydantic import Field, Strict

from xsec_fem.model.outline import Face
from xsec_fem.model.shapes.base import Positive, Problem, ShapeSpec

_SUFFIXES = (".dxf", ".geo", ".msh", ".vtu")


class FileShape(ShapeSpec):
    """A drawing (.dxf, by layer), or a geometry or mesh (.geo, .msh, .vtu, by region)."""

    default_anchor: ClassVar[str] = "origin"

    path: Annotated[str, Field(min_length=1)] = Field(description="Give the path, relative to the section file.")
    region: Annotated[str, Strict()] | Annotated[int, Strict()] | None = Field(
        None, description="Give the name or number of a physical region."
    )
    layer: str | None = Field(None, description="Give the name of one layer of the drawing.")
    scale: Positive = Field(1.0, description="Give the factor for the file's coordinates.")

    def problems(self) -> list[Problem]:
        """A known kind of file; layer only for drawings, region only for the other ones."""
        suffix = PurePath(self.path).suffix.lower()
        if suffix not in _SUFFIXES:
            remedy = "Save the outline or the mesh in one of these."
            return [Problem("path", f"must end in one of {', '.join(_SUFFIXES)}", self.path, remedy)]
        if suffix != ".dxf" and self.layer is not None:
            return [Problem("layer", "must be left out unless the file is a .dxf", self.layer, "Give region instead.")]
        if suffix == ".dxf" and self.region is not None:
            remedy = "Give layer instead."
            return [Problem("region", "must be left out when the file is a .dxf", str(self.region), remedy)]
        return []

    def face(self) -> Face:
        """Always raises TypeError: what the file holds is found by reading it."""
        raise TypeError(f"the outline of shape 'file' is in {self.path!r}: read it from there")
