"""Does the validation library bite? Plausible bugs are put into the package one at a time, and the cases must catch every one.

    python -m tests.mutation            the table: mutant, how many cases caught it, the first of them
    python -m tests.mutation NAME ...   only these; --all runs every case of the library instead of the chosen ones
    python -m tests.mutation --first    stops at the first section whose cases miss

Each mutant lives in a process of its own, so that nothing it computed or cached can leak. A rule of degree 2 p on curved triangles
is none of them: it changes the constants of a ring by 1e-14 at p = 4, less than anyone could call a bug. Two degrees less are still
exact on straight sides.
"""

from __future__ import annotations

import argparse
import multiprocessing
import os
import sys
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager, nullcontext
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any

import numpy as np

from validation.case import Record
from validation.families import all_cases
from validation.runner import group_by_section, run_batch
from xsec_fem.fem.mesh import Mesh
from xsec_fem.fem.reference_triangle import lagrange_triangle, lattice
from xsec_fem.meshing import front, slit_joints
from xsec_fem.model import placement
from xsec_fem.model.outline import Face
from xsec_fem.model.section import Section
from xsec_fem.pipeline import adaptive, constants, materials
from xsec_fem.recovery import joints, largest, section_forces, stress_field
from xsec_fem.theory import area_properties, bounds, corner_exponent, field_integrals, poisson, stiffness, warping
from xsec_fem.theory.moduli import Moduli

# One section or two for everything the package claims, the quickest first; an id belongs when it starts with one of these
CHOSEN = (
    "conventions", "two-materials.layers.nu0.3", "polygon.right triangle", "corner.block10", "semicircle", "torsion.rectangle.2",
    "built-up.angle-both", "fillet.angle.r0.125", "two-materials.beside4.nu0.3", "two-materials.concentric3", "circle.nu0.3",
    "ring.0.5.nu0.5", "rolled.IPE300", "built-up.seam", "rectangle.2.nu0.25", "ellipse.2", "kernel",
)  # fmt: skip


@dataclass(frozen=True)
class Mutant:
    """A bug: `where` holds the function or property `name`, `bug` makes the wrong one from the right one."""

    name: str
    words: str
    where: Any
    attribute: str
    bug: Callable[[Callable[..., Any]], Callable[..., Any]]

    @contextmanager
    def applied(self) -> Iterator[None]:
        """Replace the function wherever it has been imported by its name, and put it back."""
        right = getattr(self.where, self.attribute)
        changed: Any
        if isinstance(right, property):
            changed = property(self.bug(right.fget or right))
        elif isinstance(right, cached_property):
            changed = property(self.bug(right.func))
        else:
            changed = self.bug(right)
        places = [self.where] if isinstance(self.where, type) else _modules_with(self.attribute, right)
        for place in places:
            setattr(place, self.attribute, changed)
        try:
            yield
        finally:
            for place in places:
                setattr(place, self.attribute, right)


def _modules_with(name: str, value: object) -> list[Any]:
    ours = [module for key, module in sys.modules.items() if key.split(".")[0] in ("xsec_fem", "validation")]
    return [module for module in ours if getattr(module, name, None) is value]


# --- the bugs -------------------------------------------------------------------------------------------------------


def _after(change: Callable[..., Any]) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """The right result, spoilt: `change` takes it and the arguments."""
    return lambda right: lambda *args, **kwargs: change(right(*args, **kwargs), *args, **kwargs)


def _before(change: Callable[..., Any]) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """The right function, given a spoilt first argument."""
    return lambda right: lambda first, *args, **kwargs: right(change(first), *args, **kwargs)


def _whole_square(d: Any, nu: Any, r: Any, a: Any) -> Any:
    """(a.r) N r - (r.N r) a: the factor 1/2 forgotten."""
    rNr = np.einsum("mqi,mij,mqj->mq", r, nu, r)
    return d - 0.5 * rNr[..., None, None] * a


def _plain_centroid(area: Any, mesh: Mesh, moduli: Moduli) -> Any:
    plain = right_area_properties(mesh, Moduli(np.ones_like(moduli.E), moduli.G, moduli.nu))
    way = plain.centroid - area.centroid
    return replace(area, centroid=plain.centroid, EI=area.EI + area.EA * np.outer(way, way))


right_area_properties = area_properties.area_properties


