"""Values with a guaranteed interval: rounded to the digits that the interval supports, the interval rounded outward."""

from __future__ import annotations

import math
from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_EVEN, Decimal

_MOST_DIGITS = 6  # more are of no use on paper, however narrow the interval
_NOISE = 1e-6  # share of `scale` below which digits are round-off of the mesh
_PLAIN_FROM, _PLAIN_BELOW = -4, 6  # powers of ten written without an exponent


def certified(value: float, interval: tuple[float, float], scale: float = 0.0) -> tuple[str, str]:
    """Return ("5.529", "[5.526, 5.532]") for a value and its (lowest, highest), all in one unit.

    The last digit is that of the interval's half width. `scale`: what the value is compared with, to tell round-off from digits.
    """
    place = _last_place(value, interval, scale)
    low, high = (_rounded(end, place, rule) for end, rule in zip(interval, (ROUND_FLOOR, ROUND_CEILING), strict=True))
    middle = _rounded(value, place, ROUND_HALF_EVEN)
    power = max((end.adjusted() for end in (low, middle, high) if end), default=0)
    return _text(middle, power, place), f"[{_text(low, power, place)}, {_text(high, power, place)}]"


def _last_place(value: float, interval: tuple[float, float], scale: float) -> int:
    """Power of ten of the last digit written."""
    size = max(abs(value), *(abs(end) for end in interval))
    places = [math.floor(math.log10(size)) + 1 - _MOST_DIGITS] if size else [0]
    half = (interval[1] - interval[0]) / 2
    places += [math.floor(math.log10(limit)) for limit in (half, _NOISE * abs(scale)) if limit > 0]
    return max(places)


def _rounded(value: float, place: int, rule: str) -> Decimal:
    return Decimal(repr(float(value))).quantize(Decimal(1).scaleb(place), rounding=rule)


def _text(value: Decimal, power: int, place: int) -> str:
    if not value:
        return "0"
    if _PLAIN_FROM <= power < _PLAIN_BELOW:
        return f"{value:f}"
    return f"{value.scaleb(-power):.{max(0, power - place)}f}e{power}"
