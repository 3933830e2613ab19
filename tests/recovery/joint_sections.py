"""Sections with joints for the tests: built-up girder, tee, box, boards; and V S/I by hand."""

from __future__ import annotations

from tests.model.test_joint_faults import joint, rows, weld
from tests.model.two_boards import part, section_of
from xsec_fem.pipeline import solve
from xsec_fem.recovery.joint_results import JointResult
from xsec_fem.results import Result

ROUND_OFF = 1e-9  # flows by equilibrium: condition number of slender sections (1e3) and of the line's mass matrix; 1e-11 is usual


def actions(**values: float | str) -> str:
    lines = [f"{key} = {value}" for key, value in values.items()]
    return "[[actions]]\n" + "\n".join(lines) + "\n"


def shear(Vz: float = 1000.0, **more: float) -> str:
    return actions(Vz=Vz, load_point='"shear centre"', **more)


def result_of(*tables: str) -> Result:
    """One mesh, no certificate: what is tested here holds on any mesh."""
    return solve(section_of(*tables), certificate=False)


def joint_of(result: Result, name: str, case: int = 0) -> JointResult:
    return next(found for found in result.cases[case].joints if found.name == name)


def rectangles_I(parts: list[tuple[float, float, float]]) -> tuple[float, float]:
    """Centroid and second moment of rectangles (width, height, z of the middle), from the formulas."""
    area = sum(b * h for b, h, _ in parts)
    zc = sum(b * h * z for b, h, z in parts) / area
    return zc, sum(b * h**3 / 12 + b * h * (z - zc) ** 2 for b, h, z in parts)


def tee(throat: float = 4.0, offset: float = 0.0, *more: str) -> list[str]:
    """Flange 100 x 10 on a web 8 x 100, the flange moved sideways by `offset`."""
    return [
        part("flange", "rectangle width=100 height=10", f"at=[{offset!r}, 105]"),
        part("web", "rectangle width=8 height=100", "at=[0, 50]"),
        weld(f"throat = {throat!r}", *more, name="weld"),
    ]


def tube(t: float, left: float, right: float, b: float = 100.0, h: float = 80.0) -> list[str]:
    """Box of mid-line b x h: flanges of thickness t between the webs' outer faces, webs of thickness left and right."""
    width, shift = b + left / 2 + right / 2, (right - left) / 4
    flange = f"rectangle width={width!r} height={t!r}"
    return [
        part("top", flange, f"at=[{shift!r}, {h / 2!r}]"),
        part("bottom", flange, f"at=[{shift!r}, {-h / 2!r}]"),
        part("left", f"rectangle width={left!r} height={h - t!r}", f"at=[{-b / 2!r}, 0]"),
        part("right", f"rectangle width={right!r} height={h - t!r}", f"at=[{b / 2!r}, 0]"),
    ]


def tube_glue(*webs: str) -> str:
    return "".join(joint("glue", between=f'["top", "{web}"]', name=f"{web} web") for web in webs)


__all__ = [
    "ROUND_OFF", "actions", "joint", "joint_of", "part", "rectangles_I", "result_of", "rows", "section_of", "shear",
    "tee", "tube", "tube_glue", "weld",
]  # fmt: skip
