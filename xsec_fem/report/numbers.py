"""Numbers as text for people: about five significant digits, no exponent where none is needed, never "-0"."""

from __future__ import annotations

import math

_PLAIN_FROM, _PLAIN_BELOW = 1e-3, 1e6  # outside this range an exponent is easier to read than zeros
_NOISE = 1e-6  # values below this share of what they are compared with are noise of the mesh and shown as 0


def number(value: float, digits: int = 5, scale: float = 0.0) -> str:
    """Return the value with that many significant digits, "0" when it is noise beside `scale` (same unit).

    Whole digits are never rounded away below 1e6: 197528.6 becomes "197529".
    """
    if not math.isfinite(value):
        return str(value)
    if value == 0 or abs(value) <= _NOISE * abs(scale):
        return "0"
    if not _PLAIN_FROM <= abs(value) < _PLAIN_BELOW:
        mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
        return f"{_trimmed(mantissa)}e{int(exponent)}"
    decimals = max(0, digits - 1 - math.floor(math.log10(abs(value))))
    return _trimmed(f"{value:.{decimals}f}")


def point(y: float, z: float, scale: float, digits: int = 5) -> str:
    """Return "(y, z)" with round-off beside the section's size `scale` shown as 0 (file's unit of length)."""
    return f"({number(y, digits, scale)}, {number(z, digits, scale)})"


def _trimmed(text: str) -> str:
    return text.rstrip("0").rstrip(".") if "." in text else text
