"""The tables of a section file as the user types them: one class per table, one field per key.

The description of a field is the remedy that a fault of that key prints. The numbers of a shape stand in the same table
as the keys of a part (or hole); they belong to `xsec_fem.model.shapes`.
"""

from __future__ import annotations

from typing import Annotated, Literal, get_args

from pydantic import AfterValidator, BaseModel, BeforeValidator, ConfigDict, Field, Strict

from xsec_fem.model.faults import own_words
from xsec_fem.model.shapes.base import NotNegative, Number, Positive
from xsec_fem.model.wording import did_you_mean, listed
from xsec_fem.units import UNIT_SYSTEMS

Anchor = Literal[
    "centre", "left", "right", "top", "bottom", "top left", "top right", "bottom left", "bottom right", "origin"
]
LoadPoint = Literal["shear centre", "centroid"]
WELD_ENDS = ("left", "right", "top", "bottom")
LARGEST = 1e12  # as for the numbers of shapes: their squares and fourth powers must stay finite


def _text_name(value: str) -> str:
    if not value.strip() or not value.isprintable():
        raise own_words("must be printable text and not blank")
    return value


def _pair(value: object) -> object:
    if not isinstance(value, list | tuple) or len(value) != 2:
        raise own_words("must be a pair of numbers [y, z]")
    return value


def _units(value: object) -> object:
    if not isinstance(value, str) or value not in UNIT_SYSTEMS:
        near = did_you_mean(value, UNIT_SYSTEMS) if isinstance(value, str) else ""
        raise own_words(f"must be one of {listed(UNIT_SYSTEMS)}", near if near.startswith("Did") else "")
    return value


def _load_point(value: object) -> object:
    if isinstance(value, str) and value not in get_args(LoadPoint):
        near = did_you_mean(value, get_args(LoadPoint))
        raise own_words('must be "shear centre", "centroid" or a point [y, z]', near if near.startswith("Did") else "")
    numbers = isinstance(value, list | tuple) and len(value) == 2 and all(_is_coordinate(item) for item in value)
    if not numbers and not isinstance(value, str):
        raise own_words('must be "shear centre", "centroid" or a point [y, z]')
    return value


def _is_coordinate(value: object) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and abs(value) < LARGEST


def _side(value: object) -> object:
    """One side of a joint: a name alone is the same as a list of one name."""
    names = [value] if isinstance(value, str) else value
    if not isinstance(names, list) or not names or not all(isinstance(name, str) for name in names):
        raise own_words("must be the name of a part, or a list of names")
    return names


def _sides(value: object) -> object:
    if not isinstance(value, list) or len(value) != 2:
        raise own_words("must name two sides")
    return value


def _weld_sides(value: object) -> object:
    if isinstance(value, bool) or value not in (1, 2, *WELD_ENDS) or isinstance(value, float):
        near = did_you_mean(value, WELD_ENDS) if isinstance(value, str) else ""
        raise own_words(f"must be 1, 2 or one of {listed(WELD_ENDS)}", near if near.startswith("Did") else "")
    return value


def _rows(value: object) -> object:
    if not isinstance(value, list | tuple) or not value:
        raise own_words("must be a list of one or more positions [y1, y2, ...]")
    return value


Modulus = Annotated[float, Strict(), Field(allow_inf_nan=False, gt=0)]
Force = Annotated[float, Strict(), Field(allow_inf_nan=False)]
PoissonRatio = Annotated[float, Strict(), Field(allow_inf_nan=False, gt=-1, le=0.5)]
# an angle-ply laminate narrows by more than its own stretch (ratios up to about 1.5, from memory), a slip of the
# decimal point gives 3 and more; the thermodynamic limit sqrt(Ex/Ey) cannot be checked, since Ey is not asked for
OrthotropicRatio = Annotated[float, Strict(), Field(allow_inf_nan=False, gt=-2, lt=2)]
PointPair = Annotated[tuple[Number, Number], BeforeValidator(_pair)]
Name = Annotated[str, Strict(), AfterValidator(_text_name)]
Flag = Annotated[bool, Strict()]
Side = Annotated[tuple[str, ...], BeforeValidator(_side)]


