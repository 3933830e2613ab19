"""Corners where the stress grows without limit, found on the mesh: of the free boundary and between materials.

A corner is listed when its stress exponent lambda - 1 is below -0.01 (at a tenth of the wall the stress there is then more
than 2 % above its surroundings): re-entrant corners of one material from 185 deg up, ends of lines between materials on the
boundary, and points inside where such lines bend or meet.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.recovery.corner_fans import fan_round, fan_sectors, sector_directions
from xsec_fem.theory.corner_exponent import Sector, closed_wedge_exponent, wedge_exponent

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]

SHARE_OF_WALL = 0.1  # distance from a corner at which stresses are read, as a share of the thinner adjoining wall
_WEAKEST = -0.01  # exponents above this are not listed (module docstring)
_SMOOTH_DEG = 5.0  # a free boundary that bends less than this at a node is a facet or a curve, not a corner


@dataclass(frozen=True)
class Corner:
    """A singular corner at (y, z) [mm].

    Attributes
    ----------
    y, z : place in the file's axes [mm].
    angle_deg : angle of the material around it [deg].
    exponent : stress exponent lambda - 1, negative [-].
    parts : names of the parts that meet there.
    wall : thickness of the thinner adjoining wall, or the distance of the nearest other such corner when smaller [mm].
    distance : stresses nearer than this to the corner are not reported as stresses [mm].
    sectors : the materials around it, counter-clockwise.
    part : index of the first part in the mesh.
    inside : True when material goes all round the point, bonded; False at a slit's tip.
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
    inside: bool = False

    @property
    def directions(self) -> tuple[float, float]:
        """(start, end) of the material, counter-clockwise from +y [rad]."""
        return self.sectors[0].start, self.sectors[-1].end


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
    """Return the singular corners of the free boundary and of lines between materials, sorted by place.

    G : shear moduli of the parts, shape (P, 2, 2) [MPa]. `distance` [mm] is where stresses beside a corner are read; a tenth
    of the thinner adjoining wall when None. Source of the exponents: Williams 1952 (xsec_fem.theory.corner_exponent).
    """
    directions = sector_directions(mesh)
    found = [*_free_corners(mesh, edges, G, directions), *_inner_corners(mesh, edges, G, directions)]
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


def _free_corners(
    mesh: Mesh, edges: Edges, G: FloatArray, directions: tuple[FloatArray, FloatArray]
) -> Iterator[Corner]:
    """Singular corners of the free boundary; slits and pinched nodes have one fan a side."""
    segments = mesh.nodes[edges.corners[edges.free]]
    free_edge = np.zeros(len(edges.corners), bool)
    free_edge[edges.free] = True
    leaves_free = free_edge[edges.of_triangle].ravel()
    flat = mesh.triangles[:, :3].ravel()
    for node in _candidates(mesh, edges, directions[1]):
        uses = np.flatnonzero(flat == node)
        for first in uses[leaves_free[uses]]:
            fan = fan_round(mesh, edges, int(first))
            sectors, parts = fan_sectors(mesh, G, directions, fan)
            turn = sectors[-1].end - sectors[0].start
            if len(sectors) == 1 and turn < np.pi + np.radians(_SMOOTH_DEG):
                continue
            exponent = wedge_exponent(sectors) - 1.0
            if exponent <= _WEAKEST:
                place = mesh.nodes[node]
                wall = _wall(place, (sectors[0].start, sectors[-1].end), segments)
                yield _corner(mesh, place, exponent, parts, wall, sectors, int(mesh.part_of[fan[0][0]]))


def _inner_corners(
    mesh: Mesh, edges: Edges, G: FloatArray, directions: tuple[FloatArray, FloatArray]
) -> Iterator[Corner]:
    """Singular points inside the section, where materials of different G meet at an angle."""
    flat = mesh.triangles[:, :3].ravel()
    for node in _inner_candidates(mesh, edges, G, directions[1]):
        fan = fan_round(mesh, edges, int(np.flatnonzero(flat == node)[0]))
        sectors, parts = fan_sectors(mesh, G, directions, fan)
        exponent = closed_wedge_exponent(sectors) - 1.0
        if exponent <= _WEAKEST:
            wall = _smallest_part(mesh, parts)
            corner = _corner(mesh, mesh.nodes[node], exponent, parts, wall, sectors, int(mesh.part_of[fan[0][0]]))
            yield replace(corner, inside=True)


def _inner_candidates(mesh: Mesh, edges: Edges, G: FloatArray, angles: FloatArray) -> IntArray:
    """Inner nodes on lines between materials, but for those where a single line passes straight through."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    parts = mesh.part_of[edges.triangles[inner]]
    between: IntArray = inner[(G[parts[:, 0]] != G[parts[:, 1]]).any(axis=(1, 2))]
    if not len(between):
        return between
    size = len(mesh.nodes)
    lines = np.bincount(edges.corners[between].ravel(), minlength=size)
    on_boundary = np.zeros(size, bool)
    on_boundary[edges.corners[edges.free]] = True
    _, kind = np.unique(G.reshape(len(G), 4), axis=0, return_inverse=True)
    first = np.full(size, -1)
    corners = mesh.triangles[:, :3]
    first[corners] = kind.ravel()[mesh.part_of][:, None]  # the material of any one triangle there
    mine = first[corners] == kind.ravel()[mesh.part_of][:, None]
    angle = np.bincount(corners[mine], angles[mine], minlength=size)
    straight = (lines == 2) & (np.abs(angle - np.pi) < np.radians(_SMOOTH_DEG))
    chosen: IntArray = np.flatnonzero((lines > 0) & ~on_boundary & ~straight)
    return chosen


def _smallest_part(mesh: Mesh, parts: Sequence[str]) -> float:
    """Shortest side of the bounding boxes of the named parts [mm]."""
    sides = []
    for name in parts:
        mine = mesh.triangles[mesh.part_of == mesh.part_names.index(name)]
        sides.append(float(np.ptp(mesh.nodes[np.unique(mine)], axis=0).min()))
    return min(sides)


def _corner(
    mesh: Mesh,
    place: FloatArray,
    exponent: float,
    parts: tuple[str, ...],
    wall: float,
    sectors: tuple[Sector, ...],
    part: int,
) -> Corner:
    y, z = place.tolist()
    turn = float(np.degrees(sectors[-1].end - sectors[0].start))
    limit = float(np.ptp(mesh.nodes, axis=0).max())  # a ray that meets nothing leaves the section's size
    return Corner(y, z, turn, exponent, parts, min(wall, limit), SHARE_OF_WALL * min(wall, limit), sectors, part)
