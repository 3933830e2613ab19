"""Which part of the section a joint cuts off, and with which other joints or contacts it shares that cut.

A joint separates the section when nothing else connects its two sides: then V S/I of the separated part is its flow. Otherwise
V S/I of whatever is cut off gives only the sum over all that the cut crosses.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges, connected_bodies, edges_round
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.connections import Connections
from xsec_fem.model.section import Joint

IntArray = npt.NDArray[np.int64]
BoolArray = npt.NDArray[np.bool_]


@dataclass(frozen=True)
class JointSide:
    """The material on the first side of a joint.

    Attributes
    ----------
    inside : (M,) True for its triangles.
    line : (K,) the edges of the mesh between it and the rest.
    shared_with : the other joints and contacts that the line crosses; empty when the joint separates the section.
    """

    inside: BoolArray
    line: IntArray
    shared_with: tuple[str, ...]


def joint_sides(connections: Connections, mesh: Mesh, edges: Edges, joint: Joint) -> list[JointSide]:
    """Return what the joint cuts off: one side when it separates the section, else two candidates.

    Arrays are shaped as in JointSide. The two are what hangs on the first parts, and all that does not hang on the second ones.
    """
    first = _triangles_of(mesh, joint.first)
    second = _triangles_of(mesh, {*joint.second, *connections.beads(joint)})
    sides = []
    for mask in (_grown(mesh, edges, first, second), ~_grown(mesh, edges, second, first)):
        line = edges_round(edges, mask)
        sides.append(JointSide(mask, line, _others(connections, mesh, edges, joint, line)))
        if not sides[-1].shared_with:
            return sides[-1:]
    return sides


def _triangles_of(mesh: Mesh, names: Iterable[str]) -> BoolArray:
    chosen = set(names)
    result: BoolArray = np.array([name in chosen for name in mesh.part_names])[mesh.part_of]
    return result


def _grown(mesh: Mesh, edges: Edges, core: BoolArray, other: BoolArray) -> BoolArray:
    """The core and all that hangs on it alone: what is cut off from `other` without it."""
    body = connected_bodies(mesh, edges, without=edges_round(edges, core))
    result: BoolArray = core | ~np.isin(body, np.unique(body[other]))
    return result


def _others(connections: Connections, mesh: Mesh, edges: Edges, joint: Joint, line: IntArray) -> tuple[str, ...]:
    pairs = np.unique(np.sort(mesh.part_of[edges.triangles[line]], axis=1), axis=0)
    parts = [(mesh.part_names[a], mesh.part_names[b]) for a, b in pairs]
    names = [connections.joint_between(pair) or " | ".join(pair) for pair in parts]
    return tuple(dict.fromkeys(name for name in names if name != joint.name))
