"""Sections built straight from the dataclasses, and measures of a mesh that do not use the mesher."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from pathlib import Path

import numpy as np

from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import triangle_rule
from xsec_fem.model.outline import Arc, EllipseArc, Face, Line, Loop, Point, polygon_loop
from xsec_fem.model.section import Joint, MeshRegion, Part, Section, SolveSettings
from xsec_fem.units import UNIT_SYSTEMS

N_MM = UNIT_SYSTEMS["N mm"]


def section(faces: Mapping[str, Face], embedded: Mapping[str, str] | None = None, **more) -> Section:
    """One part per face, all of one material."""
    inside = embedded or {}
    parts = tuple(Part(name, "steel", "drawn", face=face, embedded_in=inside.get(name)) for name, face in faces.items())
    return Section("test", N_MM, {}, parts, **more)


def file_section(path: Path, regions: Mapping[str, str | int | None], scale: float = 1.0, order=None) -> Section:
    """One part per region of a file."""
    parts = tuple(
        Part(name, "steel", "file", mesh_region=MeshRegion(path, region, scale)) for name, region in regions.items()
    )
    return Section("test", N_MM, {}, parts, solve=SolveSettings(order=order), path=Path("test.toml"))


def rectangle(y0: float, z0: float, y1: float, z1: float) -> Face:
    return Face(polygon_loop([(y0, z0), (y1, z0), (y1, z1), (y0, z1)]))


def polygon(points: Sequence[Point], *holes: Sequence[Point]) -> Face:
    return Face(polygon_loop(points), tuple(polygon_loop(hole) for hole in holes))


def circle(radius: float, centre: Point = (0.0, 0.0), start: float = 0.0) -> Loop:
    """Two half circles; `start` is the angle of their common points [rad]."""
    c, s = radius * math.cos(start), radius * math.sin(start)
    a, b = (centre[0] + c, centre[1] + s), (centre[0] - c, centre[1] - s)
    return Loop((Arc(a, b, centre, True), Arc(b, a, centre, True)))


def ellipse(half_width: float, half_height: float) -> Loop:
    a, b = (half_width, 0.0), (-half_width, 0.0)
    ratio = half_height / half_width
    return Loop((EllipseArc(a, b, (0.0, 0.0), a, ratio, True), EllipseArc(b, a, (0.0, 0.0), a, ratio, True)))


def i_section(depth: float, width: float, flange: float, web: float, radius: float) -> Face:
    """Rolled I section about its centre, root radii as arcs."""
    corner = [
        (width / 2, depth / 2),
        (width / 2, depth / 2 - flange),
        (web / 2 + radius, depth / 2 - flange),
        (web / 2, depth / 2 - flange - radius),
    ]
    centre = (web / 2 + radius, depth / 2 - flange - radius)
    chain: list[tuple[Point, Point | None]] = []
    for sy, sz in ((1, 1), (1, -1), (-1, -1), (-1, 1)):
        quarter = [(sy * y, sz * z) for y, z in corner]
        arc = (sy * centre[0], sz * centre[1])
        if sy * sz > 0:
            chain += [(quarter[0], None), (quarter[1], None), (quarter[2], arc), (quarter[3], None)]
        else:
            chain += [(quarter[3], arc), (quarter[2], None), (quarter[1], None), (quarter[0], None)]
    points = [point for point, _ in chain]
    segments = [
        Line(start, end) if centre is None else Arc(start, end, centre, True)
        for (start, centre), end in zip(chain, points[1:] + points[:1], strict=True)
    ]
    return Face(Loop(tuple(segments)))


def joint(first: str, second: str, kind: str = "contact") -> Joint:
    return Joint("joint", (first,), (second,), kind)


def triangle_areas(mesh: Mesh) -> np.ndarray:
    """(M,) areas of the curved triangles: det J has degree 2 (p - 1)."""
    rule = triangle_rule(2 * mesh.order)
    gradients = mesh.element.gradients(rule.points)
    jacobian = np.einsum("qnr,mnd->mqdr", gradients, mesh.nodes[mesh.triangles])
    return np.linalg.det(jacobian) @ rule.weights


def part_areas(mesh: Mesh) -> dict[str, float]:
    return dict(
        zip(mesh.part_names, np.bincount(mesh.part_of, triangle_areas(mesh), len(mesh.part_names)), strict=True)
    )


def edge_uses(mesh: Mesh) -> np.ndarray:
    """How many triangles use each edge; an edge is all of its p + 1 nodes."""
    p = mesh.order
    sides = [[0, 1, *range(3, p + 2)], [1, 2, *range(p + 2, 2 * p + 1)], [2, 0, *range(2 * p + 1, 3 * p)]]
    rows = np.sort(np.vstack([mesh.triangles[:, side] for side in sides]), axis=1)
    return np.unique(rows, axis=0, return_counts=True)[1]


def boundary_length(mesh: Mesh) -> float:
    """Length of the straight chords of all edges that only one triangle uses."""
    sides = np.sort(mesh.triangles[:, [[0, 1], [1, 2], [2, 0]]].reshape(-1, 2), axis=1)
    ends, used = np.unique(sides, axis=0, return_counts=True)
    (a, b) = ends[used == 1].T
    return float(np.hypot(*(mesh.nodes[a] - mesh.nodes[b]).T).sum())


def smallest_angle(mesh: Mesh) -> float:
    """Smallest angle between the straight sides of any triangle [deg]."""
    corner = mesh.nodes[mesh.triangles[:, :3]]
    ahead, behind = np.roll(corner, -1, axis=1) - corner, np.roll(corner, 1, axis=1) - corner
    cosine = (ahead * behind).sum(-1) / np.linalg.norm(ahead, axis=-1) / np.linalg.norm(behind, axis=-1)
    return float(np.degrees(np.arccos(cosine)).min())
