"""How wide a text is on paper, and where to break it so that it fits."""

from __future__ import annotations

import re
import warnings
from functools import lru_cache
from typing import Any

_MEASURED_AT = 48.0  # size of the letters measured [pt]; widths grow in proportion


def line_height(size: float) -> float:
    """Return the distance between lines of letters of that size [pt], in inches."""
    return 1.35 * size / 72


@lru_cache(maxsize=2)
def _font(bold: bool) -> Any:
    """A font of our own: the drawing changes the size of the ones it shares."""
    from matplotlib.font_manager import FontProperties, findfont
    from matplotlib.ft2font import FT2Font

    font = FT2Font(findfont(FontProperties(weight="bold" if bold else "normal")))
    font.set_size(_MEASURED_AT, 72)
    return font


@lru_cache(maxsize=4096)
def _advance(letter: str, bold: bool) -> float:
    """Width of one letter as a share of its size; 1 for one that the font lacks, which is drawn as a box."""
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")
            glyph = _font(bold).load_char(ord(letter))
    except RuntimeError:
        return 1.0
    return float(glyph.linearHoriAdvance) / 65536 / _MEASURED_AT


def text_width(text: str, size: float, bold: bool = False) -> float:
    """Return the width of one line of text in inches, a little on the safe side; `size` in points.

    The sum over the letters: kerning only makes a text narrower, and rounding to dots is covered by 2 %.
    """
    return 1.02 * size / 72 * sum(_advance(letter, bold) for letter in text)


def wrapped(text: str, size: float, width: float, bold: bool = False) -> list[str]:
    """Break a text into lines no wider than `width` inches; words longer than a line are broken too."""
    lines: list[str] = []
    line = ""
    for word in _kept_together(text).split(" "):
        longer = f"{line} {word}" if line else word
        if text_width(longer, size, bold) <= width:
            line = longer
            continue
        if line:
            lines.append(line)
        while text_width(word, size, bold) > width and len(word) > 1:
            cut = max(1, int(len(word) * width / text_width(word, size, bold)) - 1)
            while (
                cut > 1 and text_width(word[:cut], size, bold) > width
            ):  # letters wider than the word's mean come first
                cut -= 1
            lines.append(word[:cut])
            word = word[cut:]
        line = word
    return [*lines, line] if line else lines


def _kept_together(text: str) -> str:
    """Put spaces that do not break around "=" and between a number and its unit."""
    text = " ".join(text.split()).replace(" = ", "\u00a0=\u00a0")
    text = re.sub(r"(\([^(), ]+,) ([^(), ]+\))", "\\1\u00a0\\2", text)  # points (y, z)
    text = re.sub(r"(?<=[\d)]) (?=(N|kN|lbf|kip|MPa|kPa|psi|ksi|mm|m|in)\b)", "\u00a0", text)
    return re.sub(r"\u00a0(N|kN|lbf|kip) (mm|m|in)\b", "\u00a0\\1\u00a0\\2", text)
