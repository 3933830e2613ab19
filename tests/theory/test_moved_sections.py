"""Turning, mirroring, shifting and scaling a section moves every result as it must; relabelling its parts changes nothing.

The triangles are the same ones in another place, so that only round-off differs.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests import structured
from tests.chain import Solved
from tests.theory.strategies import RandomSection, orders, radii, random_mesh, random_sections, seeds
from xsec_fem.theory.moduli import Moduli

# condition number 1e4 to 1e5 times round-off; the elimination order changes with the section's place, so nothing cancels
ROUND_OFF = 5e-11

any_section = settings(deadline=None, max_examples=20)


def rotation(degrees: float) -> np.ndarray:
    c, s = np.cos(np.radians(degrees)), np.sin(np.radians(degrees))
    return np.array([[c, -s], [s, c]])


def six_by_six(plane: np.ndarray, axial: float = 1.0) -> np.ndarray:
    """How (N, Vy, Vz, T, My, Mz) change when the plane does; moments are axial vectors."""
    block = np.eye(6)
    block[1:3, 1:3] = plane
    block[3, 3] = axial
    block[4:, 4:] = axial * plane
    return block


def close(found: object, expected: object, size: float | None = None, limit: float = ROUND_OFF) -> None:
    expected = np.asarray(expected)
    np.testing.assert_allclose(found, expected, rtol=0, atol=limit * (np.abs(expected).max() if size is None else size))


def warping_size(section: Solved) -> float:
    """∫E r⁴: omega is a difference of terms of the size r² (on a circle nothing is left of it)."""
    return float(np.trace(section.area.EI) * np.ptp(section.mesh.nodes, axis=0).max() ** 2)


def compare(here: Solved, there: Solved, plane: np.ndarray, axial: float, limit: float = ROUND_OFF) -> None:
    """`there` is `here` with the plane mapped by the orthogonal matrix `plane`."""
    length = np.ptp(here.mesh.nodes, axis=0).max()
    close(there.area.EA, here.area.EA, limit=limit)
    close(there.area.part_areas, here.area.part_areas, limit=limit)
    close(there.area.EI, plane @ here.area.EI @ plane.T, limit=limit)
    close(there.stiffness.GIT, here.stiffness.GIT, limit=limit)
    close(there.stiffness.EIw, here.stiffness.EIw, size=warping_size(here), limit=limit)
    for name in ("shear_centre", "trefftz_centre"):
        close(getattr(there.stiffness, name), plane @ getattr(here.stiffness, name), size=length, limit=limit)
    carry = np.eye(3)
    carry[:2, :2], carry[2, 2] = plane, axial
    close(there.stiffness.flexibility, carry @ here.stiffness.flexibility @ carry.T, limit=limit)
    close(there.stiffness.shear_flexibility, plane @ here.stiffness.shear_flexibility @ plane.T, limit=limit)
    both = six_by_six(plane, axial)
    close(there.six, both @ here.six @ both.T, limit=10 * limit)  # an inverse more


@any_section
@given(random_sections(), st.floats(-180, 180))
def test_turning(random: RandomSection, degrees: float) -> None:
    here = random.solved()
    there = Solved(structured.moved(random.mesh, degrees), random.moduli(turn=degrees))
    plane = rotation(degrees)
    compare(here, there, plane, 1.0)
    close(there.area.centroid, plane @ here.area.centroid, size=1.0)
    # the field of a force turned with the section is the field turned: unit fields mix and turn
    mixed = np.einsum("sjd,jk->skd", here.fields.tau[:, :2], plane.T) @ plane.T
    close(there.fields.tau[:, :2], mixed, limit=100 * ROUND_OFF)  # differentiated: condition times 1/h
    close(there.fields.tau[:, 2], here.fields.tau[:, 2] @ plane.T, limit=100 * ROUND_OFF)


@any_section
@given(random_sections())
def test_mirroring(random: RandomSection) -> None:
    here = random.solved()
    there = Solved(structured.mirrored(random.mesh), random.moduli(mirror=True))
    compare(here, there, np.diag([-1.0, 1.0]), -1.0)


@any_section
@given(random_sections(), st.floats(-50, 50), st.floats(-50, 50))
def test_shifting(random: RandomSection, y: float, z: float) -> None:
    """Coordinates of 50 against sides of 0.3 cost two or three digits."""
    here = random.solved()
    there = Solved(structured.moved(random.mesh, shift=(y, z)), random.moduli())
    limit = 300 * ROUND_OFF
    compare(here, there, np.eye(2), 1.0, limit)
    close(there.area.centroid, here.area.centroid + np.array([y, z]), size=50, limit=1e-13)


@any_section
@given(random_sections(), st.floats(1e-3, 1e3))
def test_scaling(random: RandomSection, scale: float) -> None:
    here = random.solved()
    there = Solved(structured.moved(random.mesh, scale=scale), random.moduli())
    close(there.area.EA, here.area.EA * scale**2)
    close(there.area.EI, here.area.EI * scale**4)
    close(there.stiffness.GIT, here.stiffness.GIT * scale**4)
    close(there.stiffness.EIw, here.stiffness.EIw * scale**6, size=warping_size(here) * scale**6)
    close(there.stiffness.shear_centre, here.stiffness.shear_centre * scale, size=scale)
    close(there.stiffness.trefftz_centre, here.stiffness.trefftz_centre * scale, size=scale)
    close(there.stiffness.shear_flexibility, here.stiffness.shear_flexibility / scale**2)
    powers = np.array([1.0, 1.0, 1 / scale])  # F_TT scales with 1/scale⁴, the coupling with 1/scale³
    close(there.stiffness.flexibility * scale**2 / np.outer(powers, powers), here.stiffness.flexibility)
    close(there.fields.tau[:, :2] * scale**2, here.fields.tau[:, :2], limit=100 * ROUND_OFF)
    close(there.fields.tau[:, 2] * scale**3, here.fields.tau[:, 2], limit=100 * ROUND_OFF)


@any_section
@given(random_sections(), st.floats(1e-3, 1e3))
def test_other_units_of_stress(random: RandomSection, factor: float) -> None:
    """E and G times a factor: stiffnesses times it, stresses and lengths as they were."""
    here = random.solved()
    moduli = random.moduli()
    there = Solved(random.mesh, Moduli(moduli.E * factor, moduli.G * factor, moduli.nu))
    close(there.six / factor, here.six, limit=10 * ROUND_OFF)
    close(there.stiffness.EIw / factor, here.stiffness.EIw, size=warping_size(here))
    close(there.stiffness.shear_centre, here.stiffness.shear_centre, size=1.0)
    close(there.fields.tau, here.fields.tau, limit=100 * ROUND_OFF)
    close(there.fields.sigma, here.fields.sigma, limit=ROUND_OFF)


@any_section
@given(radii, orders, seeds, st.integers(2, 6))
def test_splitting_parts_changes_nothing(spokes: list[float], order: int, seed: int, count: int) -> None:
    """One material in any number of parts, dealt at random: the sums run in the same order, so round-off only."""
    mesh = random_mesh(spokes, 2, order, seed, parts=1)
    parts = np.random.default_rng(seed).integers(0, count, len(mesh.triangles))
    parts[:count] = np.arange(count)
    split = structured.relabelled(mesh, parts, [f"piece {k}" for k in range(count)])
    one = Moduli.isotropic(2.5, 0.3, 0.8)
    many = Moduli(np.repeat(one.E, count), np.repeat(one.G, count, axis=0), np.repeat(one.nu, count, axis=0))
    here, there = Solved(mesh, one), Solved(split, many)
    close(there.six, here.six)
    close(there.warping.functions, here.warping.functions)
    close(there.stiffness.trefftz_centre, here.stiffness.trefftz_centre, size=1.0)
    close(there.stiffness.EIw, here.stiffness.EIw, size=warping_size(here))
    assert there.area.part_areas.sum() == pytest.approx(here.area.part_areas[0], rel=1e-13)


@any_section
@given(random_sections())
def test_materials_that_are_alike_may_swap_names(random: RandomSection) -> None:
    """Numbering the parts the other way round, with their constants, changes nothing."""
    here = random.solved()
    swapped = structured.relabelled(random.mesh, 1 - random.mesh.part_of, random.mesh.part_names[::-1])
    moduli = random.moduli()
    there = Solved(swapped, Moduli(moduli.E[::-1], moduli.G[::-1], moduli.nu[::-1]))
    close(there.six, here.six, limit=10 * ROUND_OFF)
    close(there.area.part_areas[::-1], here.area.part_areas)
