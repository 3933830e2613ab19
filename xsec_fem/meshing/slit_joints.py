"""Joints that are slits in the mesh: the faying edges come apart, but for the strips that stay bonded."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.errors import MeshingError
from xsec_fem.fem.edges import Edges, edges_between, mesh_edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.slits import open_slits
from xsec_fem.fem.strip_edges import strip_edges
from xsec_fem.model.outline import Point
from xsec_fem.model.section import Joint, Section

IntArray = npt.NDArray[np.int64]

_FILLED = (
    1e-3  # share of a strip by which its edges may be longer or shorter: the mesher closes gaps of 1e-6 of the size
)


def joint_vertices(section: Section) -> tuple[Point, ...]:
    """Return the points of the faying lines where the mesh needs a node: ends of slits and of bonded strips [mm]."""
    return tuple(point for joint in section.joints for point in joint.vertices)


def open_joints(section: Section, mesh: Mesh) -> Mesh:
    """Return the mesh with the faying faces of contact, weld and fastener joints parted, nodes of shape (N', 2) with N' >= N [mm].

    A mesh that is open already comes back unchanged. Raises MeshingError when the mesh has no edges that fill a strip, or a
    slit is a single edge long and has no node to double.
    """
    slits = [joint for joint in section.joints if joint.is_slit]
    if not slits:
        return mesh
    edges = mesh_edges(mesh)
    parted = np.concatenate([_slit(mesh, edges, joint) for joint in slits])
    if not len(parted):
        return mesh
    opened = open_slits(mesh, edges, parted)
    _require_open(opened, len(edges.free) + 2 * len(np.unique(parted)))
    return opened


def _slit(mesh: Mesh, edges: Edges, joint: Joint) -> IntArray:
    """Faying edges of one joint that are not bonded."""
    faying = edges_between(mesh, edges, joint.first, joint.second)
    kept = [_bonded(mesh, edges, faying, joint, bond.strip) for bond in joint.bonds if bond.strip is not None]
    return np.setdiff1d(faying, np.concatenate(kept)) if kept else faying


def _bonded(mesh: Mesh, edges: Edges, faying: IntArray, joint: Joint, strip: tuple[Point, Point]) -> IntArray:
    found = strip_edges(mesh, edges, faying, strip)
    ends = mesh.nodes[edges.corners[found]]
    length, width = float(np.hypot(*(ends[:, 1] - ends[:, 0]).T).sum()), float(np.hypot(*np.subtract(*strip)))
    if abs(length - width) > _FILLED * width:
        raise MeshingError(
            f"joint {joint.name!r}: the mesh fills {length:.6g} of the bonded strip of {width:.6g} from {strip[0]} to {strip[1]}"
        )
    return found


def _require_open(mesh: Mesh, expected: int) -> None:
    """A slit one edge long with both ends in the solid has no node to double below order 2."""
    free = len(mesh_edges(mesh).free)
    if free != expected:
        raise MeshingError(
            f"a slit is a single edge of the mesh long and stayed closed ({expected - free} free edges missing): "
            "a finer mesh or a higher order mends it"
        )
