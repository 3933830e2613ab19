"""Meshes of order 1 to 5 made in numpy alone: grids, mapped blocks with exactly curved sides, random polygons.

Every mesh is a list of triangles in a parameter plane and a smooth map of each into the section. All nodes of a triangle, the
inner ones too, are images of the even lattice under that map, so that curved triangles converge at the full order
(M. Lenoir, SIAM J. Numer. Anal. 23, 1986, conditions on the element maps).
"""

from __future__ import annotations

import itertools
from collections.abc import Callable, Sequence

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.reference_triangle import lagrange_triangle, lattice

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
Map = Callable[[FloatArray], FloatArray]  # (Q, 2) of the unit square -> (Q, 2) of the section


def numbered(vertices: IntArray, positions: FloatArray, order: int, part_of: IntArray, names: Sequence[str]) -> Mesh:
    """Number the nodes by vertex, edge and triangle: vertices (M, 3), positions (M, n, 2) of all nodes of each triangle."""
    count, n = positions.shape[:2]
    sides = vertices[:, [[0, 1], [1, 2], [2, 0]]]
    pairs = np.sort(sides, axis=2).reshape(-1, 2)
    _, edge = np.unique(pairs, axis=0, return_inverse=True)
    along = np.arange(order - 1)
    forward = (sides[..., 0] < sides[..., 1])[..., None]
    first_edge = vertices.max() + 1
    on_edges = first_edge + edge.reshape(count, 3)[..., None] * (order - 1) + np.where(forward, along, along[::-1])
    inner = n - 3 * order
    first_inner = on_edges.max() + 1 if order > 1 else first_edge
    own = first_inner + np.arange(count * inner).reshape(count, inner)
    triangles = np.hstack([vertices, on_edges.reshape(count, -1), own]).astype(np.int64)
    nodes = np.zeros((triangles.max() + 1, 2))
    nodes[triangles] = positions
    return Mesh.build(nodes, triangles, part_of, tuple(names), "made by hand")


def straight(
    points: FloatArray,
    triangles: IntArray,
    order: int,
    part_of: IntArray | None = None,
    names: Sequence[str] = ("solid",),
) -> Mesh:
    """A triangulation (M, 3) of points (N, 2) with straight sides, raised to the order."""
    shape = lagrange_triangle(1).values(lattice(order) / order)
    positions = np.einsum("qk,mkd->mqd", shape, np.asarray(points, float)[triangles])
    parts = np.zeros(len(triangles), np.int64) if part_of is None else part_of
    return numbered(np.asarray(triangles, np.int64), positions, order, parts, names)


def _cells(us: FloatArray, vs: FloatArray) -> tuple[FloatArray, IntArray]:
    """Points ((n+1)(m+1), 2) of a grid and two triangles a cell (2nm, 3), the diagonals alternating."""
    points = np.stack(np.meshgrid(us, vs, indexing="ij"), axis=-1).reshape(-1, 2)
    number = np.arange(len(points)).reshape(len(us), len(vs))
    i, j = (k.ravel() for k in np.meshgrid(np.arange(len(us) - 1), np.arange(len(vs) - 1), indexing="ij"))
    a, b, c, d = number[i, j], number[i + 1, j], number[i + 1, j + 1], number[i, j + 1]
    even = ((i + j) % 2 == 0)[:, None]
    first = np.where(even, np.stack([a, b, c], 1), np.stack([a, b, d], 1))
    second = np.where(even, np.stack([a, c, d], 1), np.stack([b, c, d], 1))
    return points, np.stack([first, second], axis=1).reshape(-1, 3)


def grid(
    ys: Sequence[float] | FloatArray,
    zs: Sequence[float] | FloatArray,
    order: int,
    part: Callable[[FloatArray, FloatArray], FloatArray | IntArray] | None = None,
    names: Sequence[str] = ("solid",),
) -> Mesh:
    """Rectangular cells between the lines ys and zs; `part` gives the part of each cell centre, -1 for none."""
    points, triangles = _cells(np.asarray(ys, float), np.asarray(zs, float))
    # triangles come in pairs; the centre of a cell is the mean of its bounding box
    box = points[triangles.reshape(-1, 6)]
    centre = np.repeat((box.min(axis=1) + box.max(axis=1)) / 2, 2, axis=0)
    parts = np.zeros(len(triangles), np.int64) if part is None else np.asarray(part(*centre.T), np.int64)
    return straight(points, triangles[parts >= 0], order, parts[parts >= 0], names)


