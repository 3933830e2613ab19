"""Flow through a joint between two groups of parts, by equilibrium, and the shear stress along it.

For the parts A of the first side, r_i = ∫_A (tau_h . grad v_i - E f v_i) vanishes at A's inner nodes (the field satisfies just
these equations) and gives on its interfaces the consistent nodal values of tau . n. Their sum over a joint that separates A is
-∫_A E f to round-off on any mesh. Where A has several interfaces, the traction is spread over them with the interfaces' own mass
matrix. The flow is positive along +x on the part named first.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.assembly import add_at_nodes, element_loads
from xsec_fem.fem.edge_integrals import edge_mass_matrix, edge_nodes, edge_weights
from xsec_fem.fem.edges import Edges, connected_bodies
from xsec_fem.fem.mapping import batches
from xsec_fem.fem.mesh import Mesh
from xsec_fem.model.section import Joint
from xsec_fem.recovery.corners import Corner, corner_mask
from xsec_fem.recovery.stress_field import SectionForces, UnitFields
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION, Warping

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@dataclass(frozen=True)
class JointFlows:
    """A joint's flow under unit Vy, Vz (through the shear centre) and T, before any load case.

    Attributes
    ----------
    name, kind, strength : as declared; strength [MPa].
    width : length of the joint's line in the section [mm].
    flow : (3,) force per length of beam [N/mm per N, per N mm].
    separated : (3,) -∫_A E f, which the flow equals where the joint alone separates the first side ("V S/I").
    separates : True when the joint alone separates the section in two.
    nodes : numbers of the pairs (node, part) of both sides along the joint, (2, K), and their normals out of the first side (K, 2).
    """

    name: str
    kind: str
    strength: float | None
    width: float
    flow: FloatArray
    separated: FloatArray
    separates: bool
    nodes: IntArray
    normals: FloatArray


@dataclass(frozen=True)
class JointResult:
    """A joint under one load case.

    flow and by_hand (V S/I of the first side) [force per length]; mean, peak [stress] and the peak's place; demand is the
    mean against the strength for glue; capacity and utilisation None without a strength.
    """

    name: str
    kind: str
    width: float
    flow: float
    by_hand: float
    separates: bool
    mean: float
    peak: float
    peak_at: tuple[float, float]
    demand: float
    capacity: float | None = None

    @property
    def utilisation(self) -> float | None:
        """Demand over capacity; None without a capacity."""
        return None if self.capacity is None else self.demand / self.capacity

    def to_dict(self) -> dict[str, Any]:
        """Return the entry of results.json; keys without a value are left out."""
        entry = {
            "name": self.name, "kind": self.kind, "width": self.width, "flow": self.flow, "by_hand": self.by_hand,
            "separates": self.separates, "mean": self.mean, "peak": self.peak, "peak_at": list(self.peak_at),
            "demand": self.demand, "capacity": self.capacity, "utilisation": self.utilisation,
        }  # fmt: skip
        return {key: value for key, value in entry.items() if value is not None}


def interface_edges(mesh: Mesh, edges: Edges, first: Sequence[str], second: Sequence[str]) -> IntArray:
    """Return the edges (K,) shared by a triangle of a part in `first` and one of a part in `second`."""
    sides = edges.triangles
    inner = np.flatnonzero(sides[:, 1] >= 0)
    numbers = [np.array([mesh.part_names.index(name) for name in side]) for side in (first, second)]
    a, b = mesh.part_of[sides[inner, 0]], mesh.part_of[sides[inner, 1]]
    across = (np.isin(a, numbers[0]) & np.isin(b, numbers[1])) | (np.isin(a, numbers[1]) & np.isin(b, numbers[0]))
    return inner[across]


def _unit_columns(values: FloatArray, stiffness: ShearStiffness) -> FloatArray:
    """Columns of the five problems (N, 5) -> unit Vy, Vz, T (N, 3)."""
    return np.column_stack([values[:, SHEAR] + values[:, POISSON], values[:, TORSION] / stiffness.GIT])


def _residual_of(warping: Warping, inside: npt.NDArray[np.bool_]) -> tuple[FloatArray, FloatArray]:
    """Nodal r (N, 5) of the triangles inside (M,), and -∫ E f over them (5,)."""
    problem = warping.problem
    residual, supply = np.zeros_like(warping.functions), np.zeros(warping.functions.shape[1])
    for batch in batches(problem.mesh):
        mine = inside[batch.elements]
        if not mine.any():
            continue
        scalar = np.zeros((*batch.points.shape[:2], len(supply)))
        scalar[..., SHEAR] = -problem.moduli.E[batch.part][:, None, None] * (problem.position(batch) @ problem.a.T)
        values = element_loads(batch, scalar, warping.stresses(batch))
        add_at_nodes(residual, batch.nodes[mine], values[mine])
        supply += np.einsum("mq,mqk->k", batch.weights[mine], scalar[mine])
    return residual, supply


def _first_side(mesh: Mesh, edges: Edges, own: IntArray, first: IntArray) -> tuple[npt.NDArray[np.bool_], bool]:
    """Triangles (M,) on the first side of the joint, and True when the joint alone separates the section.

    Where it does, everything that hangs on the first side belongs to it; where it does not, the named parts only.
    """
    body = connected_bodies(mesh, edges, without=own)
    named = np.isin(mesh.part_of, first)
    here = np.unique(body[edges.triangles[own][named[edges.triangles[own]]]])
    there = np.unique(body[edges.triangles[own][~named[edges.triangles[own]]]])
    if np.intersect1d(here, there).size:
        return named, False
    return np.isin(body, here), True


def _boundary_between(edges: Edges, inside: npt.NDArray[np.bool_]) -> IntArray:
    """Edges with one triangle inside and one outside."""
    inner = np.flatnonzero(edges.triangles[:, 1] >= 0)
    sides = inside[edges.triangles[inner]]
    between: IntArray = inner[sides[:, 0] != sides[:, 1]]
    return between


def joint_flows(
    warping: Warping, stiffness: ShearStiffness, fields: UnitFields, edges: Edges, joint: Joint
) -> JointFlows:
    """Return the flow of one joint under unit actions, (3,) arrays [N/mm per N, per N mm].

    Raises ValueError when the two sides do not touch; the message names the joint.
    """
    mesh = warping.problem.mesh
    own = interface_edges(mesh, edges, joint.first, joint.second)
    if not len(own):
        raise ValueError(f"joint {joint.name!r}: its sides {joint.first} and {joint.second} share no edge of the mesh")
    numbers = np.array([mesh.part_names.index(part) for part in joint.first])
    inside, separates = _first_side(mesh, edges, own, numbers)
    residual, supply = _residual_of(warping, inside)
    line = _boundary_between(edges, inside)
    line_nodes = np.unique(edge_nodes(mesh, edges, line))
    traction = np.linalg.solve(edge_mass_matrix(mesh, edges, line, line_nodes), residual[line_nodes])
    weights, width = edge_weights(mesh, edges, own)
    units = _unit_columns(np.vstack([weights[line_nodes] @ traction, supply]), stiffness)
    nodes, normals = _joint_nodes(fields, edges, own, numbers)
    return JointFlows(joint.name, joint.kind, joint.strength, width, units[0], units[1], separates, nodes, normals)


def _joint_nodes(fields: UnitFields, edges: Edges, own: IntArray, first: IntArray) -> tuple[IntArray, FloatArray]:
    """Pair numbers on both sides of the joint's edges (2, K) and normals out of the first side (K, 2)."""
    numbering, mesh = fields.part_nodes, fields.part_nodes.mesh
    sides = edges.triangles[own]
    swap = ~np.isin(mesh.part_of[sides[:, 0]], first)
    inner = np.where(swap, sides[:, 1], sides[:, 0])
    outer = np.where(swap, sides[:, 0], sides[:, 1])
    nodes, normals = edge_nodes(mesh, edges, own, of=inner, with_normals=True)
    pairs = [_pair_numbers(numbering.triangles, mesh.triangles, triangles, nodes) for triangles in (inner, outer)]
    return np.stack([pair.ravel() for pair in pairs]), normals.reshape(-1, 2)


