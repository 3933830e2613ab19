"""One timed run of one library on one stored mesh, in a process of its own: prints a line of JSON.

    python -m tests.benchmarks.stages ours|reference MESH.npz

Both start from the arrays of the same mesh of 6-node triangles and end with nodal values of the gradients: area properties,
assembly,
one factorisation, torsion and the two flexure problems, recovery. Peak memory is that of the process.
"""

from __future__ import annotations

import json
import resource
import sys
import time

import numpy as np

E, NU = 210000.0, 0.3
G = E / (2 * (1 + NU))


class Clock:
    """Seconds by stage."""

    def __init__(self):
        self.seconds, self.last = {}, time.perf_counter()

    def __call__(self, stage):
        now = time.perf_counter()
        self.seconds[stage] = now - self.last
        self.last = now


def ours(nodes, triangles):
    from xsec_fem.fem.mesh import Mesh
    from xsec_fem.recovery.stress_field import unit_fields
    from xsec_fem.theory.area_properties import area_properties
    from xsec_fem.theory.field_integrals import field_integrals
    from xsec_fem.theory.moduli import Moduli
    from xsec_fem.theory.stiffness import shear_stiffness
    from xsec_fem.theory.warping import WarpingProblem, factorise_warping, solve_warping

    mesh = Mesh.build(nodes, triangles, np.zeros(len(triangles), int), ("profile",))
    moduli = Moduli.isotropic(E, NU)
    clock = Clock()
    area = area_properties(mesh, moduli)
    problem = WarpingProblem(mesh, moduli, area)
    factor = factorise_warping(problem)
    clock("assemble and factorise")
    warping = solve_warping(problem, factor)
    clock("loads and solve")
    stiffness = shear_stiffness(area, field_integrals(warping))
    clock("integrals")
    unit_fields(warping, stiffness)
    clock("recover")
    return clock.seconds, stiffness.GIT / G


def reference(nodes, triangles):
    """scikit-fem: its own assembly, scipy's splu once, L2 projection of the gradients as its documentation shows."""
    import scipy.sparse.linalg as spla
    import skfem
    from skfem.helpers import dot, grad

    mesh = skfem.MeshTri2(np.ascontiguousarray(nodes.T), np.ascontiguousarray(triangles.T))
    clock = Clock()
    basis = skfem.Basis(mesh, skfem.ElementTriP2(), intorder=4)
    stiffness = skfem.BilinearForm(lambda u, v, w: G * dot(grad(u), grad(v))).assemble(basis)
    y, z = basis.global_coordinates().value
    area = basis.dx.sum()
    yc, zc = (y * basis.dx).sum() / area, (z * basis.dx).sum() / area
    y, z = y - yc, z - zc
    moments = E * np.array([[(a * b * basis.dx).sum() for b in (y, z)] for a in (y, z)])

    def twist(v, w):
        return -G * (-(w.x[1] - zc) * grad(v)[0] + (w.x[0] - yc) * grad(v)[1])

    def shear(a, b):
        def form(v, w):
            y, z = w.x[0] - yc, w.x[1] - zc
            d = NU * (a * (y * y - z * z) / 2 + b * y * z), NU * (a * y * z + b * (z * z - y * y) / 2)
            return E * (a * y + b * z) * v + G * (d[0] * grad(v)[0] + d[1] * grad(v)[1])

        return form

    forms = [twist, *(shear(*row) for row in np.linalg.inv(moments))]
    loads = [skfem.LinearForm(form).assemble(basis) for form in forms]
    factors = spla.splu(stiffness[1:, 1:].tocsc())
    clock("assemble and factorise")
    solutions = [np.concatenate([[0.0], factors.solve(load[1:])]) for load in loads]
    clock("loads and solve")
    omega = basis.interpolate(solutions[0])
    tau = omega.grad[0] - z, omega.grad[1] + y
    IT = float(((tau[0] ** 2 + tau[1] ** 2) * basis.dx).sum())
    clock("integrals")
    linear = basis.with_element(skfem.ElementTriP1())
    for solution in solutions:
        for component in basis.interpolate(solution).grad:
            linear.project(component)
    clock("recover")
    return clock.seconds, IT


if __name__ == "__main__":
    with np.load(sys.argv[2]) as stored:
        arrays = stored["nodes"], stored["triangles"]
    seconds, IT = {"ours": ours, "reference": reference}[sys.argv[1]](*arrays)
    peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    print(json.dumps({"seconds": seconds, "total": sum(seconds.values()), "peak_MB": peak, "IT": IT}))
