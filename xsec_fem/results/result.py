"""The result of a solve: frozen objects, the JSON of schema "xsec_fem results 1", and the stress under any actions.

y, z of points, of the centroid and of the shear centres are in the section file's own axes. Numbers carry the file's units; the
`units` block says which.
"""

from __future__ import annotations

import html
import json
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field, replace
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Actions, Section
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.section_forces import reduce_actions
from xsec_fem.recovery.stress_field import PointStress, StressField, UnitFields
from xsec_fem.results.cases import CaseResult
from xsec_fem.results.constants import Certificate, Contact, ConvergenceRow, MeshStep, Properties
from xsec_fem.results.document import case_entry, corner_entry, largest_entry
from xsec_fem.results.trust import Caution, Check

SCHEMA = "xsec_fem results 1"


@dataclass(frozen=True)
class Result:
    """Everything a solve found.

    Attributes
    ----------
    section : the section as read.
    mesh : the mesh it was solved on.
    properties : constants of the section.
    cases : one entry a load case.
    contacts, corners, checks, warnings : what touches, where stress has no limit, trust, cautions.
    fields : nodal fields of unit actions.
    certificate : guaranteed intervals, None when not asked for.
    rounded : the same section with its sharp corners rounded by [solve] try_radius, None when not asked for.
    convergence : rows of the evidence, empty when not asked for.
    mesh_steps : the meshes solved on the way to the accuracy asked for, the last one being `mesh`.
    versions : of this package and the libraries used.
    timings : seconds by stage.
    """

    section: Section
    mesh: Mesh
    properties: Properties
    cases: tuple[CaseResult, ...]
    contacts: tuple[Contact, ...]
    corners: tuple[Corner, ...]
    checks: tuple[Check, ...]
    warnings: tuple[Caution, ...]
    fields: UnitFields
    certificate: Certificate | None = None
    rounded: Result | None = None
    mesh_steps: tuple[MeshStep, ...] = ()
    convergence: tuple[ConvergenceRow, ...] = ()
    versions: Mapping[str, str] = field(default_factory=dict)
    timings: Mapping[str, float] = field(default_factory=dict)

    def stress(self, actions: Actions) -> StressField:
        """Return the stresses under any actions, as arrays of shape (S,) and (S, 2) on the nodes split by part [MPa]."""
        return self.fields.combine(reduce_actions(actions, self.properties))

    def at(self, y: float, z: float, actions: Actions | None = None) -> tuple[PointStress, ...]:
        """Return the stress at (y, z) [mm], one entry a part there; `actions` None: the first load case [MPa].

        Raises ValueError when the point lies outside the section, or when there is no load case to take.
        """
        if actions is None:
            if not self.cases:
                raise ValueError(f"the section has {len(self.cases)} load cases: give actions")
            return self.cases[0].stress.at(y, z)
        return self.stress(actions).at(y, z)

    @property
    def over_strength(self) -> bool:
        """True when a part or a joint of any case is above its strength."""
        return any(case.utilisation is not None and case.utilisation > 1.0 for case in self.cases)

    @property
    def away_from_corners(self) -> npt.NDArray[np.bool_]:
        """(S,) True for nodes at least the stated distance away from every corner where the stress has no limit."""
        return corner_mask(self.fields.part_nodes.positions, self.corners)

    def with_timings(self, **seconds: float) -> Result:
        """Return the same result with more stages timed [s]."""
        return replace(self, timings={**self.timings, **seconds})

    def to_dict(self) -> dict[str, Any]:
        """Return the document of results.json; numbers bare, one `units` block."""
        section, units = self.section, self.section.units
        return {
            "schema": SCHEMA,
            "title": section.title,
            "input": {"file": section.path.name if section.path else None, "sha256": section.sha256 or None},
            "versions": dict(self.versions),
            "units": {
                "system": units.name, "length": units.length, "force": units.force, "stress": units.stress,
                "moment": units.moment,
            },
            "mesh": {
                "order": self.mesh.order, "nodes": len(self.mesh.nodes), "elements": len(self.mesh.triangles),
                "source": self.mesh.source, "adapt_steps": max(len(self.mesh_steps) - 1, 0),
                "steps": [asdict(step) for step in self.mesh_steps],
            },
            "properties": asdict(self.properties),
            **({} if self.certificate is None else {"certificate": asdict(self.certificate)}),
            "contacts": [asdict(contact) for contact in self.contacts],
            "corners": [corner_entry(corner) for corner in self.corners],
            "cases": [case_entry(case) for case in self.cases],
            **({} if self.rounded is None else {"try_radius": self.rounded.trial_entry()}),
            **({"convergence": [asdict(row) for row in self.convergence]} if self.convergence else {}),
            "timings": dict(self.timings),
            "checks": [{**asdict(check), "ok": check.ok} for check in self.checks],
            "warnings": [asdict(caution) for caution in self.warnings],
        }  # fmt: skip

    def trial_entry(self) -> dict[str, Any]:
        """Return the entry of a section solved again with a root radius [mm]."""
        return {
            "radius": self.section.solve.try_radius,
            "properties": asdict(self.properties),
            "cases": [largest_entry(case) for case in self.cases],
        }

    def to_json(self) -> str:
        """Return results.json as text; not-a-number never occurs in it (ValueError if it would)."""
        return json.dumps(self.to_dict(), indent=1, allow_nan=False, ensure_ascii=False) + "\n"

    def _repr_html_(self) -> str:
        """A small table for notebooks."""
        properties, units = self.properties, self.section.units
        rows = [
            ("A", properties.A, units.power(2)), ("Iyy", properties.Iyy, units.power(4)),
            ("Izz", properties.Izz, units.power(4)), ("IT", properties.IT, units.power(4)),
            ("Asy", properties.Asy, units.power(2)), ("Asz", properties.Asz, units.power(2)),
            ("ysc", properties.ysc, units.length), ("zsc", properties.zsc, units.length),
        ]  # fmt: skip
        rows += [(f"largest |tau|, {case.name}", case.tau_max.value, units.stress) for case in self.cases]
        body = "".join(
            f"<tr><td>{html.escape(name)}</td><td style='text-align:right'>{value:.5g}</td><td>{unit}</td></tr>"
            for name, value, unit in rows
        )
        return f"<table><caption>{html.escape(self.section.title)}</caption>{body}</table>"
