"""Where a joint carries: the edges of the mesh that its flow crosses, bond by bond, and the points where its stress is read."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edge_integrals import edge_lengths, edge_nodes
from xsec_fem.fem.edges import Edges, edges_between
from xsec_fem.fem.locate import find_triangles
from xsec_fem.fem.strip_edges import strip_edges
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Bond, Joint
from xsec_fem.recovery.corners import Corner
from xsec_fem.recovery.stress_field import UnitFields

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

_SAMPLES = 33  # points along a throat


@dataclass(frozen=True)
class BondLine:
    """One bond of a joint on the mesh.

    Attributes
    ----------
    name : "bead 1", "row y = 70"; the joint's own name when it is one line.
    at : (y, z) its middle [mm].
    edges : (K,) edges of the mesh between the joint's first side and the rest that belong to it.
    width : over which the flow is spread: length of a glue line or strip, throat of a bead [mm].
    places : (S, 2) where the stress across is read [mm].
    across : (S, 3) tau . n there for unit Vy, Vz and T [MPa per N, MPa per N mm], n from the first side to the second.
    root_distance : from the root of a bead to the first of these places [mm]; 0 for others.
    """

    name: str
    at: Point
    edges: IntArray
    width: float
    places: FloatArray
    across: FloatArray
    root_distance: float = 0.0


def bond_lines(
    joint: Joint, fields: UnitFields, edges: Edges, inside: npt.NDArray[np.bool_], corners: Sequence[Corner]
) -> list[BondLine]:
    """Return the bonds of a joint, arrays shaped as in BondLine [mm]; none for contact, which has no bonds.

    `inside` (M,) marks the triangles of its first side. Raises ValueError when its sides share no edge, or when faying faces
    that should be a slit are bonded in the mesh.
    """
    mesh = fields.part_nodes.mesh
    faying = edges_between(mesh, edges, joint.first, joint.second)
    if joint.kind == "glue":
        if not len(faying):
            raise ValueError(
                f"joint {joint.name!r}: its sides {joint.first} and {joint.second} share no edge of the mesh"
            )
        return [_glue_line(joint, fields, edges, faying, inside)]
    lines = [_bond_line(joint, bond, fields, edges, corners) for bond in joint.bonds]
    carrying = np.concatenate([line.edges for line in lines]) if lines else np.zeros(0, np.int64)
    bonded = np.setdiff1d(faying, carrying)
    if len(bonded):
        y, z = mesh.nodes[edges.corners[bonded[0]]].mean(axis=0)
        raise ValueError(f"joint {joint.name!r}: the mesh is not slit along it, at ({y:.6g}, {z:.6g})")
    return lines


def _glue_line(
    joint: Joint, fields: UnitFields, edges: Edges, own: IntArray, inside: npt.NDArray[np.bool_]
) -> BondLine:
    """The whole line; the stress at its nodes is the mean of both sides'."""
    numbering, mesh = fields.part_nodes, fields.part_nodes.mesh
    sides = edges.triangles[own]
    swap = ~inside[sides[:, 0]]
    inner, outer = np.where(swap, sides[:, 1], sides[:, 0]), np.where(swap, sides[:, 0], sides[:, 1])
    nodes, normals = edge_nodes(mesh, edges, own, of=inner, with_normals=True)
    pairs = [
        _pair_numbers(numbering.triangles, mesh.triangles, triangles, nodes).ravel() for triangles in (inner, outer)
    ]
    tau = fields.tau[np.stack(pairs)].mean(axis=0)
    lengths = edge_lengths(mesh, edges, own)
    middle = mesh.nodes[edges.corners[own]].mean(axis=1)
    at = (lengths @ middle) / lengths.sum()
    return BondLine(
        joint.name, (float(at[0]), float(at[1])), own, float(lengths.sum()), numbering.positions[pairs[0]],
        np.einsum("skd,sd->sk", tau, normals.reshape(-1, 2)),
    )  # fmt: skip


def _pair_numbers(pairs: IntArray, nodes: IntArray, triangles: IntArray, wanted: IntArray) -> IntArray:
    """Pair number of each wanted node (K, p+1) inside its triangle (K,)."""
    place = np.argmax(nodes[triangles][:, None, :] == wanted[:, :, None], axis=2)
    return np.asarray(np.take_along_axis(pairs[triangles], place, axis=1))


def _bond_line(joint: Joint, bond: Bond, fields: UnitFields, edges: Edges, corners: Sequence[Corner]) -> BondLine:
    mesh = fields.part_nodes.mesh
    own = np.zeros(0, np.int64)
    if bond.strip is not None:
        own = strip_edges(mesh, edges, edges_between(mesh, edges, joint.first, joint.second), bond.strip)
    if bond.bead is None or bond.throat is None:
        nowhere = np.zeros((0, 2)), np.zeros((0, 3))
        return BondLine(bond.name, _middle(bond.strip), own, float(edge_lengths(mesh, edges, own).sum()), *nowhere)
    fusion = edges_between(mesh, edges, joint.first, (bond.bead,))
    if not len(fusion):
        raise ValueError(f"joint {joint.name!r}: {bond.bead!r} shares no edge of the mesh with {joint.first}")
    return _throat_line(bond, bond.throat, fields, edges, np.concatenate([own, fusion]), fusion, corners)


def _throat_line(
    bond: Bond, throat: tuple[Point, Point], fields: UnitFields, edges: Edges, own: IntArray, fusion: IntArray,
    corners: Sequence[Corner],
) -> BondLine:  # fmt: skip
    """The throat from the root to the surface, read from the stated distance of the root on."""
    mesh = fields.part_nodes.mesh
    root, step = np.array(throat[0]), np.subtract(throat[1], throat[0])
    length = float(np.hypot(*step))
    normal = np.array([step[1], -step[0]]) / length
    if normal @ (mesh.nodes[edges.corners[fusion]].mean(axis=(0, 1)) - root) > 0:  # out of the first side
        normal = -normal
    near = [c.distance for c in corners if np.hypot(c.y - root[0], c.z - root[1]) < 1e-6 * length]
    start = min(max(near, default=0.0), length)
    places = root + np.linspace(start / length, 1.0, _SAMPLES)[:, None] * step
    found = [_unit_stress(fields, place) for place in places]
    across = np.array([tau @ normal for tau in found if tau is not None]).reshape(-1, 3)
    kept = places[[tau is not None for tau in found]]
    return BondLine(bond.name, _middle(throat), own, length, kept, across, start)


def _unit_stress(fields: UnitFields, place: FloatArray) -> FloatArray | None:
    """(3, 2) stress under unit actions at a point, the mean of the triangles that hold it; None just outside."""
    mesh = fields.part_nodes.mesh
    elements, reference = find_triangles(mesh, (float(place[0]), float(place[1])))
    if not len(elements):
        return None
    values, nodes = mesh.element.values(reference), fields.part_nodes.triangles[elements]
    result: FloatArray = np.einsum("mn,mnkd->kd", values, fields.tau[nodes]) / len(elements)
    return result


def _middle(ends: tuple[Point, Point] | None) -> Point:
    if ends is None:
        raise ValueError(f"a bond needs a strip or a bead (got {ends})")
    (y0, z0), (y1, z1) = ends
    return ((y0 + y1) / 2, (z0 + z1) / 2)
