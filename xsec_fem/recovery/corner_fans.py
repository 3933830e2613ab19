"""The triangles round a node, counter-clockwise, as sectors of material."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.corner_exponent import Sector

FloatArray = npt.NDArray[np.float64]

Fan = list[tuple[int, int]]

# directions in the reference triangle from a corner along its leaving edge (to the next corner) and its arriving edge
_LEAVING = np.array([[1.0, 0.0], [-1.0, 1.0], [0.0, -1.0]])
_ARRIVING = np.array([[0.0, 1.0], [-1.0, 0.0], [1.0, -1.0]])
_CORNERS = np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])


def sector_directions(mesh: Mesh) -> tuple[FloatArray, FloatArray]:
    """Return the direction of the leaving edge at each corner, and the angle to the arriving edge, in (0, 2 pi) [rad].

    Both have the shape (M, 3).
    """
    gradients = mesh.element.gradients(_CORNERS)
    jacobian = np.einsum("cnr,mnd->mcdr", gradients, mesh.nodes[mesh.triangles])
    leaving = np.einsum("mcdr,cr->mcd", jacobian, _LEAVING)
    arriving = np.einsum("mcdr,cr->mcd", jacobian, _ARRIVING)
    start = np.arctan2(leaving[..., 1], leaving[..., 0])
    end = np.arctan2(arriving[..., 1], arriving[..., 0])
    return start, (end - start) % (2 * np.pi)


def fan_round(mesh: Mesh, edges: Edges, first: int) -> Fan:
    """Return the (triangle, corner) pairs round a node, counter-clockwise from `first` = 3 triangle + corner.

    The walk ends at a free edge, or where it comes back to the first triangle.
    """
    triangle, corner = divmod(first, 3)
    node = mesh.triangles[triangle, corner]
    fan = [(triangle, corner)]
    while True:
        edge = edges.of_triangle[triangle, (corner + 2) % 3]  # the arriving edge
        sides = edges.triangles[edge]
        following = sides[1] if sides[0] == triangle else sides[0]
        if following < 0 or following == fan[0][0]:
            return fan
        triangle = int(following)
        corner = int(np.flatnonzero(mesh.triangles[triangle, :3] == node)[0])
        fan.append((triangle, corner))


def fan_sectors(
    mesh: Mesh, G: FloatArray, directions: tuple[FloatArray, FloatArray], fan: Fan
) -> tuple[tuple[Sector, ...], tuple[str, ...]]:
    """Return the sectors of a fan, neighbours of equal G (shape (P, 2, 2) [MPa]) joined, and the names of the parts in it."""
    start, angle = directions
    sectors: list[Sector] = []
    parts: list[str] = []
    direction = float(start[fan[0]])
    for triangle, corner in fan:
        part = int(mesh.part_of[triangle])
        end = direction + float(angle[triangle, corner])
        if sectors and np.array_equal(sectors[-1].G, G[part]):
            sectors[-1] = Sector(sectors[-1].start, end, G[part])
        else:
            sectors.append(Sector(direction, end, G[part]))
        direction = end
        if mesh.part_names[part] not in parts:
            parts.append(mesh.part_names[part])
    return tuple(sectors), tuple(parts)
