"""The largest stress of each part: met between nodes, kept away from corners, the same on other meshes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
import pytest

from tests import oracles, structured
from tests.chain import Solved, layered, solved
from xsec_fem.recovery.corners import Corner, find_corners
from xsec_fem.recovery.largest import Largest, corner_rings, largest_by_part
from xsec_fem.recovery.stress_field import SectionForces
from xsec_fem.theory.moduli import Moduli


def largest(
    section: Solved, forces: SectionForces, corners: Sequence[Corner] = (), what: str = "tau"
) -> tuple[Largest, ...]:
    rings = corner_rings(section.mesh, corners)
    return largest_by_part(section.fields.combine(forces), corners, rings, what)  # type: ignore[arg-type]


@pytest.mark.parametrize("n", [5, 6, 7])
def test_wide_rectangle_at_the_middle_of_its_sides(n: int) -> None:
    """Odd or even divisions: the place need not be a node."""
    section = solved(structured.rectangle(2.0, 1.0, 2 * n, n, 4), 0.3)
    (top,) = largest(section, SectionForces(Vz=1.0))
    exact = oracles.rectangle_flexure(np.array(1.0), np.array(0.0), 2.0, 1.0, 0.3 / 1.3)[1]
    assert top.value == pytest.approx(exact, rel=3e-4)  # nodal stress of order 4, h = 1/5
    assert (abs(top.y), abs(top.z)) == pytest.approx((1.0, 0.0), abs=0.02)  # flat maximum, divided twelve times a side
    assert top.tau_xz == pytest.approx(top.value, rel=1e-3)
    assert not top.beside_corner


def test_every_part_has_its_own() -> None:
    mesh = structured.grid([-1, 0, 1], [0, 0.25, 0.5, 1], 4, lambda y, z: np.where(z < 0.5, 0, 1), ("soft", "stiff"))
    section = layered(mesh, [Moduli.isotropic(1.0, 0.0), Moduli.isotropic(20.0, 0.0)])
    soft, stiff = largest(section, SectionForces(Vz=1.0))
    assert (soft.part, stiff.part) == ("soft", "stiff")
    heights = np.array([0.0, 0.5, 1.0])
    exact = oracles.layered_flexure(np.linspace(0, 1, 2001), heights, np.array([1.0, 20.0]), 2.0)
    # one triangle across half the depth, read at twelve divisions: the top of a parabola is missed by (1/24)²/(1/2)² at most
    assert exact.max() * (1 - 7e-3) < stiff.value < exact.max() * (1 + 1e-12)
    assert soft.value == pytest.approx(exact[:1001].max(), rel=1e-10)
    assert soft.z == pytest.approx(0.5)


def test_von_mises() -> None:
    """Bending and shear together: sqrt(sigma² + 3 tau²) at the extreme fibre or the neutral axis, whichever is larger."""
    section = solved(structured.rectangle(1.0, 2.0, 2, 4, 4), 0.0)
    (bending,) = largest(section, SectionForces(My=1.0, Vz=0.01), what="von_mises")
    assert abs(bending.z) == pytest.approx(1.0)
    assert bending.value == pytest.approx(6 / 4, rel=1e-10)
    (shear,) = largest(section, SectionForces(My=0.01, Vz=1.0), what="von_mises")
    assert shear.z == pytest.approx(0.0, abs=0.02)
    assert shear.value == pytest.approx(np.sqrt(3) * 1.5 / 2, rel=1e-4)
    assert shear.value == pytest.approx(np.hypot(shear.sigma_x, np.sqrt(3) * np.hypot(shear.tau_xy, shear.tau_xz)))


@pytest.mark.parametrize("forces", [SectionForces(T=1.0), SectionForces(Vy=1.0), SectionForces(Vy=1.0, Vz=-2.0, T=0.5)])
def test_value_beside_a_corner_does_not_depend_on_the_mesh(forces: SectionForces) -> None:
    """The nodes' own largest value grows by 1.26 a halving; the value at the stated distance stays."""
    found, at_nodes = [], []
    for levels in (5, 7):
        section = solved(structured.l_shape(5, 1, 4, 0.5, levels), 0.3)
        corners = find_corners(section.mesh, section.edges, section.moduli.G)
        found.append(largest(section, forces, corners)[0])
        at_nodes.append(section.fields.combine(forces).tau.max())
    assert found[1].value == pytest.approx(found[0].value, rel=2e-3)
    if forces == SectionForces(T=1.0):
        assert found[1].beside_corner
        assert np.hypot(found[1].y - 1, found[1].z - 1) == pytest.approx(0.1, abs=0.02)
        assert at_nodes[1] > 1.3 * at_nodes[0]
    for top in found:
        assert np.hypot(top.y - 1, top.z - 1) >= 0.1 - 1e-9


def test_rings_lie_in_the_material_at_the_stated_distance() -> None:
    section = solved(structured.l_shape(5, 1, 3), 0.3)
    corners = find_corners(section.mesh, section.edges, section.moduli.G)
    rings = corner_rings(section.mesh, corners)
    np.testing.assert_allclose(np.hypot(*(rings.places - 1.0).T), corners[0].distance, rtol=1e-12)
    assert not ((rings.places > 1 + 1e-9).all(axis=1)).any()  # none in the open quarter
    interpolated = np.einsum("kn,knd->kd", rings.values, section.mesh.nodes[section.mesh.triangles[rings.elements]])
    np.testing.assert_allclose(interpolated, rings.places, atol=1e-9)


def test_no_corners_no_rings() -> None:
    rings = corner_rings(structured.rectangle(1, 1, 1, 1, 3), ())
    assert rings.elements.shape == (0,)
    assert rings.values.shape == (0, 10)
    assert rings.places.shape == (0, 2)


def test_a_part_hidden_by_corners_is_read_at_its_nodes() -> None:
    """A sliver all of whose nodes are nearer to a corner than its distance still gets a value."""
    section = solved(structured.l_shape(5, 1, 2), 0.3)
    (found,) = find_corners(section.mesh, section.edges, section.moduli.G)
    huge = replace(found, distance=10.0)
    (top,) = largest(section, SectionForces(Vz=1.0), (huge,))
    assert top.value == pytest.approx(section.fields.combine(SectionForces(Vz=1.0)).tau.max())
