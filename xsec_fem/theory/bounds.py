"""Guaranteed bounds on the constants and the energy errors, from the warping functions and the equilibrated fluxes.

Notation: (s, t) = ∫ s . G^-1 t, |s|² = (s, s). Index T is torsion of unit twist, 0 flexure with d = 0, 1 its Poisson part,
the latter two for k = y, z. K is the set of fields with div s = 0 and s . n = 0 on the boundary. The exact fields are
tau = G (grad u + g), those of the warping functions tau_h = G (grad u_h + g), the equilibrated ones sigma_h;
e = sigma_h - tau_h, and D is the Gram matrix (e_i, e_j).

Prager and Synge. grad v is orthogonal to K, that is (G grad v, s) = ∫ s . grad v = 0 for every v and every s in K.
As sigma_h - tau is in K and tau - tau_h = G grad (u - u_h),

    |tau - tau_h|² + |tau - sigma_h|² = |sigma_h - tau_h|².                                                     (1)

It holds for every combination of the five problems, as all fields are linear in the loads. Only the equilibrium of
sigma_h and the form of tau_h are used; neither needs to be the best of its kind. So each bound below holds for *every*
vector of weights: it is an ordering of symmetric matrices (A <= B when B - A has no negative eigenvalue).

Fields in K: torsion and the Poisson parts, A = Gram matrix of tau_T, tau_1y, tau_1z. tau minimises |G (grad v + g)|² over
v, hence A <= A_h, the Gram matrix of tau_h; and (tau, s) = ∫ g . s for s in K, so that |tau|² >= 2 ∫ g . sigma_h -
|sigma_h|², which is |tau_h|² - |e|²:

    A_h - D <= A <= A_h.                                                 G IT = A_TT.                           (2)

Gradients: C = Gram matrix of G grad omega, tau_0y, tau_0z. They maximise 2 l(v) - |G grad v|², l the load; with
l_i(u_j) = ∫ (G grad u_i + e_i) . grad u_j this is C_h + W + Wᵀ for the warping functions, C_h their energies and
W_ij = ∫ e_i . grad u_j, which is zero when the linear system is solved exactly and makes the bound insensitive to
round-off. sigma_T - G t and sigma_0 balance the same loads, so that their energies are upper bounds; they exceed the
lower ones by D:

    C_h + W + Wᵀ <= C <= C_h + W + Wᵀ + D.                                                                      (3)

Mixed entries. From L <= X <= U, |xᵀ (X - (L + U)/2) y| <= sqrt(xᵀ (U - L) x  yᵀ (U - L) y)/2 by Cauchy's inequality; this
is polarisation, 4 (a, b) = |a + b|² - |a - b|², with a and b scaled for the narrowest result.                   (4)

Trefftz shear centre. From the centroid ysc = ∫ t . tau_0z and zsc = -∫ t . tau_0y, and ∫ t . tau_0k = (G t, tau_0k) =
-(G grad omega, tau_0k) as tau_T is in K: an entry of C. By (3) and (4) it is m_k - W_kT - D_Tk/2 +- sqrt(D_TT D_kk)/2,
m_k the moment of tau_0k,h. The centre of zero mean twist, ∫ t . (tau_0k + tau_1k), adds (tau_T, tau_1k), an entry of A. With
the parts a = sigma_h - tau in K and b = tau - tau_h of e, orthogonal to each other, the entries of A and C differ from
their middles by +- [(a_T, a_k) - (b_T, b_k)]/2: the two add up to one bound, sqrt(D_TT) |e_0k + e_1k|/2.

Shear flexibility of forces through the Trefftz centre. tau_0 is orthogonal to K, thus F_vv = C_vv + A_vv,
F_vT = A_vT/A_TT, F_TT = 1/A_TT and

    F_vv - F_vT F_Tv/F_TT = C_vv + S(A),    S(A) = A_vv - A_vT A_Tv/A_TT,    xᵀ S x = min over c of |xᵀ tau_1 - c tau_T|².

A minimum of larger forms is larger: S(A_h - D) <= S(A) <= S(A_h) when (A_h - D)_TT > 0; S >= 0 serves otherwise. Then
(3) and (4). C does not depend on nu, nor does the Trefftz centre.

Energy errors. |tau - tau_h| <= |e| by (1), and |tau_k|² = C_kk + A_kk is at least its lower bound. For unit torque the
field is tau_T/|tau_T|²; as |a/|a|² - b/|b|²| = |a - b|/(|a| |b|), its relative error is |tau_T - tau_T,h|/|tau_T,h|.

Known exactly, up to round-off, on straight-sided triangles: EI, the loads, g (quadratic) and all energies. Curved
triangles satisfy equilibrium as exactly, but their sides are polynomials and their energies come from a quadrature
rule. What round-off leaves of the equilibrium of sigma_h is measured, as ∫ sigma_h . grad u_h - l(u_h) relative to
the energy, and widens every interval.

Sources: W. Prager, J. L. Synge, Approximations in elasticity based on the concept of function space, Q. Appl. Math. 5,
1947, 241-269 (1); E. Trefftz, Ein Gegenstück zum Ritzschen Verfahren, Proc. 2nd Int. Congr. Appl. Mech. 1926 (lower
bounds); J. B. Diaz, A. Weinstein, The torsional rigidity and variational methods, Am. J. Math. 70, 1948 (2); the matrix
form and the shear flexibility were derived here.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.edges import Edges
from xsec_fem.fem.equilibrated import EquilibratedFlux, FluxProblem, solve_fluxes
from xsec_fem.fem.mapping import batches
from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.field_integrals import FieldIntegrals
from xsec_fem.theory.warping import POISSON, PROBLEMS, SHEAR, TORSION, Warping, WarpingProblem, apply_tensor

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]
Interval = tuple[float, float]

ACTIONS = ("Vy", "Vz", "T")
_IN_K = [0, 3, 4]  # torsion and the Poisson parts
_ROUND_OFF = 1e-12  # share of a value by which its interval is widened at least: sums of 1e6 terms lose about 1e-13
_DEFECTS = (
    4  # defects that widen an interval: bounds contain 2 ∫ sigma . grad u, twice that as it is one sample of the defect
)


@dataclass(frozen=True)
class Certificate:
    """Intervals that hold the exact constants of the meshed section, and bounds of the energy errors.

    Attributes
    ----------
    energy_error : for Vy, Vz and T, the largest possible |tau - tau_h|/|tau| in energy [-].
    GIT : torsional rigidity [N mm²].
    GAsy, GAsz : shear rigidities of forces through the Trefftz shear centre, 1/F_yy and 1/F_zz [N].
    coupling : F_yz of the same flexibility [1/N].
    ysc_trefftz, zsc_trefftz : Trefftz shear centre from the E-weighted centroid [mm].
    ysc, zsc : shear centre of zero mean twist from the E-weighted centroid [mm].
    strict : True when nothing but round-off stands between the mesh's section and these bounds.
    reason : why not, else empty.
    """

    energy_error: dict[str, float]
    GIT: Interval
    GAsy: Interval
    GAsz: Interval
    coupling: Interval
    ysc_trefftz: Interval
    zsc_trefftz: Interval
    ysc: Interval
    zsc: Interval
    strict: bool
    reason: str


@dataclass(frozen=True)
class Bounds:
    """The certificate and what it was made of.

    Attributes
    ----------
    certificate : intervals and energy errors.
    indicators : (M, 3) share of each triangle in the energy errors of Vy, Vz, T: their squares sum to the squared errors [-].
    error : (5, 5) D of the module docstring, ∫ e_i . G^-1 e_j.
    identity_defect : what is missing in Prager and Synge's identity, ∫ sigma_h . grad u_h = l(u_h), over the energy: round-off [-].
    """

    certificate: Certificate
    indicators: FloatArray
    error: FloatArray
    identity_defect: float


def equilibrated_stresses(problem: WarpingProblem, edges: Edges) -> EquilibratedFlux:
    """Return the equilibrated fields of the five problems, columns as in the warping problems (N, mm, MPa).

    Raises SolveError like the warping solve. Source: Raviart & Thomas 1977, Arnold & Brezzi 1985 (fem.equilibrated).
    """

    def source(part: IntArray, points: FloatArray) -> FloatArray:
        values = np.zeros((*points.shape[:2], len(PROBLEMS)))
        values[..., SHEAR] = problem.moduli.E[part][:, None, None] * ((points - problem.area.centroid) @ problem.a.T)
        return values

    def prescribed(part: IntArray, points: FloatArray) -> FloatArray:
        return problem.prescribed(part, points - problem.area.centroid)

    flux = FluxProblem(problem.mesh, edges, problem.moduli.G, source, prescribed)
    return solve_fluxes(flux, PROBLEMS)


@dataclass(frozen=True)
class _Differences:
    """What the two solutions leave between them.

    error : (5, 5) D.  work : (5, 5) W_ij = ∫ e_i . grad u_j.  local : (M, 3) |e|² of Vy, Vz and T in each triangle.
    defect : (5,) ∫ sigma_i . grad u_i - l_i(u_i), zero for fluxes in equilibrium.
    """

    error: FloatArray
    work: FloatArray
    local: FloatArray
    defect: FloatArray


def _differences(warping: Warping, fluxes: EquilibratedFlux) -> _Differences:
    """Integrate the differences of the two solutions."""
    problem, count = warping.problem, len(PROBLEMS)
    error, work, defect = np.zeros((count, count)), np.zeros((count, count)), np.zeros(count)
    local = np.zeros((len(problem.mesh.triangles), len(ACTIONS)))
    for batch in batches(problem.mesh):
        sigma, gradient, weights = fluxes.values(batch), batch.gradients(warping.functions), batch.weights
        strain = apply_tensor(fluxes.problem.inverse_G[batch.part], sigma) - gradient
        strain -= problem.prescribed(batch.part, problem.position(batch))
        e = problem.stress(batch.part, strain) * weights[..., None, None]
        for component in (0, 1):
            s, f, v = strain[..., component], e[..., component], gradient[..., component]
            error += f.reshape(-1, count).T @ s.reshape(-1, count)
            work += f.reshape(-1, count).T @ v.reshape(-1, count)
            defect += np.einsum("mq,mqk,mqk->k", weights, sigma[..., component], v)
            whole = (s[..., SHEAR] + s[..., POISSON]) * (f[..., SHEAR] + f[..., POISSON])
            local[batch.elements, :2] += whole.sum(axis=1)
            local[batch.elements, 2] += (s[..., TORSION] * f[..., TORSION]).sum(axis=1)
        u = batch.shape_values @ warping.functions[batch.nodes]
        defect -= np.einsum("mq,mqk,mqk->k", weights, fluxes.problem.source(batch.part, batch.points), u)
    return _Differences((error + error.T) / 2, work, local, defect)


def _relative_defect(energy: FloatArray, defect: FloatArray) -> float:
    """Largest defect over the energy of torsion or of the whole flexure field it belongs to."""
    scale = np.diag(energy).copy()
    scale[SHEAR] += scale[POISSON]
    scale[POISSON] = scale[SHEAR]
    return float((np.abs(defect) / scale).max())


@dataclass(frozen=True)
class _Intervals:
    """Makes intervals and widens them by a share of a scale, for round-off."""

    share: float

    def widened(self, low: float, high: float, scale: float) -> Interval:
        """An interval between two bounds."""
        return float(low - self.share * scale), float(high + self.share * scale)

    def pair(self, middle: float, first: float, second: float, scale: float) -> Interval:
        """(4): a mixed entry with the given middle and the widths of its two diagonal entries."""
        half = float(np.sqrt(max(first, 0.0) * max(second, 0.0))) / 2
        return self.widened(middle - half, middle + half, scale)


def _without_torsion(gram: FloatArray) -> FloatArray:
    """S of the module docstring for a (3, 3) matrix of torsion and the Poisson parts; 0 when torsion's entry is not positive."""
    if gram[0, 0] <= 0:
        return np.zeros((2, 2))
    result: FloatArray = gram[1:, 1:] - np.outer(gram[1:, 0], gram[0, 1:]) / gram[0, 0]
    return result


