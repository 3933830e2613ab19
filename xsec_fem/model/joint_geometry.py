"""What joints make of the parts' outlines: weld beads as parts of their own, bonded strips, nodes that the mesh needs."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import TYPE_CHECKING

from xsec_fem.model.fastener_rows import fastener_rows
from xsec_fem.model.faults import FaultList
from xsec_fem.model.faying import MATCH, FayingLine, faying_lines
from xsec_fem.model.flat_parts import Scale, flat_polygon, thick_pieces
from xsec_fem.model.hole_checks import inner_point
from xsec_fem.model.outline import Face, Point
from xsec_fem.model.section import Joint, Part, Section
from xsec_fem.model.weld_beads import weld_beads
from xsec_fem.model.wording import named, quoted

if TYPE_CHECKING:
    from shapely import Polygon


def with_joint_geometry(section: Section, faults: FaultList | None = None) -> Section:
    """Return the section with the beads of its welds among its parts, and every joint's bonds and vertices [mm].

    A section that has them already comes back as it is. Raises InputError when a joint cannot be made as it says; with
    `faults`, notes that there instead.
    """
    found = FaultList(section.path.name if section.path else "", section.units) if faults is None else faults
    planned = _planned(section, found)
    if faults is None:
        found.raise_if_any()
    return planned


def _planned(section: Section, faults: FaultList) -> Section:
    todo = [joint for joint in section.joints if joint.is_slit and not joint.bonds and not joint.vertices]
    faces = [part.face for part in section.parts if part.face is not None]
    if not todo:
        return section
    scale = Scale.of(faces) if faces else None
    parts, joints = {part.name: part for part in section.parts}, []
    for k, joint in enumerate(section.joints):
        place = named(f"joints[{k}]", joint.name)
        if joint not in todo or not _can_be_made(joint, place, parts, faults) or scale is None:
            joints.append(joint)
            continue
        joint, beads = _made(joint, place, parts, scale, faults)
        _check_room(beads, place, parts, scale, faults)
        parts |= {bead.name: bead for bead in beads}
        joints.append(joint)
    return replace(section, parts=tuple(parts.values()), joints=tuple(joints))


def _can_be_made(joint: Joint, place: str, parts: Mapping[str, Part], faults: FaultList) -> bool:
    """False for a joint whose faying line is not known here; a fault unless it is mere contact, which needs none."""
    mine = [parts[name] for name in (*joint.first, *joint.second) if name in parts]
    from_file = [part for part in mine if part.mesh_region is not None]
    if from_file:
        if joint.kind != "contact":
            rule = f"needs drawn parts, but {quoted(from_file[0].name)} comes from a mesh file"
            faults.add(
                place, rule, None, 'Draw the parts here, or put the beads into the file and use kind = "contact".'
            )
        return False
    for inner, outer in ((a, b) for a in mine for b in mine if a.embedded_in == b.name):
        if joint.kind != "contact":
            rule = f"cannot join {quoted(inner.name)} to {quoted(outer.name)}, in which it is embedded"
            faults.add(place, rule, None, f"Cut a hole into {quoted(outer.name)} instead of embedded_in.")
        return False
    return True


def _made(
    joint: Joint, place: str, parts: Mapping[str, Part], scale: Scale, faults: FaultList
) -> tuple[Joint, list[Part]]:
    """The joint with its bonds and vertices, and the parts of its beads."""
    same = MATCH * scale.size
    faces = {name: face for name, part in parts.items() if (face := part.face) is not None}
    lines = faying_lines(faces, joint.first, joint.second, same)
    if not lines and joint.kind != "contact":
        rule = "joins faces that touch along no line or circular arc"
        faults.add(f"{place}: between", rule, None, "Draw the faces that meet with straight lines or circular arcs.")
    vertices = _ends(lines)
    if joint.kind == "fillet weld":
        beads = weld_beads(joint, place, lines, parts, scale, faults)
        vertices += [point for bead in beads for point in bead.vertices]
        made = replace(joint, bonds=tuple(bead.bond for bead in beads), vertices=tuple(vertices))
        return made, [bead.part for bead in beads]
    bonds = fastener_rows(joint, place, lines, scale, faults) if joint.kind == "fasteners" else []
    vertices += [point for bond in bonds for point in bond.strip or ()]
    return replace(joint, bonds=tuple(bonds), vertices=tuple(vertices)), []


def _ends(lines: Sequence[FayingLine]) -> list[Point]:
    return [point for line in lines if line.start != line.end for point in (line.start, line.end)]


def _check_room(beads: Sequence[Part], place: str, parts: Mapping[str, Part], scale: Scale, faults: FaultList) -> None:
    """Note beads that would overlap a part, or a bead of another weld (or of their own)."""
    others = {name: _polygon(part.face, scale) for name, part in parts.items() if part.face is not None}
    for bead in beads:
        if bead.face is None:
            continue
        own = _polygon(bead.face, scale)
        for name, other in others.items():
            common = thick_pieces(own.intersection(other), MATCH * scale.size)
            if common:
                rule = f"has a bead that would overlap {quoted(name)} at {inner_point(common, scale)}"
                faults.add(place, rule, None, "Make the weld smaller, or weld another side.")
        others[bead.name] = own


def _polygon(face: Face, scale: Scale) -> Polygon:
    return flat_polygon(face.outer, face.holes, scale)
