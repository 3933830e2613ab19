"""What only the drawn parts can tell: holes, overlaps, parts that hold together, joints and probes that hit something.

All tolerances are shares of the section's size or of a part's thickness, so a section in mm and in m is judged alike;
they are stated with their reasons in `flat_parts`, `part_contacts` and `near_gaps`.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import TYPE_CHECKING

from xsec_fem.model.faults import FaultList
from xsec_fem.model.flat_parts import FlatPart, Scale, polygons_in, thick_pieces
from xsec_fem.model.hole_checks import area_text, checked_part, inner_point
from xsec_fem.model.near_gaps import caution_near_gaps
from xsec_fem.model.part_contacts import Contact, Piece, bodies, contacts, nearest, pieces_of
from xsec_fem.model.part_reader import PlacedPart
from xsec_fem.model.section import Joint, Probe
from xsec_fem.model.wording import point_text, quoted, with_unit

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry


def check_geometry(
    placed: Sequence[PlacedPart | None],
    joints: Sequence[tuple[str, Joint]],
    probes: Sequence[tuple[str, Probe]],
    faults: FaultList,
) -> None:
    """Note every geometric fault and caution of the parts; None stands for a part that could not be read.

    What needs all parts (bodies, probes) is left out when one could not be read or lives in a mesh file.
    """
    drawn = [(part, part.part.face) for part in placed if part is not None and part.part.face is not None]
    faces = [face for _, face in drawn if face is not None]
    if not faces:
        return
    scale = Scale.of(faces)
    checked = [checked_part(part, face, scale, faults) for part, face in drawn if face is not None]
    parts = _hosts_cut([part for part in checked if part is not None], scale, faults)
    _check_overlaps(parts, scale, faults)
    pieces = pieces_of(parts, scale)
    met = contacts(pieces, scale.same)
    if pieces and len(parts) == len(placed):
        _check_bodies(parts, pieces, met, faults)
        _check_probes(parts, probes, scale, faults)
    for place, joint in joints:
        _check_joint(place, joint, pieces, met, faults)
    if not faults.faults:
        caution_near_gaps(parts, scale, faults)


def _hosts_cut(parts: list[FlatPart], scale: Scale, faults: FaultList) -> list[FlatPart]:
    """Return the parts with every embedded part cut out of its host."""
    index = {part.name: k for k, part in enumerate(parts)}
    cut = list(parts)
    for part in parts:
        host = part.placed.part.embedded_in
        if host is None or host not in index or host == part.name:
            continue
        solid = cut[index[host]].solid
        place = f"{part.placed.place}: embedded_in"
        if not thick_pieces(part.solid.intersection(solid), scale.same):
            remedy = "Move it into that part, or leave embedded_in out for parts that only touch."
            faults.add(place, f"names {quoted(host)}, but the part does not overlap it", None, remedy)
            continue
        rest = thick_pieces(solid.difference(part.solid), scale.same)
        if rest:
            cut[index[host]] = replace(cut[index[host]], solid=_joined(rest))
        else:
            faults.add(place, f"names {quoted(host)}, but the part leaves nothing of it", None, "Make it smaller.")
    return cut


def _joined(pieces: Sequence[BaseGeometry]) -> BaseGeometry:
    import shapely

    return pieces[0] if len(pieces) == 1 else shapely.MultiPolygon([p for piece in pieces for p in polygons_in(piece)])


def _check_overlaps(parts: list[FlatPart], scale: Scale, faults: FaultList) -> None:
    from shapely import STRtree

    tree = STRtree([part.solid for part in parts])
    for i, part in enumerate(parts):
        for j in sorted(int(k) for k in tree.query(part.solid, predicate="intersects") if k > i):
            common = thick_pieces(part.solid.intersection(parts[j].solid), scale.same)
            if common:
                rule = f"overlap by {area_text(common, faults)} at {inner_point(common, scale)}"
                remedy = "Move one of them, or write embedded_in in the one that displaces the other."
                faults.add(f"parts {quoted(part.name)} and {quoted(parts[j].name)}", rule, None, remedy)


def _check_bodies(
    parts: list[FlatPart], pieces: list[Piece], met: dict[tuple[int, int], Contact], faults: FaultList
) -> None:
    """Note bodies that would bend apart; caution about point contacts within one body."""
    found = bodies(len(pieces), met)
    for (i, j), between in met.items():
        if between.kind == "point" and any(i in body and j in body for body in found):
            who = f"Parts {quoted(pieces[i].name)} and {quoted(pieces[j].name)}"
            where = point_text(between.at, pieces[i].scale.size)
            message = (
                f"{who} meet in a single point at {where}: nothing is carried there, and stresses grow without limit."
            )
            faults.caution("point contact", message)
    # six digits of the area, so that of equal bodies the first is the main one, whatever the round-off
    main = max(found, key=lambda body: (len(body), float(f"{sum(pieces[k].solid.area for k in body):.6g}")))
    loose = [body for body in found if body is not main]
    if all(len(body) == 1 for body in loose):
        for (k,) in loose:
            rest = [piece for j, piece in enumerate(pieces) if j != k]
            _note_loose(parts[pieces[k].part], pieces[k], rest, len(found), faults)
        return
    groups = " | ".join(", ".join(sorted({quoted(pieces[k].name) for k in body})) for body in found)
    rule = f"form {_count(len(found))} bodies that would bend apart: {groups}"
    faults.add("parts", rule, None, "Close the gaps between them; parts in contact are bonded.")


def _note_loose(part: FlatPart, piece: Piece, rest: list[Piece], count: int, faults: FaultList) -> None:
    neighbour = min(rest, key=lambda other: float(other.solid.distance(piece.solid)))
    near = nearest([piece], [neighbour])
    where = point_text(near.at, piece.scale.size)
    if near.kind == "point":
        rule, remedy = f"meets {quoted(neighbour.name)} in a single point only, at {where}", "Let them share an edge."
    else:
        unit = f" {faults.units.length}" if faults.units else ""
        rule = "touches nothing"
        remedy = f"The nearest part, {quoted(neighbour.name)}, is {near.distance:.3g}{unit} away at {where}."
    faults.add(part.placed.place, f"{rule}: {_count(count)} bodies that would bend apart", None, remedy)


def _count(number: int) -> str:
    return {2: "two", 3: "three", 4: "four"}.get(number, str(number))


def _check_probes(parts: list[FlatPart], probes: Sequence[tuple[str, Probe]], scale: Scale, faults: FaultList) -> None:
    from shapely import Point
    from shapely.ops import nearest_points

    for place, probe in probes:
        point = Point(probe.at)
        solid = min((part.solid for part in parts), key=point.distance)
        distance = solid.distance(point)
        if distance > scale.same:
            on = nearest_points(solid, point)[0]
            unit = f" {faults.units.length}" if faults.units else ""
            where = f"{distance:.3g}{unit} away at {point_text((on.x, on.y), scale.size)}"
            rule = f"lies outside the section: its nearest point is {where}"
            faults.add(f"{place}: at", rule, with_unit(probe.at, "at", faults.units), "Move the probe.")


def _check_joint(
    place: str, joint: Joint, pieces: list[Piece], met: dict[tuple[int, int], Contact], faults: FaultList
) -> None:
    """Note a joint whose sides do not touch; caution about parts of a side that touch nothing of the other one."""
    sides = [[k for k, piece in enumerate(pieces) if piece.name in names] for names in (joint.first, joint.second)]
    names = [{pieces[k].name for k in side} for side in sides]
    if names[0] != set(joint.first) or names[1] != set(joint.second) or names[0] & names[1]:
        return
    bonded = {pair for pair, between in met.items() if between.kind == "line"}
    touching = {pair for pair in bonded if any(pair in ((i, j), (j, i)) for i in sides[0] for j in sides[1])}
    if not touching:
        near = nearest([pieces[k] for k in sides[0]], [pieces[k] for k in sides[1]])
        where = point_text(near.at, pieces[0].scale.size)
        unit = f" {faults.units.length}" if faults.units else ""
        apart = f"their nearest faces are {near.distance:.3g}{unit} apart at {where}"
        rule = apart if near.kind == "none" else f"they meet in a single point only, at {where}"
        faults.add(f"{place}: between", f"names sides that do not touch: {rule}", None, "Name parts that share a face.")
        return
    reached = {pieces[k].name for pair in touching for k in pair}
    for idle in [name for name in (*joint.first, *joint.second) if name not in reached]:
        message = f"{place}: {quoted(idle)} touches nothing of the joint's other side, so it carries none of its flow."
        faults.caution("idle joint side", message)