def _G_from_E(moduli: Moduli, *_: object) -> Moduli:
    return Moduli(moduli.E, moduli.E[:, None, None] * np.eye(2), moduli.nu)


def _without_holes(section: Section) -> Section:
    return replace(
        section, parts=tuple(replace(part, face=Face(part.face.outer)) if part.face else part for part in section.parts)
    )


def _straightened(mesh: Mesh, *_: object, **__: object) -> Mesh:
    shape = lagrange_triangle(1).values(lattice(mesh.order) / mesh.order)
    nodes = mesh.nodes.copy()
    nodes[mesh.triangles] = np.einsum("qk,mkd->mqd", shape, mesh.nodes[mesh.triangles[:, :3]])
    return mesh.with_nodes(nodes)


def _mean_moduli(solved: Any) -> Any:
    """The warping with one G for all parts, for what is integrated afterwards."""
    moduli = solved.problem.moduli
    share = solved.problem.area.part_areas / solved.problem.area.part_areas.sum()
    G = np.broadcast_to(np.einsum("p,pij->ij", share, moduli.G), moduli.G.shape)
    return replace(solved, problem=replace(solved.problem, moduli=Moduli(moduli.E, G.copy(), moduli.nu)))


def _mirrored_anchor(anchor: str) -> str:
    return anchor.replace("left", "?").replace("right", "left").replace("?", "right")


def _no_iyz(area: Any, *_: object) -> Any:
    return replace(area, EI=np.diag(np.diag(area.EI)))


def _negative_moment_z(fields: Any, *_: object) -> Any:
    return replace(fields, sigma=fields.sigma * [1, 1, -1])


def _about_load_point(forces: Any, actions: Any, _: object) -> Any:
    return replace(forces, T=2 * actions.T - forces.T)


def _shifted_bounds(found: Any, *_: object) -> Any:
    low, high = found.certificate.GIT
    return replace(found, certificate=replace(found.certificate, GIT=(high, 2 * high - low)))


def _first_material(right: Callable[..., Any]) -> Callable[..., Any]:
    return lambda section, mesh, area: section.materials[section.parts[0].material]


def _one_material_wedge(sectors: Sequence[Any]) -> list[Any]:
    return [replace(sector, G=sectors[0].G) for sector in sectors]


MUTANTS = (
    Mutant("nu sign", "Poisson term with the wrong sign", poisson, "poisson_term", _after(lambda d, *_: -d)),
    Mutant("nu half", "factor 1/2 of the Poisson term forgotten", poisson, "poisson_term", _after(_whole_square)),
    Mutant("nu forced", "nu_effect = false is not heard", Moduli, "without_nu", lambda right: lambda self: self),
    Mutant("E for G", "E in the place of G", materials, "moduli_of", _after(_G_from_E)),
    Mutant("plain centroid", "centroid not weighted with E", area_properties, "area_properties", _after(_plain_centroid)),
    Mutant("no Iyz", "product of inertia dropped", area_properties, "area_properties", _after(_no_iyz)),
    Mutant("principal angle", "principal angle with the wrong sign", area_properties.AreaProperties, "principal",
           _after(lambda found, *_: (-found[0], *found[1:]))),
    Mutant("hole ignored", "holes are filled", front, "make_mesh", _before(_without_holes)),
    Mutant("straight sides", "curved sides straightened", front, "make_mesh", _after(_straightened)),
    Mutant("slit closed", "faces that only touch stay bonded", slit_joints, "open_joints",
           lambda right: lambda section, mesh: mesh),
    Mutant("centre of no coupling", "zero mean twist replaced by Trefftz' centre", stiffness, "shear_stiffness",
           _after(lambda s, *_: replace(s, shear_centre=s.trefftz_centre))),
    Mutant("centre of no twist", "Trefftz' centre replaced by zero mean twist", stiffness, "shear_stiffness",
           _after(lambda s, *_: replace(s, trefftz_centre=s.shear_centre))),
    Mutant("twist kept", "flexibility of shear with the twist left in", stiffness, "shear_stiffness",
           _after(lambda s, *_: replace(s, shear_flexibility=s.flexibility[:2, :2]))),
    Mutant("warping about centroid", "Iw about the centroid", stiffness, "shear_stiffness",
           _after(lambda s, _, integrals: replace(s, EIw=integrals.E_omega2))),
    Mutant("G not weighted", "one mean G in the energies", field_integrals, "field_integrals", _before(_mean_moduli)),
    Mutant("twist sense", "torsion turned the other way", warping.WarpingProblem, "twist_field", _after(lambda t, *_: -t)),
    Mutant("load point", "arm of the shear force with the wrong sign", section_forces, "reduce_actions", _after(_about_load_point)),
    Mutant("anchor", "left and right anchors exchanged", placement, "anchor_point",
           lambda right: lambda face, anchor: right(face, _mirrored_anchor(anchor))),
    Mutant("grain", "grain turned the wrong way", placement, "turned_grain", _after(lambda angle, *_: -angle)),
    Mutant("Mz sign", "bending about z with the wrong sign", stress_field, "unit_fields", _after(_negative_moment_z)),
    Mutant("reference", "constants over the first part's material", constants, "reference_material", _first_material),
    Mutant("joint sense", "flow of a joint with the wrong sign", joints, "_tractions", _after(lambda flows, *_: -flows)),
    Mutant("joint peak", "largest stress from tau_xz alone", largest.Readings, "measure",
           lambda right: lambda self, what: np.abs(self.tau[:, 1])),
    Mutant("one-material corner", "exponent of a corner without its second material", corner_exponent, "wedge_exponent",
           _before(_one_material_wedge)),
    Mutant("bounds", "guaranteed interval of IT on the wrong side", bounds, "bounds", _after(_shifted_bounds)),
)  # fmt: skip


