"""The kernel on its own: observed orders on manufactured solutions, degrees 1 to 5, straight and curved sides, tensors, two materials."""

from __future__ import annotations

from functools import cache

from ..case import Case, Source, Tolerance
from ..manufactured import PROBLEMS, observed_orders

GROUP = "kernel"
_CELLS = {1: (16, 32), 2: (8, 16), 3: (6, 12), 4: (4, 8), 5: (3, 6)}
_ROACHE = Source("P. J. Roache", "Code verification by the method of manufactured solutions, J. Fluids Eng. 124", "2002")
_ORDER = Tolerance(
    0.3, "two meshes of at most 32 cells a side: the next term of the error, a power of h more, is still felt; a whole order is not",
    relative=False,
)  # fmt: skip


@cache
def _orders(number: int, degree: int) -> tuple[float, float]:
    in_l2, in_energy = observed_orders(PROBLEMS[number], degree, _CELLS[degree])
    return float(in_l2), float(in_energy)


def cases() -> list[Case]:
    """Return the order in L2 and in energy of every problem and degree."""
    found = []
    for number, problem in enumerate(PROBLEMS):
        for degree in _CELLS:
            for norm, (name, order) in enumerate((("L2", degree + 1.0), ("energy", float(degree)))):
                found.append(
                    Case(
                        f"kernel.{number + 1}.degree{degree}.{name}", GROUP, f"manufactured solution: {problem.name}",
                        f"order in {name}, degree {degree}", (), lambda number=number, degree=degree, norm=norm: _orders(number, degree)[norm],
                        order, _ROACHE, "computed", _ORDER, quick=degree == 4,
                    )  # fmt: skip
                )
    return found
