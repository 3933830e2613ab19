"""Meshes refined until the guaranteed energy error is small enough: solve, mark, remesh.

The triangles whose squared indicators add up to a given share of the total are marked (W. Doerfler, A convergent adaptive
algorithm for Poisson's equation, SIAM J. Numer. Anal. 33, 1996). A marked triangle's size is lowered to where its indicator,
of order h^(p+1) where the field is smooth and h^lambda at a singular corner, falls to its share of the aim.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.front import make_mesh, refinable
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.section import Section
from xsec_fem.pipeline.solution import Solution, solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch
from xsec_fem.results import MeshStep

FloatArray = npt.NDArray[np.float64]

NODE_BUDGET = 60_000  # about ten seconds and 500 MB on a laptop
MAX_STEPS = 12
_BULK = 0.9  # share of the squared error that the marked triangles carry
_AIM = 0.7  # of the accuracy: leaves room for sizes that gmsh does not meet exactly
_LEAST, _MOST = 1 / 256, 0.8  # factors by which the size of a marked triangle changes in one step


Progress = Callable[[MeshStep], None]


def solve_adaptively(
    section: Section, watch: Stopwatch, progress: Progress | None = None
) -> tuple[Solution, tuple[MeshStep, ...]]:
    """Solve on finer and finer meshes until the energy error's bound is under [solve] accuracy or the budget is used.

    Returns the last solution and the steps. Meshes from files are solved as they are. Raises as `solve_mesh` and `make_mesh`.
    """
    sizes: SizeField | None = None
    steps: list[MeshStep] = []
    while True:
        with watch.stage("mesh"):
            mesh = make_mesh(section, sizes=sizes)
        solution = solve_mesh(section, mesh, watch)
        if solution.bounds is None:
            return solution, tuple(steps)
        steps.append(mesh_step(solution))
        if progress is not None:
            progress(steps[-1])
        done = solution.energy_error <= section.solve.accuracy or len(steps) == MAX_STEPS
        if done or len(mesh.nodes) > NODE_BUDGET or not refinable(section):
            return solution, tuple(steps)
        sizes = refined_sizes(solution, section.solve.accuracy)


def mesh_step(solution: Solution) -> MeshStep:
    """Return the record of one solution with bounds."""
    if solution.bounds is None:
        raise ValueError(f"this solution has no bounds (got {solution.bounds})")
    mesh = solution.mesh
    return MeshStep(len(mesh.nodes), len(mesh.triangles), dict(solution.bounds.certificate.energy_error))


def longest_sides(mesh: Mesh) -> FloatArray:
    """Return the longest side of each triangle, corner to corner, (M,) [mm]."""
    corner = mesh.nodes[mesh.triangles[:, :3]]
    result: FloatArray = np.linalg.norm(corner - np.roll(corner, -1, axis=1), axis=2).max(axis=1)
    return result


def refined_sizes(solution: Solution, accuracy: float) -> SizeField:
    """Return the sizes wished for the next mesh, at the corners of the triangles and at the singular corners [mm].

    Source: Doerfler 1996 (module docstring).
    """
    if solution.bounds is None:
        raise ValueError(f"this solution has no bounds (got {solution.bounds})")
    mesh, squares = solution.mesh, solution.bounds.indicators**2
    excess = squares / (_AIM * accuracy) ** 2  # a problem within the aim does not count
    worst = np.where(excess.sum(axis=0) > 1, excess, 0.0).max(axis=1)
    order = np.argsort(worst)[::-1]
    marked = order[: int(np.searchsorted(np.cumsum(worst[order]), _BULK * worst.sum())) + 1]
    marked = marked[worst[marked] > 0]

    rate, at_corner = _rates(solution)
    share = 1.0 / len(mesh.triangles)
    factor = np.ones(len(mesh.triangles))
    factor[marked] = np.clip((share / worst[marked]) ** (0.5 / rate[marked]), _LEAST, _MOST)
    sizes = longest_sides(mesh) * factor
    vertices = np.unique(mesh.triangles[:, :3])
    wished = np.full(len(mesh.nodes), np.inf)
    smooth = ~at_corner
    np.minimum.at(wished, mesh.triangles[smooth, :3].ravel(), np.repeat(sizes[smooth], 3))
    for node, triangles in _corner_nodes(solution):
        wished[node] = sizes[triangles].min()
    own = np.isinf(wished[vertices])  # nodes of corner triangles only
    fallback = np.full(len(mesh.nodes), np.inf)
    np.minimum.at(fallback, mesh.triangles[:, :3].ravel(), np.repeat(longest_sides(mesh), 3))
    chosen = np.where(own, fallback[vertices], wished[vertices])
    return SizeField(mesh.nodes[vertices], chosen)


def _corner_nodes(solution: Solution) -> list[tuple[int, npt.NDArray[np.int64]]]:
    """Node and triangles of each singular corner."""
    mesh = solution.mesh
    found = []
    for corner in solution.corners:
        near = np.hypot(mesh.nodes[:, 0] - corner.y, mesh.nodes[:, 1] - corner.z)
        node = int(np.argmin(near))
        found.append((node, np.flatnonzero((mesh.triangles[:, :3] == node).any(axis=1))))
    return found


def _rates(solution: Solution) -> tuple[FloatArray, npt.NDArray[np.bool_]]:
    """Order of each triangle's indicator in its size (M,), and whether it touches a singular corner (M,)."""
    mesh = solution.mesh
    rate = np.full(len(mesh.triangles), mesh.order + 1.0)
    touches = np.zeros(len(mesh.triangles), bool)
    for corner, (_, triangles) in zip(solution.corners, _corner_nodes(solution), strict=True):
        rate[triangles] = corner.exponent + 1.0
        touches[triangles] = True
    return rate, touches
