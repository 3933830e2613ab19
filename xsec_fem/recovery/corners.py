"""Corners of the free boundary where the stress grows without limit, found on the mesh.

A corner is listed when its stress exponent lambda - 1 is below -0.01 (at a tenth of the wall the stress there is then more than
2 % above its surroundings): re-entrant corners of one material from about 182 deg up, and ends of lines between materials.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.corner_exponent import Sector, wedge_exponent

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

SHARE_OF_WALL = 0.1  # distance from a corner at which stresses are read, as a share of the thinner adjoining wall
_WEAKEST = -0.01  # exponents above this are not listed (module docstring)
_SMOOTH_DEG = 5.0  # a free boundary that bends less than this at a node is a facet or a curve, not a corner

# directions in the reference triangle from a corner along its leaving edge (to the next corner) and its arriving edge
_LEAVING = np.array([[1.0, 0.0], [-1.0, 1.0], [0.0, -1.0]])
_ARRIVING = np.array([[0.0, 1.0], [-1.0, 0.0], [1.0, -1.0]])
_CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


@dataclass(frozen=True)
class Corner:
    """A singular corner at (y, z) [mm].

    Attributes
    ----------
    y, z : place in the file's axes.
    angle_deg : angle of the material around it.
    exponent : stress exponent lambda - 1, negative.
    parts : names of the parts that meet there.
    wall : thickness of the thinner adjoining wall, or the distance of the nearest other such corner when smaller.
    distance : stresses nearer than this to the corner are not reported as stresses.
    sectors : the materials around it, counter-clockwise.
    part : index of the first part in the mesh.
    """

    y: float
    z: float
    angle_deg: float
    exponent: float
    parts: tuple[str, ...]
    wall: float
    distance: float
    sectors: tuple[Sector, ...]
    part: int

    @property
    def directions(self) -> tuple[float, float]:
        """(start, end) of the material, counter-clockwise from +y [rad]."""
        return self.sectors[0].start, self.sectors[-1].end


def _sector_directions(mesh: Mesh) -> tuple[FloatArray, FloatArray]:
    """(M, 3) direction of the leaving edge at each corner, and the angle to the arriving edge, in (0, 2 pi) [rad]."""
    gradients = mesh.element.gradients(_CORNERS)
    jacobian = np.einsum("cnr,mnd->mcdr", gradients, mesh.nodes[mesh.triangles])
    leaving = np.einsum("mcdr,cr->mcd", jacobian, _LEAVING)
    arriving = np.einsum("mcdr,cr->mcd", jacobian, _ARRIVING)
    start = np.arctan2(leaving[..., 1], leaving[..., 0])
    end = np.arctan2(arriving[..., 1], arriving[..., 0])
    return start, (end - start) % (2 * np.pi)


def _candidates(mesh: Mesh, edges: Edges, angles: FloatArray) -> IntArray:
    """Nodes of the free boundary that turn inward, or where parts of different stiffness may meet."""
    on_boundary = np.unique(edges.corners[edges.free])
    corners = mesh.triangles[:, :3]
    total = np.bincount(corners.ravel(), angles.ravel(), minlength=len(mesh.nodes))
    low, high = np.full(len(mesh.nodes), len(mesh.part_names)), np.full(len(mesh.nodes), -1)
    part = np.repeat(mesh.part_of, 3)
    np.minimum.at(low, corners.ravel(), part)
    np.maximum.at(high, corners.ravel(), part)
    turns = total[on_boundary] > np.pi + np.radians(_SMOOTH_DEG)
    chosen: IntArray = on_boundary[turns | (low[on_boundary] < high[on_boundary])]
    return chosen


def _wall(place: FloatArray, directions: tuple[float, float], segments: FloatArray) -> float:
    """Smaller of the two depths of material behind a corner's sides, along their inward normals [mm].

    segments : (K, 2, 2) the free edges' ends. Infinite when a ray meets nothing (never inside a closed section).
    """
    normals = np.array([directions[0] + np.pi / 2, directions[1] - np.pi / 2])
    rays = np.stack([np.cos(normals), np.sin(normals)], axis=1)
    a, side = segments[:, 0] - place, segments[:, 1] - segments[:, 0]
    depth = np.inf
    for ray in rays:
        det = ray[0] * side[:, 1] - ray[1] * side[:, 0]
        with np.errstate(divide="ignore", invalid="ignore"):
            along = (a[:, 0] * side[:, 1] - a[:, 1] * side[:, 0]) / det
            share = (a[:, 0] * ray[1] - a[:, 1] * ray[0]) / det
        size = np.abs(side).max(axis=1)
        hit = along[(share > -1e-9) & (share < 1 + 1e-9) & (along > 1e-6 * size)]
        depth = min(depth, float(hit.min())) if len(hit) else depth
    return depth


def find_corners(mesh: Mesh, edges: Edges, G: FloatArray, distance: float | None = None) -> tuple[Corner, ...]:
    """Return the singular corners of the free boundary, sorted by place; G (P, 2, 2) per part [MPa].

    `distance` [mm] is where stresses beside a corner are read; a tenth of the thinner adjoining wall when None.
    Source of the exponents: xsec_fem.theory.corner_exponent.
    """
    start, angle = _sector_directions(mesh)
    segments = mesh.nodes[edges.corners[edges.free]]
    free_edge = np.zeros(len(edges.corners), bool)
    free_edge[edges.free] = True
    leaves_free = free_edge[edges.of_triangle]
    flat = mesh.triangles[:, :3].ravel()
    found = []
    for node in _candidates(mesh, edges, angle):
        uses = np.flatnonzero(flat == node)
        for first in uses[leaves_free.ravel()[uses]]:
            corner = _corner_of_fan(mesh, G, (start, angle), _fan(mesh, edges, int(first)), segments)
            if corner is not None:
                found.append(corner)
    found = _apart(found) if distance is None else [replace(corner, distance=distance) for corner in found]
    return tuple(sorted(found, key=lambda corner: (corner.y, corner.z)))


def _apart(corners: list[Corner]) -> list[Corner]:
    """Corners nearer to each other than their walls are thick (root and toe of a weld) are read within that distance."""
    places = np.array([(corner.y, corner.z) for corner in corners]).reshape(-1, 2)
    result = []
    for corner in corners:
        away = np.hypot(*(places - (corner.y, corner.z)).T)
        wall = min([corner.wall, *away[away > 0].tolist()])
        result.append(replace(corner, wall=wall, distance=SHARE_OF_WALL * wall))
    return result


def corner_mask(places: FloatArray, corners: Sequence[Corner]) -> npt.NDArray[np.bool_]:
    """Return True, shape (...), for places (..., 2) at least the stated distance away from every singular corner [mm]."""
    clear = np.ones(places.shape[:-1], bool)
    for corner in corners:
        clear &= np.hypot(places[..., 0] - corner.y, places[..., 1] - corner.z) >= corner.distance
    return clear


def _fan(mesh: Mesh, edges: Edges, first: int) -> list[tuple[int, int]]:
    """(triangle, corner) pairs around a node, counter-clockwise, from one that leaves along a free edge to the other side."""
    triangle, corner = divmod(first, 3)
    node = mesh.triangles[triangle, corner]
    fan = [(triangle, corner)]
    while True:
        edge = edges.of_triangle[triangle, (corner + 2) % 3]  # the arriving edge
        sides = edges.triangles[edge]
        following = sides[1] if sides[0] == triangle else sides[0]
        if following < 0:
            return fan
        triangle = int(following)
        corner = int(np.flatnonzero(mesh.triangles[triangle, :3] == node)[0])
        fan.append((triangle, corner))


def _corner_of_fan(
    mesh: Mesh, G: FloatArray, sectors: tuple[FloatArray, FloatArray], fan: list[tuple[int, int]], segments: FloatArray
) -> Corner | None:
    """The corner of one fan of triangles, or None when it is not singular."""
    start, angle = sectors
    wedge: list[Sector] = []
    parts: list[str] = []
    direction = first = float(start[fan[0]])
    for triangle, corner in fan:
        part = mesh.part_of[triangle]
        wedge.append(Sector(direction, direction + float(angle[triangle, corner]), G[part]))
        direction = wedge[-1].end
        if mesh.part_names[part] not in parts:
            parts.append(mesh.part_names[part])
    if len(
        {G[mesh.part_of[triangle]].tobytes() for triangle, _ in fan}
    ) == 1 and direction - first < np.pi + np.radians(_SMOOTH_DEG):
        return None
    exponent = wedge_exponent(wedge) - 1.0
    if exponent > _WEAKEST:
        return None
    place = mesh.nodes[mesh.triangles[fan[0]]]
    wall = _wall(place, (first, direction), segments)
    return Corner(
        float(place[0]), float(place[1]), float(np.degrees(direction - first)), exponent, tuple(parts), wall,
        SHARE_OF_WALL * wall, tuple(wedge), int(mesh.part_of[fan[0][0]]),
    )  # fmt: skip