# --- running them ---------------------------------------------------------------------------------------------------


def chosen_ids(everything: bool = False) -> list[str]:
    """The cases that are run for each mutant."""
    return [case.id for case in all_cases() if everything or (case.quick and case.id.startswith(CHOSEN))]


def _rank(case_id: str) -> int:
    return next((rank for rank, prefix in enumerate(CHOSEN) if case_id.startswith(prefix)), len(CHOSEN))


def caught_by(name: str | None, everything: bool = False, first: bool = False) -> list[Record]:
    """The cases that miss when a mutant is in the package; `name` None: none is. To be called in a process of its own."""
    adaptive.NODE_BUDGET, adaptive.MAX_STEPS = 8000, 3  # a wrong field may never reach the accuracy asked for
    ids = set(chosen_ids(everything))
    cases = sorted((case for case in all_cases() if case.id in ids), key=lambda case: _rank(case.id))
    mutant = next((mutant for mutant in MUTANTS if mutant.name == name), None)
    missed: list[Record] = []
    with mutant.applied() if mutant else nullcontext():
        for batch in group_by_section(cases):
            missed += [record for record in run_batch(batch) if not record.ok]
            if first and missed:
                break
    return missed


def table(names: Sequence[str | None], everything: bool = False, first: bool = False) -> dict[str | None, list[Record]]:
    """The records that miss, by mutant; one process for each."""
    # a fork shares the imports; nothing of gmsh has been started here. Elsewhere than on Linux processes are made anew
    how = "fork" if sys.platform == "linux" else "spawn"
    workers = min(os.cpu_count() or 1, len(names))
    with multiprocessing.get_context(how).Pool(workers, maxtasksperchild=1) as pool:
        found = pool.starmap(caught_by, [(name, everything, first) for name in names], chunksize=1)
    return dict(zip(names, found, strict=True))


def main() -> int:
    """Print the table; 1 when a mutant survives or the package itself is not clean."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("names", nargs="*", metavar="NAME")
    parser.add_argument("--all", action="store_true", help="every case of the library")
    parser.add_argument("--first", action="store_true", help="stop at the first section whose cases miss")
    options = parser.parse_args()
    unknown = set(options.names) - {mutant.name for mutant in MUTANTS}
    if unknown:
        parser.error(f"no mutant is called {', '.join(sorted(unknown))}")
    chosen = [mutant for mutant in MUTANTS if not options.names or mutant.name in options.names]
    found = table([None, *(mutant.name for mutant in chosen)], options.all, options.first)
    print(
        f"{len(chosen_ids(options.all))} cases for each of {len(chosen)} mutants; without one {len(found[None])} miss\n"
    )
    for mutant in chosen:
        records = found[mutant.name]
        first = ", ".join(record.case_id for record in records[:3]) or "SURVIVES"
        print(f"{mutant.name:24}{mutant.words:52}{len(records):4}  {first}")
    return 1 if found[None] or not all(found[mutant.name] for mutant in chosen) else 0


if __name__ == "__main__":
    sys.exit(main())
