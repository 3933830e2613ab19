"""Reference fields of the equilibrated solution, tabulated: fields without divergence, and one field for each source polynomial.

On a triangle the flux is sigma = J s/det J (Piola's map), div sigma = (div s)/det J, and s = free fields + lifted source:

    free     RT_k without divergence: 3 (k+1) - 1 with flux 1 at one Gauss point of the sides and -1 at the last one,
             then those without flux;
    lift     field l has divergence pi_l, the orthonormal polynomial: l = 0 the radial field of RT_0, of constant flux density; the
             others without flux, from RT_k where l is among its polynomials and else from RT_K, K the degree of the source.

The source times det J is a polynomial of degree 1 on straight triangles (linear source) and of degree K = 3 p - 2 on curved
ones, beyond RT_k. As the lift adds no flux through the sides, the divergence is exact in every triangle and neighbours are not
disturbed.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mapping import curved_rule, straight_rule
from xsec_fem.fem.orthonormal_polynomials import orthonormal_polynomials, polynomial_count
from xsec_fem.fem.quadrature import Rule, triangle_rule
from xsec_fem.fem.raviart_thomas import raviart_thomas

FloatArray = npt.NDArray[np.float64]


def flux_degree(order: int) -> int:
    """Return the degree k of the flux for warping functions of that order: order - 1, but at least 1.

    RT_0 has constant divergence, the source is linear; and RT_0 cannot follow the part of the stress that grows with the
    distance from the centroid, which no warping function is needed for, so that its error would say nothing of theirs.
    """
    return max(order - 1, 1)


def source_degree(order: int, curved: bool) -> int:
    """Return the degree of a linear source times det J in reference coordinates."""
    return 3 * order - 2 if curved else 1


@dataclass(frozen=True)
class FluxTables:
    """Tables for one order and kind of triangle, straight or curved.

    Attributes
    ----------
    rule : quadrature of the triangles' batches.
    free : (nz, 2, Q) fields without divergence at the rule's points.
    lift : (nl, 2, Q) fields of unit source there.
    products : (3 or 3 Q, nz²) weighted products of free fields for the components yy, yz + zy, zz of the metric.
    source_points : (R, 2) where the source is taken.
    source_weights : (R, nl) weighted polynomials there: they turn values of the source into coefficients.
    """

    rule: Rule
    free: FloatArray
    lift: FloatArray
    products: FloatArray
    source_points: FloatArray
    source_weights: FloatArray


def free_fields(degree: int, points: FloatArray) -> FloatArray:
    """Return the fields of RT_k without divergence at points (Q, 2): shape (nz, 2, Q) [-]. Source: Raviart & Thomas 1977."""
    element = raviart_thomas(degree)
    values, last = element.values(points).transpose(1, 2, 0), element.flux_count - 1
    return np.concatenate([values[:last] - values[last], values[last + 1 + element.divergence_count :]])


def lift_fields(degree: int, source: int, points: FloatArray) -> FloatArray:
    """Return the fields of divergence pi_l, l up to the degree of the source, at points (Q, 2): shape (nl, 2, Q) [-]."""
    radial = (points - 1 / 3).T / np.sqrt(2)  # divergence sqrt 2 = pi_0
    fields = [radial[None]]
    low = min(polynomial_count(degree), polynomial_count(source))
    for element, start in ((raviart_thomas(degree), 1), (raviart_thomas(source), low)):
        stop = low if start == 1 else polynomial_count(source)
        if stop > start:
            offset = element.flux_count - 1  # polynomial 1 is the first function behind the fluxes
            fields.append(element.values(points)[:, offset + start : offset + stop].transpose(1, 2, 0))
    return np.concatenate(fields)


@lru_cache
def flux_tables(order: int, curved: bool) -> FluxTables:
    """Return the tables for warping functions of that order, 1 to 5, arrays shaped as in FluxTables [-]."""
    rule = curved_rule(order) if curved else straight_rule(order)
    degree, source = flux_degree(order), source_degree(order, curved)
    free = free_fields(degree, rule.points)
    outer = np.einsum("iaq,jbq->qabij", free, free)
    products = np.stack([outer[:, 0, 0], outer[:, 0, 1] + outer[:, 1, 0], outer[:, 1, 1]], axis=1)
    products = (products * rule.weights[:, None, None, None]).reshape(len(outer), 3, -1)
    source_rule = triangle_rule(2 * source)
    polynomials = orthonormal_polynomials(source, source_rule.points)[0]
    return FluxTables(
        rule,
        free,
        lift_fields(degree, source, rule.points),
        products.reshape(-1, products.shape[2]) if curved else products.sum(axis=0),
        source_rule.points,
        polynomials * source_rule.weights[:, None],
    )
