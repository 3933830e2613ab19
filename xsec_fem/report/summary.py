"""The summary of a result: what an engineer reads first, every number with its unit."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.case_summary import case_blocks
from xsec_fem.report.numbers import number, point
from xsec_fem.report.wording import counted, section_size
from xsec_fem.results import Properties, Result
from xsec_fem.units import UnitSystem


def summary(result: Result, files: Sequence[str] = ()) -> list[Block]:
    """Return title, properties, cases, contacts, corners, checks, warnings and the names of the files written."""
    section, mesh = result.section, result.mesh
    source = str(section.path) if section.path else "built in Python"
    blocks: list[Block] = [
        Heading(section.title or "Section", 1),
        Lines(
            (
                f"file: {source}; units: {section.units.name} (stress in {section.units.stress})",
                f"mesh: {counted(len(mesh.nodes), 'node')}, {counted(len(mesh.triangles), 'triangle')} of order {mesh.order}; "
                f"solved in {number(_seconds(result), 3)} s",
            )
        ),
        Heading(f"Section properties (over reference material {result.properties.reference_material})"),
        properties_table(result.properties, section.units, section_size(result)),
    ]
    for k, case in enumerate(result.cases):
        count = f"Load case {k + 1} of {len(result.cases)}" if len(result.cases) > 1 else "Load case"
        blocks += [Heading(f"{count}: {case.name}"), *case_blocks(result, case)]
    if not result.cases:
        blocks.append(Lines(("No actions in the file: no stresses. Add an [[actions]] table for them.",)))
    blocks += _contacts(result) + _corners(result) + _verdicts(result)
    if files:
        blocks += [Heading("Files written"), Lines(tuple(files))]
    return blocks


def _seconds(result: Result) -> float:
    stages = ("mesh", "assemble", "factorise", "solve", "recover")
    return sum(result.timings.get(stage, 0.0) for stage in stages)


def properties_table(properties: Properties, units: UnitSystem, size: float) -> Table:
    """Return symbol, value, unit and meaning of each constant; `size` of the section [mm] tells round-off from values."""
    length, area, fourth, p = units.length, units.power(2), units.power(4), properties
    EI, twist = f"{units.force} {area}", max(p.Iyy, p.Izz)
    rows = (
        ("A", number(p.A), area, "area"),
        ("yc", number(p.yc, scale=size), length, "centroid, y"),
        ("zc", number(p.zc, scale=size), length, "centroid, z"),
        ("Iyy", number(p.Iyy), fourth, "second moment, bending in the z direction"),
        ("Izz", number(p.Izz), fourth, "second moment, bending in the y direction"),
        ("Iyz", number(p.Iyz, scale=twist), fourth, "product moment"),
        ("alpha", number(p.alpha_deg, scale=1.0), "deg", "from y to the principal axis u, counter-clockwise"),
        ("Iu", number(p.Iu), fourth, "second moment about u, the larger"),
        ("Iv", number(p.Iv), fourth, "second moment about v, the smaller"),
        ("IT", number(p.IT), fourth, "torsion constant (Saint-Venant)"),
        ("Iw", number(p.Iw, scale=p.Iyy * size**2), units.power(6), "warping constant about the shear centre"),
        ("ysc", number(p.ysc, scale=size), length, "shear centre (zero mean twist), y"),
        ("zsc", number(p.zsc, scale=size), length, "shear centre (zero mean twist), z"),
        ("ysc_trefftz", number(p.ysc_trefftz, scale=size), length, "shear centre (Trefftz, without nu), y"),
        ("zsc_trefftz", number(p.zsc_trefftz, scale=size), length, "shear centre (Trefftz, without nu), z"),
        ("Asy", number(p.Asy), area, "shear area in y: stiffness (Timoshenko), not a code's resistance area"),
        ("Asz", number(p.Asz), area, "shear area in z: stiffness (Timoshenko), not a code's resistance area"),
        ("EA", number(p.EA), units.force, "axial stiffness"),
        ("EIyy", number(p.EIyy), EI, "bending stiffness"),
        ("EIzz", number(p.EIzz), EI, "bending stiffness"),
        ("EIyz", number(p.EIyz, scale=max(p.EIyy, p.EIzz)), EI, "bending stiffness, coupling"),
        ("GIT", number(p.GIT), EI, "torsional stiffness"),
        ("EIw", number(p.EIw, scale=p.EIyy * size**2), f"{units.force} {fourth}", "warping stiffness"),
    )
    return Table(("symbol", "value", "unit", "meaning"), rows, "lrll")


def _contacts(result: Result) -> list[Block]:
    if not result.contacts:
        return []
    length = result.section.units.length
    rows = tuple(
        (
            " | ".join(contact.parts), number(contact.length), number(contact.slit, scale=contact.length),
            contact.joint or "none: taken as one solid",
        )
        for contact in result.contacts
    )  # fmt: skip
    header = ("parts", f"along [{length}]", f"of it a slit [{length}]", "joint")
    return [Heading("Parts that touch"), Table(header, rows, "lrrl")]


def _corners(result: Result) -> list[Block]:
    if not result.corners:
        return []
    length, size = result.section.units.length, section_size(result)
    rows = tuple(
        (
            point(corner.y, corner.z, size), number(corner.angle_deg, 4), number(corner.exponent, 3),
            number(corner.distance, 3), " | ".join(corner.parts),
        )
        for corner in result.corners
    )  # fmt: skip
    header = (f"at (y, z) [{length}]", "angle [deg]", "exponent [-]", f"not read within [{length}]", "parts")
    return [Heading("Corners where the stress grows without limit"), Table(header, rows, "lrrrl")]


def _verdicts(result: Result) -> list[Block]:
    failed = [check for check in result.checks if not check.ok]
    if failed:
        lines = tuple(
            f"FAILED: {c.name}: {number(c.value, 3)} is above its limit {number(c.limit, 3)} [-]" for c in failed
        )
        lines += (f"{len(result.checks) - len(failed)} of {len(result.checks)} within their limits",)
    else:
        lines = (f"all {len(result.checks)} within their limits",)
    blocks: list[Block] = [Heading("Checks of the solution"), Lines(lines)]
    over = over_strength_lines(result)
    if over:
        blocks += [Heading("Over strength"), Lines(over)]
    if result.warnings:
        blocks += [Heading("Warnings"), Lines(tuple(caution.message for caution in result.warnings))]
    return blocks


def over_strength_lines(result: Result) -> tuple[str, ...]:
    """Return one sentence for each part or joint above its strength, with its utilisation [-]."""
    found = []
    for case in result.cases:
        for thing, items in (("part", case.parts), ("joint", case.joints)):
            for item in items:
                if item.utilisation is not None and item.utilisation > 1.0:
                    found.append(f"{case.name}: {thing} {item.name} has utilisation {number(item.utilisation, 3)}")
    return tuple(found)
