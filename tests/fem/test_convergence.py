"""Manufactured solutions: the kernel converges at the order of its elements, p + 1 in L2 and p in the energy norm.

u is given, G is a full tensor, and the load is ∫ q . grad v with q = G grad u, or ∫ s v with s = -div(G grad u) where u has no flux
through the sides. Nothing here knows the theory of beams.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest

from tests import structured
from validation.manufactured import PROBLEMS, TENSOR, Problem, errors, observed_orders, solution, wave, wave_gradient
from xsec_fem.fem.mapping import map_points, physical_gradients
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.quadrature import triangle_rule

# an order observed between two meshes misses the asymptotic one a little: the worst, 5.70 on the disc, is 5.97 one mesh finer
FLAT = 0.35

every_order = pytest.mark.parametrize("order", range(1, 6))


SECTIONS: dict[str, Callable[[int, int], Mesh]] = {
    "turned rectangle": lambda n, p: structured.moved(structured.rectangle(1.5, 1.0, n, n, p), 20, 1.0, (0.3, -0.2)),
    "triangle": lambda n, p: structured.triangle([(0, 0), (1.2, 0.1), (0.3, 1.0)], n, p),
    "quarter ring": lambda n, p: structured.ring_sector(0.5, 1.2, (10, 100), n, n, p),
    "disc": lambda n, p: structured.disc(0.8, max(1, n // 2), p),
    "eccentric ring": lambda n, p: structured.eccentric_ring(1.0, 0.5, 0.2, 6 * n, n, p),
}


@every_order
@pytest.mark.parametrize("section", SECTIONS)
def test_observed_order(section: str, order: int) -> None:
    problem = Problem(section, SECTIONS[section], TENSOR[None], wave, wave_gradient)
    in_l2, in_energy = observed_orders(problem, order, (4, 8))
    assert in_l2 > order + 1 - FLAT
    assert in_energy > order - FLAT


@every_order
def test_observed_order_with_a_kink_between_two_materials(order: int) -> None:
    in_l2, in_energy = observed_orders(PROBLEMS[2], order, (2, 4))
    assert in_l2 > order + 1 - FLAT
    assert in_energy > order - FLAT


@every_order
def test_energy_falls_short_by_the_square_of_the_error(order: int) -> None:
    """Galerkin: a(u, u) - a(u_h, u_h) = a(u - u_h, u - u_h), so constants by energy converge at 2p."""
    mesh = structured.triangle([(0, 0), (1.2, 0.1), (0.3, 1.0)], 2, order)
    u_h = solution(mesh, np.eye(2)[None], flux=wave_gradient)
    rule = triangle_rule(2 * order + 8)
    x, jacobian, det = map_points(mesh, np.arange(len(mesh.triangles)), rule.points, straight=False)
    slopes = physical_gradients(mesh.element, rule.points, u_h[mesh.triangles], jacobian, det)[:, :, 0]
    weights = (rule.weights * det)[..., None]
    exact, found = (weights * wave_gradient(x) ** 2).sum(), (weights * slopes**2).sum()
    # the load is integrated by the kernel's rule of degree 2p, whose own error is below the square of the error
    _, error = errors(mesh, u_h, wave, wave_gradient)
    assert exact - found == pytest.approx(error**2, rel=0.05, abs=1e-12)


@every_order
def test_source_with_natural_sides(order: int) -> None:
    """∫ s v with s = 2 pi² cos cos on the unit square: no flux through the sides."""
    found = []
    for n in (3, 6):
        mesh = structured.moved(structured.rectangle(1, 1, n, n, order), shift=(0.5, 0.5))

        def u(x: np.ndarray) -> np.ndarray:
            return np.asarray(np.cos(np.pi * x[..., 0]) * np.cos(np.pi * x[..., 1]))

        def gradient(x: np.ndarray) -> np.ndarray:
            s, c = np.sin(np.pi * x), np.cos(np.pi * x)
            return -np.pi * np.stack([s[..., 0] * c[..., 1], c[..., 0] * s[..., 1]], axis=-1)

        u_h = solution(mesh, np.eye(2)[None], source=lambda x: 2 * np.pi**2 * u(x))
        found.append(errors(mesh, u_h, u, gradient))
    in_l2, in_energy = np.log2(np.divide(*found))
    assert in_l2 > order + 1 - FLAT
    assert in_energy > order - FLAT


@every_order
def test_source_on_a_ring_with_curved_natural_sides(order: int) -> None:
    """u = cos(pi (r - a)/(b - a)): the flux through both circles is zero; s = -(u'' + u'/r)."""
    a, b = 0.5, 1.0
    k = np.pi / (b - a)

    def u(x: np.ndarray) -> np.ndarray:
        return np.asarray(np.cos(k * (np.hypot(x[..., 0], x[..., 1]) - a)))

    def gradient(x: np.ndarray) -> np.ndarray:
        r = np.hypot(x[..., 0], x[..., 1])
        return (-k * np.sin(k * (r - a)) / r)[..., None] * x

    def source(x: np.ndarray) -> np.ndarray:
        r = np.hypot(x[..., 0], x[..., 1])
        return np.asarray(k**2 * np.cos(k * (r - a)) + k * np.sin(k * (r - a)) / r)

    found = []
    for n in (2, 4):
        mesh = structured.ring_sector(a, b, (0, 360), 8 * n, n, order)
        found.append(errors(mesh, solution(mesh, np.eye(2)[None], source=source), u, gradient))
    in_l2, in_energy = np.log2(np.divide(*found))
    assert in_l2 > order + 1 - FLAT
    assert in_energy > order - FLAT


@every_order
def test_polynomials_of_the_degree_are_exact_on_straight_triangles(order: int) -> None:
    mesh = structured.star_polygon([1.0, 0.7, 1.3, 0.9, 1.1], 2, order)
    powers = [(i, j) for i in range(order + 1) for j in range(order + 1 - i)]

    def u(x: np.ndarray) -> np.ndarray:
        return np.asarray(sum((i + 2 * j + 1) * x[..., 0] ** i * x[..., 1] ** j for i, j in powers))

    def gradient(x: np.ndarray) -> np.ndarray:
        y, z = x[..., 0], x[..., 1]
        by_y = sum((i + 2 * j + 1) * i * y ** max(i - 1, 0) * z**j for i, j in powers)
        by_z = sum((i + 2 * j + 1) * j * y**i * z ** max(j - 1, 0) for i, j in powers)
        return np.stack(np.broadcast_arrays(by_y * np.ones_like(y), by_z * np.ones_like(y)), axis=-1)

    u_h = solution(mesh, TENSOR[None], flux=gradient)
    in_l2, in_energy = errors(mesh, u_h, u, gradient)
    # values up to 200, condition number 1e4
    assert in_l2 < 1e-10
    assert in_energy < 1e-9