def _shear_flexibility(energy: FloatArray, error: FloatArray, work: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Lower and upper (2, 2) matrices of the flexibility of forces through the Trefftz shear centre [1/N]."""
    upper_A = energy[np.ix_(_IN_K, _IN_K)]
    lower_A = upper_A - error[np.ix_(_IN_K, _IN_K)]
    lower_C = energy[SHEAR, SHEAR] + work[SHEAR, SHEAR] + work[SHEAR, SHEAR].T
    return lower_C + _without_torsion(lower_A), lower_C + error[SHEAR, SHEAR] + _without_torsion(upper_A)


def _centres(
    make: _Intervals, area: AreaProperties, integrals: FieldIntegrals, differences: _Differences
) -> tuple[list[Interval], list[Interval]]:
    """Torques about the centroid of unit Vy and unit Vz: of the nu = 0 parts (Trefftz) and of the whole fields [mm]."""
    size, error = float(np.sqrt(np.trace(area.EI) / area.EA)), differences.error
    twist, trefftz, whole = float(error[TORSION, TORSION]), [], []
    for parts in ([1, 3], [2, 4]):
        middle = integrals.moment[parts] - differences.work[parts, TORSION] - error[TORSION, parts] / 2
        trefftz.append(make.pair(float(middle[0]), twist, float(error[parts[0], parts[0]]), size))
        whole.append(make.pair(float(middle.sum()), twist, float(error[np.ix_(parts, parts)].sum()), size))
    return trefftz, whole


def _negative(interval: Interval) -> Interval:
    return -interval[1], -interval[0]


def _weakness(problem: WarpingProblem) -> str:
    """Why the bounds are not strict, or an empty text."""
    reasons = []
    curved = int(problem.mesh.curved.sum())
    if curved:
        reasons.append(
            f"{curved} triangles have curved sides, polynomials of order {problem.mesh.order} in place of the true curve"
        )
    if not problem.moduli.equal_nu:
        reasons.append("Poisson's ratios of the parts differ, and the theory neglects their in-plane mismatch")
    return "; ".join(reasons)


def bounds(warping: Warping, integrals: FieldIntegrals, fluxes: EquilibratedFlux) -> Bounds:
    """Return the certificate, the triangles' indicators (M, 3) and the Gram matrix of the differences (5, 5); N, mm, MPa.

    `integrals` are those of `warping`; `fluxes` come from `equilibrated_stresses` of the same problem. Sources: module
    docstring (Prager & Synge 1947, Trefftz 1926, Diaz & Weinstein 1948).
    """
    problem, energy = warping.problem, integrals.energy
    differences = _differences(warping, fluxes)
    error, defect = differences.error, _relative_defect(energy, differences.defect)
    make = _Intervals(_ROUND_OFF + _DEFECTS * defect)
    poisson = np.maximum(np.diag(energy - error)[POISSON], 0.0)
    twist = float(energy[TORSION, TORSION])
    squares = np.append(np.diag(energy)[SHEAR] + poisson, twist)  # lower bounds of |tau|², see "Energy errors"
    indicators = np.sqrt(np.maximum(differences.local, 0.0) / squares)
    total = np.sqrt((indicators**2).sum(axis=0)) + make.share
    certificate = _certificate(make, problem, integrals, differences, dict(zip(ACTIONS, total.tolist(), strict=True)))
    return Bounds(certificate, indicators, error, defect)


def _certificate(
    make: _Intervals,
    problem: WarpingProblem,
    integrals: FieldIntegrals,
    differences: _Differences,
    energy_error: dict[str, float],
) -> Certificate:
    """All intervals, from the energies and D."""
    energy, error = integrals.energy, differences.error
    lower, upper = _shear_flexibility(energy, error, differences.work)
    least = np.maximum(np.diag(lower), np.diag(energy + 2 * differences.work)[SHEAR])  # S >= 0
    y, z = (make.widened(least[k], upper[k, k], upper[k, k]) for k in (0, 1))
    width, scale = np.diag(upper - lower), float(np.sqrt(upper[0, 0] * upper[1, 1]))
    trefftz, whole = _centres(make, problem.area, integrals, differences)
    twist = energy[TORSION, TORSION]
    least_twist, most_twist = make.widened(twist - error[TORSION, TORSION], twist, twist)
    reason = _weakness(problem)
    return Certificate(
        energy_error=energy_error,
        GIT=(max(least_twist, 0.0), most_twist),
        GAsy=(1 / y[1], 1 / y[0]),
        GAsz=(1 / z[1], 1 / z[0]),
        coupling=make.pair(float(upper[0, 1] + lower[0, 1]) / 2, width[0], width[1], scale),
        ysc_trefftz=trefftz[1], zsc_trefftz=_negative(trefftz[0]),
        ysc=whole[1], zsc=_negative(whole[0]),
        strict=not reason, reason=reason,
    )  # fmt: skip
