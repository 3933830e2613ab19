"""Two general-purpose finite element libraries solve the same Neumann problems on the same triangles, with forms of their own.

Same triangles and same degree make the same discrete solution: constants must agree to round-off times the condition number.
Nothing but the mesh and the moduli is shared; the weak forms are written from the equations, flexure as one problem, not two.
`python -m validation.second_opinions` writes the page `second_opinions.md`.
"""

from __future__ import annotations

import sys
from collections.abc import Callable
from dataclasses import dataclass
from importlib.util import find_spec
from pathlib import Path
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.theory.area_properties import area_properties
from xsec_fem.theory.field_integrals import field_integrals
from xsec_fem.theory.moduli import Moduli, rotated_tensor
from xsec_fem.theory.stiffness import shear_stiffness
from xsec_fem.theory.warping import WarpingProblem, factorise_warping, solve_warping

from . import structured_meshes as made

FloatArray = npt.NDArray[np.float64]
PAGE = Path(__file__).with_name("second_opinions.md")
ORDER = 4


@dataclass(frozen=True)
class Opinion:
    """Torsional rigidity, flexibility (3, 3) of Vy, Vz (zero mean twist) and T, both centres from the centroid (2,), EIw."""

    GIT: float
    flexibility: FloatArray
    shear_centre: FloatArray
    trefftz_centre: FloatArray
    EIw: float

    def furthest(self, other: Opinion) -> float:
        """Return the largest relative difference; of lengths and mixed terms over the sizes they are measured by."""
        own, theirs = np.diag(self.flexibility), other.flexibility
        scale = np.sqrt(np.outer(own, own))
        size = np.sqrt(self.GIT * np.abs(own[:2]).max())  # a length: of a torque over the force that stores as much
        return float(
            max(
                abs(other.GIT / self.GIT - 1),
                np.abs((theirs - self.flexibility) / scale).max(),
                np.abs(other.shear_centre - self.shear_centre).max() / size,
                np.abs(other.trefftz_centre - self.trefftz_centre).max() / size,
                abs(other.EIw / self.EIw - 1),
            )
        )


@dataclass(frozen=True)
class Section:
    """A mesh with straight sides and its moduli."""

    name: str
    mesh: Mesh
    moduli: Moduli


def stacked(materials: list[Moduli]) -> Moduli:
    """Return the constants of several one-part moduli together."""
    return Moduli(*(np.concatenate([getattr(m, name) for m in materials]) for name in ("E", "G", "nu")))


def angle_with_board(order: int) -> Section:
    """An unequal angle with a board of another, anisotropic material on one leg, turned by 17 degrees."""

    def part(y: FloatArray, z: FloatArray) -> Any:
        return np.where(z > 8, 1, np.where((y < 1) | (z < 1.5), 0, -1))

    mesh = made.grid([0, 1, 3, 5], [0, 0.75, 1.5, 4, 6, 8, 9], order, part, ("angle", "board"))
    board = Moduli(np.array([11.0]), rotated_tensor(0.9, 0.2, 40.0)[None], rotated_tensor(0.4, 0.1, 40.0)[None])
    moduli = stacked([Moduli.isotropic(70.0, 0.33), board])
    return Section("angle with an orthotropic board, turned", made.moved(mesh, 17.0, 1.0, (2.0, -1.0)), moduli)


def sections(order: int = ORDER) -> list[Section]:
    """Return the six sections."""
    steel = Moduli.isotropic(2.6, 0.3)

    def layer(y: FloatArray, z: FloatArray) -> Any:
        return np.where(z > 0, 1, 0)

    layers = made.grid(np.linspace(-1, 1, 5), [-1, -0.5, 0, 0.5], order, layer, ("lower", "upper"))
    return [
        angle_with_board(order),
        Section("channel 100 x 50 x 20", made.channel(100.0, 50.0, 20.0, order, 3), steel),
        Section("square tube 100 x 100 x 10", made.box(100.0, 10.0, order, 2), steel),
        Section("equal angle 10 x 10 x 1", made.l_shape(10.0, 1.0, order, 1.0, 4), steel),
        Section("irregular pentagon", made.star_polygon([1.0, 0.7, 1.3, 0.9, 1.1], 3, order), steel),
        Section("two layers, E ratio 5", layers, stacked([Moduli.isotropic(2.0, 0.3), Moduli.isotropic(10.0, 0.3)])),
    ]


