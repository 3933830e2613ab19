"""What every shape of the section file has in common: its numbers, its rules, its face and its walls."""

from __future__ import annotations

import math
from abc import abstractmethod
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Annotated, ClassVar

from pydantic import BaseModel, ConfigDict, Field, Strict

from xsec_fem.model.crossings import first_crossing
from xsec_fem.model.outline import Face, Loop, Point
from xsec_fem.model.rounding import Corner, misfits, rounded_loop
from xsec_fem.model.section import Wall

_LARGEST = 1e12  # squares and fourth powers of lengths must stay finite
_ROUND_OFF = 1e-9  # sizes closer than this share of one another are equal: a wall that thin is a rounding error

_Real = Annotated[float, Strict(), Field(allow_inf_nan=False, lt=_LARGEST)]
Number = Annotated[_Real, Field(gt=-_LARGEST)]
Positive = Annotated[_Real, Field(gt=0)]
NotNegative = Annotated[_Real, Field(ge=0)]
Pair = tuple[Number, Number]


@dataclass(frozen=True)
class Problem:
    """One geometric rule broken.

    key : the number's name in the section file, "root_radius" or "points[2]".
    rule : reads on after the key, "must fit on the web: at most 71.45".
    value : the offending value as text; None when there is none to show.
    remedy : what to do about it, one sentence.
    """

    key: str
    rule: str
    value: str | None
    remedy: str


class ShapeSpec(BaseModel):
    """The numbers of one shape, as given in the section file; lengths in the file's unit [mm], angles in degrees.

    The description of each field is the remedy shown when its number is missing, not a number, or out of range.
    """

    model_config = ConfigDict(frozen=True, extra="forbid")
    default_anchor: ClassVar[str] = "centre"

    def problems(self) -> list[Problem]:
        """Return the geometric rules that the numbers break together; empty when the face can be made."""
        return []

    @abstractmethod
    def face(self) -> Face:
        """Return the face in the shape's own coordinates [mm]; only meant when `problems()` is empty."""

    def walls(self) -> tuple[Wall, ...]:
        """Return mid-line, points (n, 2), and thickness of the named walls [mm]; none for a solid shape.

        Mid-lines run on to the mid-lines of the walls they meet, so that together they form one connected line model.
        """
        return ()


class CorneredShape(ShapeSpec):
    """A shape with one outline of straight sides and rounded corners."""

    def size_problems(self) -> list[Problem]:
        """Return the rules broken by the sizes alone, before any corner is rounded."""
        return []

    @abstractmethod
    def corners(self) -> list[Corner]:
        """Return the outline's corners in order, with their radii [mm]."""

    def problems(self) -> list[Problem]:
        """Return broken rules on sizes, and when there are none those on radii."""
        return self.size_problems() or radius_problems(self.corners())

    def face(self) -> Face:
        """Return the face with its corners rounded [mm]."""
        return Face(rounded_loop(self.corners()))


def text(value: float) -> str:
    """Return a number as shown in messages: up to 6 significant digits."""
    return f"{value:.6g}"


def at_most(limit: float) -> str:
    """Return a largest value as text, rounded down to 6 significant digits so that typing it back passes."""
    if limit == 0:
        return "0"
    step = 10.0 ** (math.floor(math.log10(abs(limit))) - 5)
    return text(math.floor(limit / step + abs(limit / step) * 1e-10) * step)


def place(point: Point) -> str:
    """Return a point, shape (2,), as text, '(y, z)'."""
    return f"({text(point[0])}, {text(point[1])})"


def too_large(key: str, value: float, where: str, limit: float) -> Problem:
    """Return the problem of a number that may not exceed the limit; `where` reads 'must ...'."""
    return Problem(key, f"{where}: at most {at_most(limit)}", text(value), f"Give {at_most(limit)} or less.")


def fills(value: float, limit: float) -> bool:
    """Return True when the value reaches the limit, or would but for round-off."""
    return value >= limit * (1 - _ROUND_OFF)


def near(points: Sequence[Point]) -> float:
    """Return the distance below which two of the points (n, 2) count as one [mm]."""
    y, z = [p[0] for p in points], [p[1] for p in points]
    return _ROUND_OFF * max(max(y) - min(y), max(z) - min(z))


def not_below(key: str, value: float, limit: float, what: str, remedy: str) -> Problem:
    """Return the problem of a number that must be less than the limit, which `what` puts in words."""
    return Problem(key, f"must be less than {what} ({text(limit)})", text(value), remedy)


def radius_problems(corners: Sequence[Corner], closed: bool = True) -> list[Problem]:
    """Return one problem per radius that does not fit the sides beside its corner."""
    return [
        too_large(m.key, m.radius, f"must fit on the {m.edge or 'side'}", m.limit) for m in misfits(corners, closed)
    ]


def crossing_problems(loops: Sequence[Loop], key: str) -> list[Problem]:
    """Return the problem of an outline that crosses or touches itself, with the place, or nothing."""
    crossing = first_crossing(loops)
    if crossing is None:
        return []
    remedy = "Give the points in order along the outline, each once."
    return [Problem(key, f"must be in order: the outline crosses itself at {place(crossing)}", None, remedy)]


def repeated_points(points: Sequence[Point], key: str, closed: bool) -> list[Problem]:
    """Return one problem per point of (n, 2) that equals the one before it (and the first, when closed), but for round-off."""
    found, same = [], near(points)
    for k in range(len(points)):
        if k and math.dist(points[k], points[k - 1]) <= same:
            rule = f"must differ from {key}[{k - 1}]"
            found.append(Problem(f"{key}[{k}]", rule, place(points[k]), "Leave one of the two out."))
    if closed and len(points) > 1 and math.dist(points[0], points[-1]) <= same:
        rule = "must not repeat the first point"
        found.append(
            Problem(f"{key}[{len(points) - 1}]", rule, place(points[-1]), "Leave it out: the outline closes by itself.")
        )
    return found
