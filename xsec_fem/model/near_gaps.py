"""Gaps so narrow that they may be meant as contact: found by closing them."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from xsec_fem.model.faults import FaultList
from xsec_fem.model.flat_parts import FlatPart, Scale, polygons_in
from xsec_fem.model.hole_checks import inner_point
from xsec_fem.model.wording import quoted

if TYPE_CHECKING:
    from shapely import Polygon
    from shapely.geometry.base import BaseGeometry

NARROW = 1 / 200  # of the smaller thickness: narrower than any gap that is made, wider than typing errors of a drawing
_SHARPEST = 100.0  # mitre limit: corners down to 1.2 deg keep their tips when grown and shrunk again
_NO_AREA = 1e-12  # of the size squared: rounding of an area is 1e-15, the smallest gap of note 1e-9 (5e-7 wide)


def caution_near_gaps(parts: list[FlatPart], scale: Scale, faults: FaultList) -> None:
    """Caution about every gap below 1/200 of the smaller thickness: within a part (a slit), or between two parts."""
    from shapely import STRtree

    solids = [part.solid for part in parts]
    reach = NARROW * max(part.thickness for part in parts)
    near = STRtree(solids).query(solids, predicate="dwithin", distance=reach)
    for k, part in enumerate(parts):
        _caution([part], scale, faults)
        for other in (parts[j] for j in sorted(near[1][near[0] == k]) if j > k):
            if part.solid.dwithin(other.solid, NARROW * min(part.thickness, other.thickness)):
                _caution([part, other], scale, faults)


def _caution(parts: list[FlatPart], scale: Scale, faults: FaultList) -> None:
    width = NARROW * min(part.thickness for part in parts)
    if width <= 8 * scale.same:  # narrower than what the chords of the arcs can tell from contact
        return
    gaps = narrow_gaps(_union(parts), width, scale)
    if gaps and len(parts) > 1:  # those within one of the two are said by themselves
        within = [gap for part in parts for gap in narrow_gaps(part.solid, width, scale)]
        gaps = [gap for gap in gaps if not any(gap.intersects(known) for known in within)]
    for gap in gaps:
        unit = f" {faults.units.length}" if faults.units else ""
        who = " and ".join(quoted(part.name) for part in parts)
        where = f"{gap_width(gap):.3g}{unit} apart at {inner_point([gap], scale)}"
        faults.caution("near gap", f"{who}: faces {where}: treated as not bonded.")


def narrow_gaps(solid: BaseGeometry, width: float, scale: Scale) -> list[Polygon]:
    """Return the gaps in a solid that are narrower than `width` [mm] and open all along.

    Growing the solid by half the width and shrinking it again fills what is narrower. The growing is exact to a
    hundredth of its distance only, so that each closing looks for gaps down to 1/40 of its width, and a narrower one for
    those below. It also fills the tip of every wedge between faces that meet: those are told apart by a first, far
    narrower closing, which fills their tip as well (and the slivers between arcs cut into different chords).
    """
    healed = _closed(solid, 4 * scale.same)
    gaps: list[Polygon] = []
    while width > 8 * scale.same:
        closed = _closed(healed, width)
        if closed.area - healed.area > _NO_AREA * scale.size**2:  # seldom, and the difference is slow for arcs
            found = [gap for gap in polygons_in(closed.difference(healed)) if gap_width(gap) > width / 40]
            gaps += [gap for gap in found if not any(gap.intersects(known) for known in gaps)]
        width /= 30
    tips = [tip for tip in polygons_in(healed.difference(solid)) if gap_width(tip) > scale.same / 2] if gaps else []
    return [gap for gap in gaps if not any(gap.dwithin(tip, scale.same) for tip in tips)]


def gap_width(gap: Polygon) -> float:
    """Return the smaller side of the rectangle that has the gap's area and perimeter [mm]."""
    half = gap.length / 2
    return (half - math.sqrt(max(0.0, half**2 - 4 * gap.area))) / 2


def _closed(solid: BaseGeometry, width: float) -> BaseGeometry:
    grown = solid.buffer(width / 2, join_style="mitre", mitre_limit=_SHARPEST)
    return grown.buffer(-width / 2, join_style="mitre", mitre_limit=_SHARPEST)


def _union(parts: list[FlatPart]) -> BaseGeometry:
    import shapely

    return parts[0].solid if len(parts) == 1 else shapely.union_all([part.solid for part in parts])
