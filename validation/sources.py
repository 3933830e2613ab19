"""The books and papers that several families cite. Cited from memory unless a place says otherwise; formulas derived again."""

from __future__ import annotations

from dataclasses import replace

from .case import Source

TIMOSHENKO_GOODIER = Source("S. P. Timoshenko, J. N. Goodier", "Theory of Elasticity, 3rd ed.", "1970")
LOVE = Source("A. E. H. Love", "A Treatise on the Mathematical Theory of Elasticity, 4th ed.", "1927")
RENTON = Source("J. D. Renton", "Generalized beam theory applied to shear stiffness, Int. J. Solids Struct. 27", "1991")
GRUTTMANN_WAGNER = Source(
    "F. Gruttmann, W. Wagner", "Shear correction factors in Timoshenko's beam theory, Comput. Mech. 27", "2001", "pp. 199-207"
)  # fmt: skip
TREFFTZ = Source("E. Trefftz", "Über den Schubmittelpunkt, ZAMM 15", "1935")
TIMOSHENKO_GERE = Source("S. P. Timoshenko, J. M. Gere", "Theory of Elastic Stability, 2nd ed.", "1961")
GOPAL_TREFETHEN = Source(
    "computed by an independent method", "after A. Gopal, L. N. Trefethen, SIAM J. Numer. Anal. 57", "2019",
    "rational least squares, no finite elements",
)  # fmt: skip


def at(source: Source, place: str) -> Source:
    """Return the source with the article, table or equation meant."""
    return replace(source, place=place)
