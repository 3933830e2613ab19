"""What the guaranteed bounds cost beside the solution itself, on the same mesh at degree 4: prints ratios, never fails by time.

    pytest -m benchmark -s tests/benchmarks/test_certificate_cost.py

The aim is at most 3.
"""

from pathlib import Path

import pytest

from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.reader import read_section
from xsec_fem.pipeline.adaptive import longest_sides
from xsec_fem.pipeline.solution import solve_mesh
from xsec_fem.pipeline.stopwatch import Stopwatch

pytestmark = pytest.mark.benchmark

MESHES = Path(__file__).parents[2] / "meshes"
REPEATS = 5


@pytest.mark.parametrize("name", ["wide_flange", "five_boards", "closed_tube", "extrusion"])
@pytest.mark.parametrize("finer", [1, 4])
def test_cost_of_bounds(name, finer):
    section = read_section(MESHES / f"{name}.toml")
    mesh = mesh_section(section, 4)
    if finer > 1:
        centres = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)
        mesh = mesh_section(section, 4, SizeField(centres, longest_sides(mesh) / finer))
    ratios = []
    for _ in range(REPEATS):
        watch = Stopwatch()
        solution = solve_mesh(section, mesh, watch)
        primal = sum(seconds for stage, seconds in watch.seconds.items() if stage != "certificate")
        ratios.append(watch.seconds["certificate"] / primal)
    print(
        f"\n{name}: {len(mesh.nodes)} nodes, certificate / solution {sorted(ratios)[REPEATS // 2]:.2f} (median of {REPEATS})"
    )
    assert solution.bounds is not None