def graded_lines(start: float, end: float, toward: Sequence[float], coarse: float, levels: int) -> FloatArray:
    """Lines from start to end, at most `coarse` apart, halved `levels` times toward each of the given places."""
    lines = set(np.linspace(start, end, max(2, int(np.ceil((end - start) / coarse)) + 1)).tolist())
    for place in toward:
        for side in (-1.0, 1.0):
            lines |= {place + side * coarse * 0.5**k for k in range(levels)}
        lines.add(place)
    kept = [start]
    smallest = coarse * 0.5 ** (levels + 1)
    for line in sorted(x for x in lines if start < x < end):
        if line - kept[-1] > smallest:
            kept.append(line)
    return np.array([*kept, end])


def rectangle(width: float, depth: float, n: int, m: int, order: int) -> Mesh:
    """A rectangle about the origin with n x m cells."""
    return grid(np.linspace(-width / 2, width / 2, n + 1), np.linspace(-depth / 2, depth / 2, m + 1), order)


def blocks(maps: Sequence[Map], sizes: Sequence[tuple[int, int]], order: int, closed: bool = True) -> Mesh:
    """Mapped unit squares with n x m cells each, joined where their vertices meet (not at all when `closed` is False)."""
    shape = lagrange_triangle(1).values(lattice(order) / order)
    vertices, positions, start = [], [], 0
    corners = []
    for mapping, (n, m) in zip(maps, sizes, strict=True):
        points, triangles = _cells(np.linspace(0, 1, n + 1), np.linspace(0, 1, m + 1))
        lattice_points = np.einsum("qk,mkd->mqd", shape, points[triangles])
        positions.append(mapping(lattice_points.reshape(-1, 2)).reshape(lattice_points.shape))
        corners.append(mapping(points))
        vertices.append(triangles + start)
        start += len(points)
    numbers = np.concatenate(vertices)
    if closed:
        places = np.concatenate(corners)
        size = np.abs(places).max()
        # the odd shift keeps coordinates such as 0 away from the borders of the rounding intervals
        _, same = np.unique(np.floor(places / (1e-7 * size) + 0.37).astype(np.int64), axis=0, return_inverse=True)
        numbers = same.ravel()[numbers]
    stacked = np.concatenate(positions)
    return numbered(numbers, stacked, order, np.zeros(len(stacked), np.int64), ("solid",))


def _arc(centre: tuple[float, float], radius: float, start: float, end: float) -> Callable[[FloatArray], FloatArray]:
    """The arc from angle start to end [rad] as a function of a parameter in [0, 1]."""

    def point(u: FloatArray) -> FloatArray:
        angle = start + u * (end - start)
        return np.column_stack([centre[0] + radius * np.cos(angle), centre[1] + radius * np.sin(angle)])

    return point


def _between(inner: tuple[FloatArray, FloatArray], outer: Callable[[FloatArray], FloatArray]) -> Map:
    """The block between a straight segment and a curve, straight lines across."""

    def mapping(q: FloatArray) -> FloatArray:
        u, v = q[:, :1], q[:, 1:]
        return (1 - v) * (inner[0] + u * (inner[1] - inner[0])) + v * outer(q[:, 0])

    return mapping


def _quadrilateral(corners: FloatArray) -> Map:
    """Bilinear map onto four corners, counter-clockwise."""

    def mapping(q: FloatArray) -> FloatArray:
        u, v = q[:, :1], q[:, 1:]
        lower, upper = (1 - u) * corners[0] + u * corners[1], (1 - u) * corners[3] + u * corners[2]
        return np.asarray((1 - v) * lower + v * upper)

    return mapping


def disc(radius: float, n: int, order: int) -> Mesh:
    """A full circle: a square of n x n cells in the middle and four blocks of n x n around it."""
    corners = 0.5 * radius * np.array([[1, -1], [1, 1], [-1, 1], [-1, -1]]) / np.sqrt(1.2)
    maps = [_quadrilateral(corners)]
    for k in range(4):
        arc = _arc((0, 0), radius, np.pi / 2 * k - np.pi / 4, np.pi / 2 * k + np.pi / 4)
        maps.append(_between((corners[k], corners[(k + 1) % 4]), arc))
    return blocks(maps, [(n, n)] * 5, order)


def ellipse(half_width: float, half_depth: float, n: int, order: int) -> Mesh:
    """An ellipse: the disc of radius 1, stretched."""
    mesh = disc(1.0, n, order)
    return mesh.with_nodes(mesh.nodes * [half_width, half_depth])


def half_disc(radius: float, n: int, order: int) -> Mesh:
    """A half circle y > 0, its diameter on the z axis."""
    s = 0.45 * radius
    corners = np.array([[0, -s], [s, -s], [s, s], [0, s]])
    quarter = np.pi / 4
    maps = [_quadrilateral(corners)]
    for k, (start, end) in enumerate([(-2, -1), (-1, 1), (1, 2)]):
        maps.append(_between((corners[k], corners[k + 1]), _arc((0, 0), radius, start * quarter, end * quarter)))
    return blocks(maps, [(n, 2 * n), (n, n), (2 * n, n), (n, n)], order)