def _pair_numbers(pairs: IntArray, nodes: IntArray, triangles: IntArray, wanted: IntArray) -> IntArray:
    """Pair number of each wanted node (K, p+1) inside its triangle (K,)."""
    place = np.argmax(nodes[triangles][:, None, :] == wanted[:, :, None], axis=2)
    return np.asarray(np.take_along_axis(pairs[triangles], place, axis=1))


def joint_result(
    flows: JointFlows, fields: UnitFields, forces: SectionForces, corners: Sequence[Corner]
) -> JointResult:
    """Return a joint's flow, mean, peak and utilisation under the given forces [N, N mm -> N/mm, MPa].

    The peak is the largest |tau . n| at the nodes of the line, the mean of both sides, outside the stated distance of
    singular corners.
    """
    unit = np.array([forces.Vy, forces.Vz, forces.T])
    flow, by_hand = float(flows.flow @ unit), float(flows.separated @ unit)
    tau = np.einsum("skd,k->sd", fields.tau[flows.nodes].mean(axis=0), unit)
    normal = np.einsum("sd,sd->s", tau, flows.normals)
    places = fields.part_nodes.positions[flows.nodes[0]]
    clear = corner_mask(places, corners)
    size = np.where(clear if clear.any() else True, np.abs(normal), -1.0)
    top = int(np.argmax(size))
    mean = flow / flows.width
    return JointResult(
        flows.name, flows.kind, flows.width, flow, by_hand, flows.separates, mean, float(normal[top]),
        (float(places[top, 0]), float(places[top, 1])), abs(mean), flows.strength,
    )  # fmt: skip
