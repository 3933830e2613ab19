"""The summary of a section before solving: its parts, where they touch, what deserves a look."""

from __future__ import annotations

from collections.abc import Sequence

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.connections import Connections
from xsec_fem.model.section import Section
from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.numbers import number
from xsec_fem.report.part_outlines import PartOutline, part_outlines, shared_lines
from xsec_fem.report.wording import actions_text, counted, load_point_text


def section_summary(section: Section, files: Sequence[str], mesh: Mesh | None = None) -> list[Block]:
    """Return parts with areas, parts that touch, load cases, cautions and the files written; lengths in the file's unit."""
    outlines = part_outlines(section, mesh)
    source = str(section.path) if section.path else "built in Python"
    counts = ", ".join(
        (
            counted(len(section.parts), "part"), counted(len(section.joints), "joint"), counted(len(section.cuts), "cut"),
            counted(len(section.probes), "probe"), counted(len(section.actions), "load case"),
        )
    )  # fmt: skip
    head = f"file: {source}; units: {section.units.name} (stress in {section.units.stress})"
    blocks: list[Block] = [
        Heading(section.title or "Section", 1),
        Lines((head, f"read without fault: {counts}")),
        Heading("Parts"),
        _parts(section, outlines),
    ]
    blocks += _touching(section, outlines)
    if section.actions:
        cases = (
            f"{case.name}: {actions_text(case, section.units)} {load_point_text(case, section.units)}"
            for case in section.actions
        )
        blocks += [Heading("Load cases"), Lines(tuple(line.rstrip() for line in cases))]
    if section.cautions:
        blocks += [Heading("Warnings"), Lines(tuple(message for _, message in section.cautions))]
    if files:
        blocks += [Heading("Files written"), Lines(tuple(files))]
    return blocks


def _parts(section: Section, outlines: Sequence[PartOutline]) -> Table:
    drawn = {outline.name: outline for outline in outlines}
    rows = []
    for number_, part in enumerate(section.parts, start=1):
        if part.face is not None:
            area = number(part.face.area)
        else:
            area = number(drawn[part.name].solid.area) if part.name in drawn else "in its mesh file"
        rows.append((str(number_), part.name, part.material, part.shape, area, part.embedded_in or "-"))
    header = ("no.", "part", "material", "shape", f"area [{section.units.power(2)}]", "embedded in")
    return Table(header, tuple(rows), "rlllrl")


def _touching(section: Section, outlines: list[PartOutline]) -> list[Block]:
    if len(outlines) < 2:
        return []
    rows, connections = [], Connections.of(section)
    for line in shared_lines(outlines):
        joint = connections.joint_between(line.parts) or "none: taken as one solid"
        rows.append((" | ".join(line.parts), number(line.length, 4), joint))
    header = ("parts", f"along, about [{section.units.length}]", "joint")
    return [Heading("Parts that touch"), Table(header, tuple(rows), "lrl")]
