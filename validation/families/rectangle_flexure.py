"""Rectangles."""

from __future__ import annotations

from ..case import Case, Source, Tolerance
from ..reading import bounds, constant
from ..section_text import section_text


def cases() -> list[Case]:
    """Return the cases of this family."""
    text = section_text("square", [{"shape": "rectangle", "width": 1, "height": 1}])
    return [
        Case(
            "rectangle.square.IT",
            "torsion of rectangles",
            "square, side 1",
            "IT",
            (text,),
            constant("IT"),
            0.140577014955,
            Source(
                "S. P. Timoshenko, J. N. Goodier",
                "Theory of Elasticity, 3rd ed.",
                "1970",
                "torsion of rectangular bars",
            ),
            "computed",
            Tolerance(1e-5, "asked for"),
            "mm⁴",
            bounds("IT"),
            quick=True,
        )
    ]