class Table(BaseModel):
    """Base of all tables: unknown keys are faults, and nothing is changed after reading."""

    model_config = ConfigDict(extra="forbid", frozen=True)


class HeadTable(Table):
    """The keys above the first table."""

    title: Annotated[str, Strict()] = Field("", description="Give a title for the report.")
    units: Annotated[str, BeforeValidator(_units)] = Field(
        description=f"Give the units of all numbers: one of {listed(UNIT_SYSTEMS)}."
    )


class IsotropicTable(Table):
    """[materials.NAME] with one shear modulus; stresses in the file's unit."""

    E: Modulus = Field(description="Give Young's modulus along the beam.")
    nu: PoissonRatio = Field(description="Give Poisson's ratio, above -1 and at most 0.5; metals have about 0.3.")
    G: Modulus | None = Field(None, description="Give the shear modulus, or leave G out to take E/(2(1+nu)).")
    shear_strength: Modulus | None = Field(None, description="Give the design shear strength, or leave it out.")
    strength: Modulus | None = Field(None, description="Give the design strength, or leave it out.")


class OrthotropicTable(Table):
    """[materials.NAME] with two shear moduli and two ratios, in the axes of the grain; stresses in the file's unit."""

    E: Modulus = Field(description="Give Young's modulus along the beam.")
    Gxy: Modulus = Field(description="An orthotropic material needs Gxy, Gxz, nu_xy and nu_xz.")
    Gxz: Modulus = Field(description="An orthotropic material needs Gxy, Gxz, nu_xy and nu_xz.")
    nu_xy: OrthotropicRatio = Field(description="An orthotropic material needs Gxy, Gxz, nu_xy and nu_xz.")
    nu_xz: OrthotropicRatio = Field(description="An orthotropic material needs Gxy, Gxz, nu_xy and nu_xz.")
    shear_strength: Modulus | None = Field(None, description="Give the design shear strength, or leave it out.")
    strength: Modulus | None = Field(None, description="Give the design strength, or leave it out.")


class PlacementTable(Table):
    """Where a shape goes: after mirror, then rotate about the anchor, the anchor lies on `at`."""

    at: PointPair = Field((0.0, 0.0), description="Give where the anchor of the shape goes.")
    anchor: Anchor | None = Field(None, description="Give the point of the shape that goes to at.")
    rotate: Number = Field(0.0, description="Give the turn in degrees, counter-clockwise.")
    mirror: Literal["y", "z"] | None = Field(
        None, description='"y" swaps left and right, "z" swaps top and bottom; leave it out for neither.'
    )


class HoleTable(PlacementTable):
    """[[parts.holes]] less the numbers of its shape."""


class PartTable(PlacementTable):
    """[[parts]] less the numbers of its shape and less its holes."""

    name: Name = Field(description="Give the part a name of its own.")
    material: Annotated[str, Strict()] = Field(description="Give the name of a [materials.NAME] table.")
    embedded_in: Annotated[str, Strict()] | None = Field(None, description="Give the name of the part it displaces.")
    grain_angle: Number = Field(0.0, description="Give the angle of the grain in degrees.")


class JointTable(Table):
    """What all [[joints]] have."""

    name: Name = Field(description="Give the joint a name of its own.")
    between: Annotated[tuple[Side, Side], BeforeValidator(_sides)] = Field(
        description='Name the parts on either side, for example ["web", "flange"].'
    )
    kind: Annotated[str, Strict()] = Field(description='Write kind = "glue", "contact", "fillet weld" or "fasteners".')


class GlueTable(JointTable):
    """A glue joint; strength in the file's unit of stress."""

    strength: Modulus | None = Field(None, description="Give the design shear stress of the joint, or leave it out.")