def ours(section: Section) -> Opinion:
    """Return what this package says."""
    area = area_properties(section.mesh, section.moduli)
    problem = WarpingProblem(section.mesh, section.moduli, area)
    integrals = field_integrals(solve_warping(problem, factorise_warping(problem)))
    s = shear_stiffness(area, integrals)
    return Opinion(s.GIT, s.flexibility, s.shear_centre, s.trefftz_centre, s.EIw)


# --- scikit-fem -------------------------------------------------------------------------------------------------------


def scikit_fem(section: Section) -> Opinion:
    """Return what scikit-fem says, on the same vertices; degrees 1 to 4."""
    import skfem

    mesh, moduli = section.mesh, section.moduli
    vertex, renumbered = np.unique(mesh.triangles[:, :3], return_inverse=True)
    corners = renumbered.reshape(-1, 3).T.copy()
    # degrees 3 and 4 of that library need the corners of each triangle sorted; the triangles stay in their order
    other = skfem.MeshTri(mesh.nodes[vertex].T.copy(), corners, sort_t=True, validate=False)
    element = {1: skfem.ElementTriP1, 2: skfem.ElementTriP2, 3: skfem.ElementTriP3, 4: skfem.ElementTriP4}[mesh.order]()
    basis = skfem.CellBasis(other, element, intorder=max(2 * mesh.order, 4))
    E = moduli.E[mesh.part_of][:, None]
    G = moduli.G[mesh.part_of].transpose(1, 2, 0)[..., None]
    N = moduli.nu[mesh.part_of].transpose(1, 2, 0)[..., None]
    x, dx = np.asarray(basis.global_coordinates()), basis.dx

    def over(values: Any) -> float:
        return float((values * dx).sum())

    EA = over(E * np.ones_like(dx))
    r = x - np.array([over(E * x[0]), over(E * x[1])])[:, None, None] / EA
    EI = np.array([[over(E * r[i] * r[j]) for j in (0, 1)] for i in (0, 1)])

    @skfem.BilinearForm  # type: ignore[untyped-decorator]
    def stiffness(u: Any, v: Any, w: Any) -> Any:
        return np.einsum("ij...,j...,i...->...", np.broadcast_to(G, (2, 2, *dx.shape)), u.grad, v.grad)

    K = stiffness.assemble(basis).tocsc()

    def solve(body: Any, strain: Any) -> tuple[Any, Any, Any]:
        """tau = G (grad u + strain) with div tau = -body; returns u at points, strains and stresses."""

        @skfem.LinearForm  # type: ignore[untyped-decorator]
        def load(v: Any, w: Any) -> Any:
            return body * v - np.einsum("ij...,j...,i...->...", G, strain, v.grad)

        u = skfem.solve(*skfem.condense(K, load.assemble(basis), D=np.array([0])))
        field = basis.interpolate(u)
        gamma = np.asarray(field.grad) + strain
        return np.asarray(field), gamma, np.einsum("ij...,j...->i...", G, gamma)

    def flexure(force: Any) -> tuple[Any, Any]:
        a = np.linalg.solve(EI, force)
        along = np.einsum("i,i...->...", a, r)
        Nr = np.einsum("ij...,j...->i...", N, r)
        d = along * Nr - 0.5 * (r * Nr).sum(axis=0) * a[:, None, None]
        return solve(E * along, -d)[1:]

    omega, twist, torsion = solve(np.zeros_like(dx), np.stack([-r[1], r[0]]))
    GIT = over((twist * torsion).sum(axis=0))
    fields = [flexure(np.array([1.0, 0.0])), flexure(np.array([0.0, 1.0])), (twist / GIT, torsion / GIT)]
    flexibility = np.array([[over((g * t).sum(axis=0)) for _, t in fields] for g, _ in fields])
    torque = [over(r[0] * t[1] - r[1] * t[0]) for _, t in fields[:2]]
    omega = omega - over(E * omega) / EA
    first = np.array([over(E * omega * r[0]), over(E * omega * r[1])])
    return _opinion(GIT, flexibility, torque, EI, first, over(E * omega**2))


