"""The kernel on its own: observed orders on manufactured solutions, straight and curved sides, tensors, two materials."""

from __future__ import annotations

from functools import cache

from ..case import Case, Source, Tolerance
from ..manufactured import PROBLEMS, observed_orders

GROUP = "kernel"
_CELLS = {1: (16, 32), 2: (8, 16), 3: (6, 12), 4: (4, 8), 5: (3, 6)}
_ROACHE = Source(
    "P. J. Roache", "Code verification by the method of manufactured solutions, J. Fluids Eng. 124", "2002"
)
_ORDER = Tolerance(
    0.3,
    "two meshes of at most 32 cells a side: the next term of the error, a power of h more, is still felt; a whole order is not",
    relative=False,
)


@cache
def _orders(number: int, degree: int) -> tuple[float, float]:
    in_l2, in_energy = observed_orders(PROBLEMS[number], degree, _CELLS[degree])
    return float(in_l2), float(in_energy)


def cases() -> list[Case]:
    """Return the order in L2 and in energy of every problem and degree."""
    return [_case(number, degree, norm) for number in range(len(PROBLEMS)) for degree in _CELLS for norm in (0, 1)]


def _case(number: int, degree: int, norm: int) -> Case:
    name, order = ("L2", degree + 1) if norm == 0 else ("energy", degree)
    return Case(
        f"kernel.{number + 1}.degree{degree}.{name}", GROUP, f"manufactured solution: {PROBLEMS[number].name}",
        f"order in {name}, degree {degree}", (), lambda: _orders(number, degree)[norm], float(order), _ROACHE, "computed", _ORDER,
        quick=degree == 4,
    )  # fmt: skip
