"""Families of cuts: which there are, their columns, and the time they take."""

from __future__ import annotations

import time

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import solved
from tests.recovery.test_cuts import VZ, fields_of
from xsec_fem.elementary.sweep import CSV_COLUMNS, shear_direction, sweep, sweeps
from xsec_fem.recovery.corners import find_corners
from xsec_fem.recovery.solved_fields import SolvedFields
from xsec_fem.recovery.stress_field import SectionForces


def test_families() -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 2, 4, 2)))
    assert [s.name for s in sweeps(fields, VZ, 5)] == ["perpendicular to V", "along z"]
    assert [s.name for s in sweeps(fields, SectionForces(Vy=-2), 5)] == ["perpendicular to V", "along y"]
    assert [s.name for s in sweeps(fields, SectionForces(Vy=1, Vz=1), 5)] == [
        "perpendicular to V",
        "along y",
        "along z",
    ]
    assert [s.name for s in sweeps(fields, SectionForces(T=1), 5)] == ["along y", "along z"]
    with pytest.raises(ValueError, match=r"no shear force to compare with \(Vy = 0\.0, Vz = 0\.0\)"):
        shear_direction(SectionForces(T=1))


def test_columns_of_a_rectangle() -> None:
    fields = fields_of(solved(structured.rectangle(1, 4, 4, 12, 4), nu=0.3))
    cuts = sweeps(fields, VZ, 40)[0]
    z = cuts.levels
    assert z == pytest.approx(np.linspace(-1.95, 1.95, 40))
    assert cuts.elementary == pytest.approx(1.5 / 4 * (1 - z**2 / 4))
    assert cuts.mean == pytest.approx(cuts.elementary, abs=1e-5)
    exact = oracles.rectangle_flexure(np.full(40, 0.5), z, 1, 4, 0.3 / 1.3)
    # at the sides tau_xz is the largest, away from the ends of the depth
    inner = np.abs(z) < 1.5
    assert cuts.largest[inner] == pytest.approx(exact[inner, 1], rel=2e-4)
    assert cuts.largest_across[inner] == pytest.approx(cuts.largest[inner], rel=1e-6)
    assert np.abs(cuts.places[inner, 0]) == pytest.approx(0.5)
    assert cuts.largest_in_part.shape == (40, 1)
    rows = cuts.rows(fields.E[0])
    assert len(rows[0]) == len(CSV_COLUMNS)
    assert rows[7][:4] == ("perpendicular to V", pytest.approx(z[7]), 1, pytest.approx(1.0))
    assert rows[7][4] == pytest.approx(-(4 - z[7] ** 2) / 2)


def test_values_beside_a_singular_corner_are_left_out() -> None:
    chain = solved(structured.l_shape(8, 1, 3, levels=6), nu=0.3)
    corners = find_corners(chain.mesh, chain.edges, chain.moduli.G)
    clear = SolvedFields(chain.warping, chain.stiffness, chain.fields, chain.edges, corners)
    with_corner, without = (sweep(f, VZ, "level", np.array([0.0, 1.0]), 400) for f in (fields_of(chain), clear))
    near = np.abs(without.levels - 1) < 0.03
    assert with_corner.largest[near].max() > 1.2 * without.largest[near].max()
    distance = np.hypot(*(without.places[near] - 1).T)
    assert distance.min() >= corners[0].distance


def test_every_level_meets_the_section() -> None:
    fields = fields_of(solved(structured.channel(10, 6, 1, 2)))
    for cuts in sweeps(fields, VZ, 30):
        assert np.isfinite(cuts.elementary).all()
        assert (cuts.walls >= 1).all()


@pytest.mark.benchmark
def test_time_of_three_families_on_10_000_nodes(capsys) -> None:
    fields = fields_of(solved(structured.rectangle(2, 4, 20, 30, 4), nu=0.3))
    forces = SectionForces(Vy=1, Vz=2, T=0.3)
    sweeps(fields, forces)
    start = time.process_time()
    sweeps(fields, forces)
    with capsys.disabled():
        print(f"{len(fields.mesh.nodes)} nodes, 3 x 200 levels: {time.process_time() - start:.3f} s")