def _opinion(GIT: float, flexibility: Any, torque: Any, EI: Any, first: Any, square: float) -> Opinion:
    """Centres and EIw from ∫E omega r and ∫E omega²: I [zsc, -ysc] = first, E Iw = ∫E (omega + ysc z - zsc y)²."""
    zsc, minus_ysc = np.linalg.solve(EI, first)
    way = np.array([zsc, minus_ysc])  # omega_s = omega - way . r
    EIw = square - 2 * way @ first + way @ EI @ way
    return Opinion(GIT, flexibility, np.array([torque[1], -torque[0]]), np.array([-minus_ysc, zsc]), float(EIw))


# --- NGSolve ----------------------------------------------------------------------------------------------------------


def ngsolve(section: Section) -> Opinion:
    """Return what NGSolve says, on the same vertices, hierarchical polynomials of the same degree."""
    import ngsolve as ng
    from netgen.meshing import Element2D, FaceDescriptor, MeshPoint, Pnt
    from netgen.meshing import Mesh as NetgenMesh

    mesh, moduli = section.mesh, section.moduli
    other = NetgenMesh(dim=2)
    vertex, renumbered = np.unique(mesh.triangles[:, :3], return_inverse=True)
    points = [other.Add(MeshPoint(Pnt(float(y), float(z), 0.0))) for y, z in mesh.nodes[vertex]]
    for part, name in enumerate(mesh.part_names, 1):
        other.Add(FaceDescriptor(surfnr=part, domin=part, bc=part))
        other.SetMaterial(part, name)
    for corners, part in zip(renumbered.reshape(-1, 3), mesh.part_of, strict=True):
        other.Add(Element2D(int(part) + 1, [points[k] for k in corners]))
    domain = ng.Mesh(other)

    def by_part(values: Any) -> Any:
        return ng.CoefficientFunction([float(value) for value in values])

    def tensor(values: Any) -> Any:
        return ng.CoefficientFunction(tuple(by_part(values[:, i, j]) for i in (0, 1) for j in (0, 1)), dims=(2, 2))

    E, G, N = by_part(moduli.E), tensor(moduli.G), tensor(moduli.nu)
    degree = 2 * mesh.order + 2

    def over(value: Any) -> float:
        return float(ng.Integrate(value, domain, order=degree))

    EA = over(E)
    r = ng.CoefficientFunction((ng.x - over(E * ng.x) / EA, ng.y - over(E * ng.y) / EA))
    EI = np.array([[over(E * r[i] * r[j]) for j in (0, 1)] for i in (0, 1)])
    space = ng.H1(domain, order=mesh.order)
    u, v = space.TnT()
    K = ng.BilinearForm(space, symmetric=True)
    K += ng.InnerProduct(G * ng.grad(u), ng.grad(v)) * ng.dx(bonus_intorder=2)
    K.Assemble()
    free = ng.BitArray(space.FreeDofs())
    free[0] = False
    inverse = K.mat.Inverse(free, inverse="sparsecholesky")

    def solve(body: Any, strain: Any) -> tuple[Any, Any]:
        load = ng.LinearForm(space)
        load += (body * v - ng.InnerProduct(G * strain, ng.grad(v))) * ng.dx(bonus_intorder=4)
        load.Assemble()
        field = ng.GridFunction(space)
        field.vec.data = inverse * load.vec
        return field, ng.grad(field) + strain

    def flexure(force: Any) -> Any:
        a = np.linalg.solve(EI, force)
        along, Nr = a[0] * r[0] + a[1] * r[1], N * r
        half = 0.5 * ng.InnerProduct(r, Nr)
        d = along * Nr - ng.CoefficientFunction((half * a[0], half * a[1]))
        return solve(E * along, -d)[1]

    omega, twist = solve(ng.CoefficientFunction(0.0), ng.CoefficientFunction((-r[1], r[0])))
    GIT = over(ng.InnerProduct(twist, G * twist))
    fields = [flexure([1.0, 0.0]), flexure([0.0, 1.0]), twist / GIT]
    flexibility = np.array([[over(ng.InnerProduct(g, G * t)) for t in fields] for g in fields])
    torque = [over(r[0] * (G * t)[1] - r[1] * (G * t)[0]) for t in fields[:2]]
    level = omega - over(E * omega) / EA
    first = np.array([over(E * level * r[0]), over(E * level * r[1])])
    return _opinion(GIT, flexibility, torque, EI, first, over(E * level * level))


