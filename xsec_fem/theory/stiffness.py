"""Torsion constant, warping constant, both shear centres, shear stiffness and the 6 x 6 stiffness, from field integrals.

Definitions
-----------
G IT        energy of the field of unit twist, ∫ tau . G^-1 tau (equals its torque).
ysc, zsc    shear centre of zero mean twist ("elasticity"): the point about which the flexure fields have no torque.
Trefftz     shear centre of uncoupled energies: I [zsc, -ysc]ᵀ = [∫E omega y, ∫E omega z], ∫E omega = 0; independent of nu
            (E. Trefftz, Über den Schubmittelpunkt in einem durch eine Einzellast gebogenen Balken, ZAMM 15, 1935, 220-225).
GAs         inverse of the 2 x 2 flexibility of forces through the Trefftz shear centre; Asy = 1/(G F_yy), Asz = 1/(G F_zz).
            The energy definition (F. Gruttmann, W. Wagner, Comput. Mech. 27, 2001, 199-207).
E Iw        ∫E omega_s², omega_s = omega + ysc z - zsc y about the Trefftz shear centre (V. Z. Vlasov, Thin-walled elastic
            beams, 1961, ch. 1: the pole that makes the warping orthogonal to bending).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.theory.area_properties import AreaProperties
from xsec_fem.theory.field_integrals import FieldIntegrals
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION

FloatArray = npt.NDArray[np.float64]


@dataclass(frozen=True)
class ShearStiffness:
    """What the warping fields say of the section as a whole; lengths from the E-weighted centroid.

    Attributes
    ----------
    GIT : torsional rigidity [N mm²].
    EIw : warping rigidity about the Trefftz shear centre [N mm⁴].
    shear_centre : (2,) zero mean twist [mm].
    trefftz_centre : (2,) uncoupled energies [mm].
    flexibility : (3, 3) ∫ tau_i . G^-1 tau_j for unit Vy, Vz (zero mean twist fields) and unit T [1/N, 1/(N mm), 1/(N mm²)].
    shear_flexibility : (2, 2) of forces through the Trefftz shear centre [1/N].
    """

    GIT: float
    EIw: float
    shear_centre: FloatArray
    trefftz_centre: FloatArray
    flexibility: FloatArray
    shear_flexibility: FloatArray


def shear_stiffness(area: AreaProperties, integrals: FieldIntegrals) -> ShearStiffness:
    """Return the constants, (2,), (2, 2) and (3, 3) arrays as in ShearStiffness (N, mm).

    Source: Trefftz 1935, Gruttmann & Wagner 2001, Vlasov 1961 (module docstring).
    """
    energy, moment = integrals.energy, integrals.moment
    GIT = float(energy[TORSION, TORSION])
    torque = moment[SHEAR] + moment[POISSON]
    shear_centre = np.array([torque[1], -torque[0]])
    zsc, minus_ysc = np.linalg.solve(area.EI, integrals.E_omega_r)
    trefftz = np.array([-minus_ysc, zsc])
    # omega_s = omega + ysc z - zsc y: with I [zsc, -ysc] = ∫E omega r the square completes to a difference
    EIw = integrals.E_omega2 - float(np.array([zsc, minus_ysc]) @ integrals.E_omega_r)

    pick = np.zeros((3, 5))  # unit Vy and Vz: both parts of flexure; unit T: the twist field over GIT
    pick[0, [1, 3]] = pick[1, [2, 4]] = 1.0
    pick[2, TORSION] = 1.0 / GIT
    flexibility = pick @ energy @ pick.T
    shear = flexibility[:2, :2] - np.outer(flexibility[:2, 2], flexibility[2, :2]) / flexibility[2, 2]
    return ShearStiffness(GIT, max(EIw, 0.0), shear_centre, trefftz, flexibility, shear)


def section_stiffness(area: AreaProperties, shear: ShearStiffness) -> FloatArray:
    """Return the 6 x 6 stiffness about the E-weighted centroid, shape (6, 6).

    Rows are N, Vy, Vz, T, My, Mz, all acting at the centroid; columns their strains: axial strain, two shear strains, twist per
    length, curvature about y and about z. Units N, N mm and N mm². Coupling of T with Vy and Vz is the shear centre's
    offset; bending and shear are uncoupled in Saint-Venant's theory. Source: Gruttmann & Wagner 2001 (energy definition).
    """
    # forces at the centroid = the same forces at the shear centre of zero mean twist, and a torque
    ysc, zsc = shear.shear_centre
    carry = np.eye(3)
    carry[2, 0], carry[2, 1] = zsc, -ysc
    shear_and_torque = np.linalg.inv(carry.T @ shear.flexibility @ carry)
    result = np.zeros((6, 6))
    result[0, 0] = area.EA
    result[1:4, 1:4] = (shear_and_torque + shear_and_torque.T) / 2
    # sigma = E (kappa_y z - kappa_z y): My = ∫ sigma z, Mz = -∫ sigma y
    result[4, 4], result[5, 5] = area.EIyy, area.EIzz
    result[4, 5] = result[5, 4] = -area.EIyz
    return result
