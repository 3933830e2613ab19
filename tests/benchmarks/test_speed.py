"""Speed against a general-purpose FE library on the same second-order mesh: prints ratios, fails only on wrong numbers.

pytest -m benchmark -s
"""

import json
import os
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest

from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.sizing import SizeField
from xsec_fem.model.reader import parse_section

pytestmark = pytest.mark.benchmark

PROFILE = """
title = "Rolled I, root radius 15"
units = "N mm"
[materials.steel]
E = 210000
nu = 0.3
[[parts]]
name = "profile"
material = "steel"
shape = "i_shape"
depth = 300
width = 150
web = 7.1
flange = 10.7
root_radius = 15
"""
REPEATS = 3  # interleaved; the best of each is compared, since other work on the machine only ever adds time


def run(which: str, path: Path) -> dict:
    environment = {**os.environ, "OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1"}
    command = [sys.executable, "-m", "tests.benchmarks.stages", which, str(path)]
    done = subprocess.run(command, capture_output=True, text=True, check=True, env=environment)
    return json.loads(done.stdout)


@pytest.mark.parametrize("size", [0.78, 0.34], ids=["50k nodes", "250k nodes"])
def test_against_general_purpose_library(tmp_path, size):
    pytest.importorskip("skfem")
    section = parse_section(PROFILE, "profile.toml", tmp_path)
    mesh = mesh_section(section, 2, SizeField(np.zeros((1, 2)), np.array([size])))
    path = tmp_path / "mesh.npz"
    np.savez(path, nodes=mesh.nodes, triangles=mesh.triangles)
    runs = {"ours": [], "reference": []}
    for _ in range(REPEATS):
        for which, list_of_runs in runs.items():
            list_of_runs.append(run(which, path))
    ours, reference = (min(found, key=lambda one: one["total"]) for found in runs.values())
    without = [one["total"] - one["seconds"]["recover"] for one in (ours, reference)]
    print(f"\n{len(mesh.nodes)} nodes, one thread, best of {REPEATS} runs")
    print(f"ours {ours['total']:.2f} s, scikit-fem {reference['total']:.2f} s")
    print(f"ratio {ours['total'] / reference['total']:.2f}, without recovery {without[0] / without[1]:.2f}")
    print(f"peak memory {ours['peak_MB']:.0f} against {reference['peak_MB']:.0f} MB")
    for name, one in (("ours", ours), ("scikit-fem", reference)):
        print(name, {stage: round(value, 3) for stage, value in one["seconds"].items()})
    # the same discrete problem, but for the quadrature on curved sides: IT agrees far beyond its discretisation error of 1e-6
    assert ours["IT"] == pytest.approx(reference["IT"], rel=1e-7)
    assert ours["peak_MB"] <= reference["peak_MB"]
