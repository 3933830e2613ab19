"""What the reader must know of the joints: rigid rows, spacings too small to build, roots that are not fused."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from xsec_fem.model.section import Joint, Section
from xsec_fem.results import CaseResult, Caution

# spacing below this many diameters is not built: hole spacing of at least 2.2 d0 (EN 1993-1-8:2005, table 3.3) and room for
# the tool; 4 d is common practice, no source
_CLOSEST = 4.0
# angles between the fusion faces outside which a fillet is not relied on to its full throat (EN 1993-1-8:2005, 4.3.2.1)
_FULL_FILLET = (60.0, 120.0)
_SLACK = 1e-6  # degrees: 60 and 120 themselves are fine, whatever the round-off


def joint_cautions(section: Section, cases: Sequence[CaseResult]) -> Iterator[Caution]:
    """Yield the cautions about joints, each kind once; lengths in the file's unit [mm]."""
    rows = [joint for joint in section.joints if joint.fasteners is not None]
    welds = [joint for joint in section.joints if joint.weld is not None]
    if rows:
        yield Caution(
            "fastener slip",
            f"{_names(rows)}: The row is taken as rigid; slip makes the beam softer and shifts the flow. Holes are not "
            "deducted, and the stress beside a row's strip is not that beside a bolt.",
        )
    for joint in rows:
        yield from _close_rows(section, joint, cases)
    if welds:
        yield Caution(
            "unfused root",
            f"{_names(welds)}: between the welds the faces are not fused. The slit ends at the roots like a crack (360 deg), "
            "where the stress grows as r^-0.5 on any mesh: judge the weld on its throat, and fatigue from the root by a "
            "method of its own.",
        )
    yield from _flat_fillets(welds)


def _names(joints: Sequence[Joint]) -> str:
    return ", ".join(joint.name for joint in joints)


def _close_rows(section: Section, joint: Joint, cases: Sequence[CaseResult]) -> Iterator[Caution]:
    """The case that asks for the smallest spacing, when that cannot be built."""
    if joint.fasteners is None:
        return
    found = [
        (result.required["spacing"], case.name)
        for case in cases
        for result in case.joints
        if result.name == joint.name and "spacing" in result.required
    ]
    if not found or min(found)[0] >= _CLOSEST * joint.fasteners.diameter:
        return
    spacing, case_name = min(found)
    yield Caution(
        "close fasteners",
        f"{joint.name}, {case_name}: Required spacing {spacing:.3g} {section.units.length} is below 4 d: other joint, more "
        "rows, or glue.",
    )


def _flat_fillets(welds: Sequence[Joint]) -> Iterator[Caution]:
    for joint in welds:
        low, high = _FULL_FILLET[0] - _SLACK, _FULL_FILLET[1] + _SLACK
        angles = [bond.angle_deg for bond in joint.bonds if not low <= (bond.angle_deg or math.inf) <= high]
        if angles:
            text = " and ".join(f"{angle:.0f}" for angle in dict.fromkeys(angles))
            yield Caution(
                "fillet angle",
                f"{joint.name}: the fusion faces form an angle of {text} deg; a fillet is relied on in full between 60 and "
                "120 deg only (EN 1993-1-8, 4.3.2.1).",
            )