class ContactTable(JointTable):
    """A contact joint: faces that lie on each other and carry nothing."""


class WeldTable(JointTable):
    """A fillet weld; lengths and stresses in the file's units."""

    throat: Positive | None = Field(None, description="Give the throat of the weld, or its leg.")
    leg: Positive | None = Field(None, description="Give the leg of the weld, or its throat.")
    sides: Annotated[int | str, BeforeValidator(_weld_sides)] = Field(
        2, description='Write sides = 1, 2, or the welded end: "left", "right", "top" or "bottom".'
    )
    penetration: NotNegative = Field(
        0.0, description="Give how far the weld reaches in between the parts, or leave it out."
    )
    strength: Modulus | None = Field(None, description="Give the design shear stress on the throat, or leave it out.")
    material: Annotated[str, Strict()] | None = Field(
        None, description="Give the name of a [materials.NAME] table, or leave it out for that of the first side."
    )


class FastenersTable(JointTable):
    """Rows of fasteners; lengths and forces in the file's units."""

    rows: Annotated[tuple[Number, ...], BeforeValidator(_rows)] = Field(
        description="Give the position of each row, y, or z where the faces meet along a line steeper than 45 degrees."
    )
    diameter: Positive = Field(description="Give the diameter: the width of the strip that each row holds together.")
    capacity: Annotated[Force, Field(gt=0)] = Field(description="Give the design shear force of one fastener.")
    spacing: Positive | None = Field(None, description="Give the spacing along the beam, or leave it out to be told.")


class CutTable(Table):
    """[[cuts]]."""

    name: Name | None = Field(None, description="Give the cut a name of its own.")
    start: PointPair = Field(alias="from", description="Give the point where the cut starts.")
    end: PointPair = Field(alias="to", description="Give the point where the cut ends.")


class ProbeTable(Table):
    """[[probes]]."""

    name: Name | None = Field(None, description="Give the probe a name of its own.")
    at: PointPair = Field(description="Give the point to read.")


class ActionsTable(Table):
    """[[actions]]; forces and moments in the file's units."""

    name: Name | None = Field(None, description="Give the load case a name of its own.")
    N: Force = Field(0.0, description="Give the axial force, tension positive.")
    Vy: Force = Field(0.0, description="Give the shear force along y.")
    Vz: Force = Field(0.0, description="Give the shear force along z.")
    T: Force = Field(0.0, description="Give the torque, positive from y to z.")
    My: Force = Field(0.0, description="Give the moment that stretches the +z side.")
    Mz: Force = Field(0.0, description="Give the moment that stretches the -y side.")
    load_point: Annotated[LoadPoint | tuple[Number, Number] | None, BeforeValidator(_load_point)] = Field(
        None, description="Say where Vy and Vz act, or leave it out for the shear centre."
    )


class SolveTable(Table):
    """[solve]."""

    accuracy: Annotated[float, Strict(), Field(gt=0, lt=1)] = Field(
        0.01, description="Give the relative energy error to reach, for example 0.01."
    )
    order: Annotated[int, Strict(), Field(ge=1, le=5)] | None = Field(
        None, description="Give the polynomial degree of the triangles, 1 to 5."
    )
    nu_effect: Flag = Field(True, description="false leaves Poisson's ratio out of the in-plane terms.")
    mesh_file: Annotated[str, Strict()] | None = Field(
        None, description="Give where to keep the mesh, a .msh or .vtu seen from the section file."
    )
    corner_distance: Annotated[float, Strict(), Field(allow_inf_nan=False, gt=0)] | None = Field(
        None, description="Give the distance from a sharp corner at which stresses are read."
    )
    try_radius: Annotated[float, Strict(), Field(allow_inf_nan=False, gt=0)] | None = Field(
        None, description="Give the root radius to try in all sharp re-entrant corners."
    )