def grooved_disc(radius: float, groove: float, n: int, order: int) -> Mesh:
    """A circle about (radius, 0) with a circular groove of the given radius about the origin, which lies on the circle."""
    half = np.arccos(groove / (2 * radius))
    tip = groove * np.array([np.cos(half), np.sin(half)])
    end = np.arctan2(tip[1], tip[0] - radius)  # of the outer arc, from the circle's centre
    stops = [-end, -0.6 * end, -0.3 * end, 0.3 * end, 0.6 * end, end]
    pieces = [_arc((radius, 0), radius, a, b) for a, b in itertools.pairwise(stops)]
    pieces.append(_arc((0, 0), groove, half, -half))
    inward = 0.6 * (half - np.pi / 2) + 0.4 * (end - np.pi / 2)  # well inside the corner between groove and outer arc
    near = tip + 0.6 * radius * np.array([np.cos(inward), np.sin(inward)])
    centre, flip = np.array([radius, 0.0]), np.array([1.0, -1.0])
    side, far = (centre + share * (pieces[k](np.ones(1))[0] - centre) for share, k in ((0.85, 3), (0.7, 2)))
    corners = np.array([near * flip, side * flip, far * flip, far, side, near])
    maps = [_quadrilateral(corners[[0, 1, 4, 5]]), _quadrilateral(corners[1:5])]
    maps += [_between((corners[k], corners[(k + 1) % 6]), piece) for k, piece in enumerate(pieces)]
    return blocks(maps, [(n, n)] * 8, order)


def ring_sector(
    inner: float, outer: float, angles: tuple[float, float], n: int, m: int, order: int, closed: bool = True
) -> Mesh:
    """A piece of a ring from angle to angle [deg], n cells along and m across; 360 degrees close unless told not to."""
    start, end = np.radians(angles)

    def mapping(q: FloatArray) -> FloatArray:
        angle, r = start + q[:, 0] * (end - start), inner + q[:, 1] * (outer - inner)
        return np.column_stack([r * np.cos(angle), r * np.sin(angle)])

    return blocks([mapping], [(n, m)], order, closed)


def eccentric_ring(outer: float, inner: float, offset: float, n: int, m: int, order: int) -> Mesh:
    """The region between a circle about the origin and a smaller one about (offset, 0)."""

    def mapping(q: FloatArray) -> FloatArray:
        angle, v = 2 * np.pi * q[:, 0], q[:, 1]
        r = inner + v * (outer - inner)
        return np.column_stack([r * np.cos(angle) + (1 - v) * offset, r * np.sin(angle)])

    return blocks([mapping], [(n, m)], order)


def triangle(corners: Sequence[Sequence[float]], n: int, order: int) -> Mesh:
    """A triangle divided evenly into n² triangles."""
    points = lagrange_triangle(1).values(np.array([[i, j] for j in range(n + 1) for i in range(n + 1 - j)]) / n)
    row = [sum(n + 1 - k for k in range(j)) for j in range(n + 1)]
    triangles = []
    for j in range(n):
        for i in range(n - j):
            triangles.append([row[j] + i, row[j] + i + 1, row[j + 1] + i])
            if i < n - j - 1:
                triangles.append([row[j] + i + 1, row[j + 1] + i + 1, row[j + 1] + i])
    return straight(points @ np.asarray(corners, float), np.array(triangles), order)


def star_polygon(radii: Sequence[float], rings: int, order: int, seed: int = 0) -> Mesh:
    """A polygon with a corner at each radius (evenly turned), in rings of triangles with shaken inner points."""
    rng = np.random.default_rng(seed)
    k = len(radii)
    angles = 2 * np.pi * np.arange(k) / k
    corner = np.asarray(radii)[:, None] * np.column_stack([np.cos(angles), np.sin(angles)])
    share = np.arange(1, rings + 1)[:, None] / rings
    points = (share[..., None] * corner).reshape(-1, 2)
    shake = 0.1 / rings * min(radii) * rng.uniform(-1, 1, (k * (rings - 1), 2))
    points[: len(shake)] += shake
    points = np.vstack([[0.0, 0.0], points])
    triangles = []
    for i in range(k):
        following = (i + 1) % k
        triangles.append([0, 1 + i, 1 + following])
        for r in range(rings - 1):
            a, b, c, d = (1 + r * k + i, 1 + r * k + following, 1 + (r + 1) * k + following, 1 + (r + 1) * k + i)
            triangles += [[a, d, c], [a, c, b]] if (i + r) % 2 else [[a, d, b], [d, c, b]]
    return straight(points, np.array(triangles), order)