LIBRARIES: dict[str, tuple[str, str, Callable[[Section], Opinion]]] = {  # name: module, extra, opinion
    "scikit-fem": ("skfem", "test", scikit_fem),
    "NGSolve": ("ngsolve", "second", ngsolve),
}


def missing() -> dict[str, str]:
    """Return what to say of each library that is not installed."""
    return {
        name: f'{name} is not installed; pip install "xsec-fem[{extra}]" gets it'
        for name, (module, extra, _) in LIBRARIES.items()
        if find_spec(module) is None
    }


def page() -> str:
    """Return the page: for each section our constants, and how far each library is from them."""
    absent = missing()
    names = [name for name in LIBRARIES if name not in absent]
    lines = [
        "# Second opinions",
        "",
        f"Degree {ORDER}, the same triangles in all columns, so the differences are round-off: the largest relative one of GIT, of",
        "the nine flexibilities of Vy, Vz and T, of both shear centres and of EIw, rounded up to a power of ten.",
        "`python -m validation.second_opinions` writes this page.",
        "",
        f"| {' | '.join(['section', 'triangles', 'GIT', 'F_yy', 'F_zz', 'F_yz', 'shear centre', 'Trefftz', *names])} |",
        "| " + " | ".join(["---"] * (8 + len(names))) + " |",
    ]
    for section in sections():
        own = ours(section)
        F, size = own.flexibility, float(np.ptp(section.mesh.nodes))
        centres = (
            f"({c[0] + 0.0:.6g}, {c[1] + 0.0:.6g})"
            for c in (_clean(own.shear_centre, size), _clean(own.trefftz_centre, size))
        )
        coupling = F[0, 1] if abs(F[0, 1]) > 1e-9 * F[0, 0] else 0.0
        cells = [
            section.name,
            str(len(section.mesh.triangles)),
            *(f"{value:.7g}" for value in (own.GIT, F[0, 0], F[1, 1], coupling)),
            *centres,
        ]
        cells += [f"{10.0 ** np.ceil(np.log10(own.furthest(LIBRARIES[name][2](section)))):.0e}" for name in names]
        lines.append(f"| {' | '.join(cells)} |")
    return "\n".join([*lines, *(f"\n{text}." for text in absent.values())]) + "\n"


def _clean(centre: FloatArray, size: float) -> FloatArray:
    """Zeros in the place of round-off."""
    return np.where(np.abs(centre) > 1e-9 * size, centre, 0.0)


def main() -> int:
    """Write the page; say on stderr which library is not there."""
    for text in missing().values():
        print(text, file=sys.stderr)
    PAGE.write_text(page(), encoding="utf-8")
    return 0


if __name__ == "__main__":
    sys.exit(main())
