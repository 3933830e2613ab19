"""Random sections for property tests: star-shaped polygons of any order, two unlike anisotropic materials."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from hypothesis import strategies as st

from tests import structured
from tests.chain import Solved
from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.moduli import Moduli, rotated_tensor


@dataclass(frozen=True)
class RandomSection:
    """A mesh in two parts, and the materials' constants in their own axes with a grain angle each [deg]."""

    mesh: Mesh
    E: tuple[float, float]
    G: tuple[tuple[float, float], tuple[float, float]]
    nu: tuple[tuple[float, float], tuple[float, float]]
    grain: tuple[float, float]

    def moduli(self, turn: float = 0.0, mirror: bool = False) -> Moduli:
        """The constants after the section was turned by an angle [deg], or mirrored first."""
        sign = -1 if mirror else 1
        angles = [sign * angle + turn for angle in self.grain]
        return Moduli(
            np.array(self.E),
            np.array([rotated_tensor(*pair, angle) for pair, angle in zip(self.G, angles, strict=True)]),
            np.array([rotated_tensor(*pair, angle) for pair, angle in zip(self.nu, angles, strict=True)]),
        )

    def solved(self) -> Solved:
        return Solved(self.mesh, self.moduli())


def random_mesh(radii: list[float], rings: int, order: int, seed: int, parts: int = 2) -> Mesh:
    """A star polygon whose triangles are dealt to the parts by the angle of their centre."""
    mesh = structured.star_polygon(radii, rings, order, seed)
    centre = mesh.nodes[mesh.triangles[:, :3]].mean(axis=1)
    sector = np.floor((np.arctan2(centre[:, 1], centre[:, 0]) / (2 * np.pi) % 1.0) * parts).astype(int)
    return structured.relabelled(mesh, sector, [f"part {k}" for k in range(parts)])


radii = st.lists(st.floats(0.5, 1.5), min_size=5, max_size=8)
orders = st.integers(1, 5)
seeds = st.integers(0, 10_000)


@st.composite
def random_sections(draw: st.DrawFn) -> RandomSection:
    """Sections whose constants differ by up to a factor of 20; the mesh has 30 to 100 triangles."""
    mesh = random_mesh(draw(radii), draw(st.integers(2, 3)), draw(orders), draw(seeds))

    def pair(low: float, high: float) -> tuple[float, float]:
        return draw(st.floats(low, high)), draw(st.floats(low, high))

    G = (pair(0.2, 4.0), pair(0.2, 4.0))
    ratio = st.just(0.0) | st.floats(0.01, 0.5)
    nu = ((draw(ratio), draw(ratio)), (draw(ratio), draw(ratio)))
    return RandomSection(mesh, pair(0.5, 10.0), G, nu, (draw(st.floats(0, 180)), draw(st.floats(0, 180))))