def convex_polygon(corners: Sequence[Sequence[float]], n: int, order: int) -> Mesh:
    """Triangles from the mean of the corners to each side, each divided evenly into n²."""
    ring = np.asarray(corners, float)
    centre = ring.mean(axis=0)
    pieces = [triangle([centre, ring[k], ring[(k + 1) % len(ring)]], n, 1) for k in range(len(ring))]
    points = np.vstack([piece.nodes for piece in pieces])
    starts = np.cumsum([0, *(len(piece.nodes) for piece in pieces)])
    triangles = np.vstack([piece.triangles + start for piece, start in zip(pieces, starts[:-1], strict=True)])
    size = np.abs(points).max()
    keys = np.floor(points / (1e-7 * size) + 0.37).astype(np.int64)
    _, first, same = np.unique(keys, axis=0, return_index=True, return_inverse=True)
    return straight(points[first], same.ravel()[triangles], order)


def relabelled(mesh: Mesh, part_of: IntArray, names: Sequence[str]) -> Mesh:
    """The same triangles given to other parts."""
    return Mesh(mesh.nodes, mesh.triangles, np.asarray(part_of, np.int64), tuple(names))


def opened(mesh: Mesh, on_slit: Callable[[FloatArray], npt.NDArray[np.bool_]], above: Map) -> Mesh:
    """The mesh with the nodes on a slit doubled: triangles whose centre is `above` take the new ones."""
    slit = np.flatnonzero(on_slit(mesh.nodes))
    twin = np.arange(len(mesh.nodes))
    twin[slit] = len(mesh.nodes) + np.arange(len(slit))
    upper = np.asarray(above(mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)), bool)
    triangles = np.where(upper[:, None], twin[mesh.triangles], mesh.triangles)
    return Mesh.build(np.vstack([mesh.nodes, mesh.nodes[slit]]), triangles, mesh.part_of, mesh.part_names)


def moved(mesh: Mesh, degrees: float = 0.0, scale: float = 1.0, shift: Sequence[float] = (0.0, 0.0)) -> Mesh:
    """The mesh turned counter-clockwise about the origin, then scaled, then shifted."""
    c, s = np.cos(np.radians(degrees)), np.sin(np.radians(degrees))
    return mesh.with_nodes(scale * mesh.nodes @ np.array([[c, s], [-s, c]]) + np.asarray(shift))


def mirrored(mesh: Mesh) -> Mesh:
    """The mesh mirrored at the z axis (y -> -y); triangles are turned round again."""
    return Mesh.build(mesh.nodes * [-1.0, 1.0], mesh.triangles, mesh.part_of, mesh.part_names)


# named sections used by several tests -----------------------------------------------------------------------------


def l_shape(size: float, thickness: float, order: int, coarse: float | None = None, levels: int = 0) -> Mesh:
    """Two legs of equal length, heel at the origin; lines halved toward the re-entrant corner."""
    lines = graded_lines(0.0, size, [thickness], coarse or thickness, levels)
    return grid(lines, lines, order, lambda y, z: np.where((y < thickness) | (z < thickness), 0, -1))


def channel(depth: float, width: float, thickness: float, order: int, levels: int = 0, coarse: float = 0.0) -> Mesh:
    """Web on the z axis (y from 0 to thickness), flanges toward +y, z from 0 to depth."""
    step = coarse or thickness
    ys = graded_lines(0.0, width, [thickness], step, levels)
    zs = graded_lines(0.0, depth, [thickness, depth - thickness], step, levels)
    hollow = (thickness, depth - thickness)
    return grid(ys, zs, order, lambda y, z: np.where((y > thickness) & (z > hollow[0]) & (z < hollow[1]), -1, 0))


def cruciform(size: float, thickness: float, order: int, levels: int = 0) -> Mesh:
    """Two crossed strips, lower left of the bounding box at the origin."""
    edges = ((size - thickness) / 2, (size + thickness) / 2)
    lines = graded_lines(0.0, size, edges, thickness, levels)

    def part(y: FloatArray, z: FloatArray) -> IntArray:
        inside = [(x > edges[0]) & (x < edges[1]) for x in (y, z)]
        return np.where(inside[0] | inside[1], 0, -1)

    return grid(lines, lines, order, part)


def box(size: float, thickness: float, order: int, levels: int = 0) -> Mesh:
    """A square tube about the origin."""
    half, hole = size / 2, size / 2 - thickness
    lines = graded_lines(-half, half, [-hole, hole], thickness, levels)
    return grid(lines, lines, order, lambda y, z: np.where((np.abs(y) < hole) & (np.abs(z) < hole), -1, 0))
