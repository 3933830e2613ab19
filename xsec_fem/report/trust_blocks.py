"""How far the numbers can be trusted: guaranteed accuracy, the meshes solved, the evidence of a series of meshes."""

from __future__ import annotations

from decimal import ROUND_CEILING, Decimal

from xsec_fem.report.blocks import Block, Heading, Lines, Table
from xsec_fem.report.intervals import certified
from xsec_fem.report.numbers import number
from xsec_fem.results import Result


def percent(share: float) -> str:
    """Return a share as "0.12 %", three digits at most [-]."""
    return f"{number(100 * share, 3)} %"


def at_most(share: float) -> str:
    """Return a bound as "0.121 %", its third digit rounded up so that it stays a bound [-]."""
    value = 100 * Decimal(repr(float(share)))
    last = Decimal(1).scaleb(value.adjusted() - 2)
    return f"{number(float(value.quantize(last, ROUND_CEILING)), 3)} %"


def accuracy_blocks(result: Result) -> list[Block]:
    """Return the energy errors, whether the intervals are strict and why not, and the meshes solved (nodes)."""
    heading = Heading("Guaranteed accuracy")
    certificate = result.certificate
    if certificate is None:
        failed = any(caution.code == "no certificate" for caution in result.warnings)
        why = "see the warnings" if failed else "bounds were not asked for, and the mesh was not refined"
        return [heading, Lines((f"none: {why}",))]
    errors = ", ".join(f"{name} {at_most(error)}" for name, error in certificate.energy_error.items())
    intervals = (
        "the intervals beside the constants are strict: nothing but round-off is left out"
        if certificate.strict
        else f"the intervals beside the constants are not strict: {certificate.reason}"
    )
    return [heading, Lines((f"energy error of the stress field at most: {errors}", intervals, _meshes(result)))]


def _meshes(result: Result) -> str:
    steps, asked = result.mesh_steps, percent(result.section.solve.accuracy)
    if not steps:
        return f"accuracy asked for: {asked}"
    nodes = ", ".join(str(step.nodes) for step in steps)
    count = f"{len(steps)} meshes of" if len(steps) > 1 else "1 mesh of"
    errors = ", ".join(at_most(step.energy_error) for step in steps)
    return f"solved on {count} {nodes} nodes: largest of the three {errors} (asked for: {asked})"


def convergence_blocks(result: Result) -> list[Block]:
    """Return the table of a series of meshes with the bounds that hold on each; nothing when it was not asked for."""
    if not result.convergence:
        return []
    units = result.section.units
    header = (
        "degree", "nodes", "triangles", "energy error at most", "observed order", f"IT [{units.power(4)}]", "interval",
        f"Asz [{units.power(2)}]", "interval",
    )  # fmt: skip
    rows = tuple(
        (
            str(row.degree), str(row.nodes), str(row.elements), at_most(row.energy_error),
            "-" if row.observed_order is None else f"{row.observed_order:.2f}",
            *certified(row.IT, row.IT_interval), *certified(row.Asz, row.Asz_interval),
        )
        for row in result.convergence
    )  # fmt: skip
    note = (
        "Order: -2 d log(error)/d log(nodes); it tends to the degree where the field is smooth, to less at corners. Each interval "
        "holds on its own mesh: all of them contain the exact value."
    )
    return [Heading("Convergence"), Table(header, rows, "rrrrrrlrl"), Lines((note,))]
