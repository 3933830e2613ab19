"""Flow through a joint between two groups of parts, by equilibrium, bond by bond, under unit actions.

For the material A on the joint's first side, r_i = ∫_A (tau_h . grad v_i - E f v_i) vanishes at A's inner nodes (the field
satisfies just these equations) and gives on its interfaces the consistent nodal values of tau . n. Their sum over a joint that
separates A is -∫_A E f to round-off on any mesh. Where A has several interfaces, or a joint several bonds, the traction is spread
over them with the interfaces' own mass matrix. The flow is positive along +x on the part named first.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from xsec_fem.fem.assembly import add_at_nodes, element_loads
from xsec_fem.fem.edge_integrals import edge_lengths, edge_mass_matrix, edge_nodes, edge_weights
from xsec_fem.fem.edges import Edges
from xsec_fem.fem.mapping import batches
from xsec_fem.fem.slits import facing_edges
from xsec_fem.model.connections import Connections
from xsec_fem.model.section import Joint
from xsec_fem.recovery.corners import Corner
from xsec_fem.recovery.joint_lines import BondLine, bond_lines
from xsec_fem.recovery.joint_sides import JointSide, joint_sides
from xsec_fem.recovery.stress_field import UnitFields
from xsec_fem.theory.stiffness import ShearStiffness
from xsec_fem.theory.warping import POISSON, SHEAR, TORSION, Warping

FloatArray = npt.NDArray[np.float64]
IntArray = npt.NDArray[np.int64]


@dataclass(frozen=True)
class CutOff:
    """What a joint cuts off, and what flows there under unit Vy, Vz (through the shear centre) and T.

    Attributes
    ----------
    flows : (B, 3) flow of each bond [N/mm per N, per N mm].
    separated : (3,) -∫_A E f of the material cut off: "V S/I" [N/mm per N, per N mm].
    shared_with : other joints and contacts among which V S/I is shared; empty when the joint separates the section.
    """

    flows: FloatArray
    separated: FloatArray
    shared_with: tuple[str, ...] = ()


@dataclass(frozen=True)
class JointFlows:
    """A joint before any load case.

    Attributes
    ----------
    joint : as declared.
    bonds : what carries: the whole line of a glue joint, the beads of a weld, the rows of fasteners; none of contact.
    cuts : one when the joint separates the section, else two, the one with the larger V S/I of unit forces first.
    slit : length of the faying faces that slide on each other [mm].
    size : of the section, tells round-off from flow [mm].
    """

    joint: Joint
    bonds: tuple[BondLine, ...]
    cuts: tuple[CutOff, ...]
    slit: float
    size: float

    @property
    def flow(self) -> FloatArray:
        """Flow of the whole joint under unit Vy, Vz and T, shape (3,) [N/mm per N, per N mm]."""
        total: FloatArray = self.cuts[0].flows.sum(axis=0)
        return total

    @property
    def separated(self) -> FloatArray:
        """V S/I of what is cut off, shape (3,) [N/mm per N, per N mm]."""
        return self.cuts[0].separated

    @property
    def shared_with(self) -> tuple[str, ...]:
        """Names of those that share it."""
        return self.cuts[0].shared_with

    @property
    def separates(self) -> bool:
        """True when the joint alone separates the section."""
        return not self.shared_with

    def cut_for(self, unit: FloatArray) -> CutOff:
        """Return the cut whose V S/I under the forces, shape (3,) [N, N mm], is the larger.

        It is the one a hand calculation would make.
        """
        return max(self.cuts, key=lambda cut: abs(float(cut.separated @ unit)))


@dataclass(frozen=True)
class ElementForces:
    """What each triangle takes part in equilibrium with, for the five problems.

    Attributes
    ----------
    nodal : (M, n, 5) ∫ (tau . grad v_i - E f v_i) over the triangle [N per unit twist, N/mm per N].
    supply : (M, 5) -∫ E f over it [N per unit twist, N/mm per N].
    """

    nodal: FloatArray
    supply: FloatArray


def element_forces(warping: Warping) -> ElementForces:
    """Integrate over every triangle once, shapes (M, n, 5) and (M, 5) [N per unit twist, N/mm per N].

    Source: weak form of xsec_fem.theory.warping (Sokolnikoff 1956).
    """
    problem = warping.problem
    count = warping.functions.shape[1]
    nodal, supply = np.zeros((*problem.mesh.triangles.shape, count)), np.zeros((len(problem.mesh.triangles), count))
    for batch in batches(problem.mesh):
        scalar = np.zeros((*batch.points.shape[:2], count))
        scalar[..., SHEAR] = -problem.moduli.E[batch.part][:, None, None] * (problem.position(batch) @ problem.a.T)
        nodal[batch.elements] = element_loads(batch, scalar, warping.stresses(batch))
        supply[batch.elements] = np.einsum("mq,mqk->mk", batch.weights, scalar)
    return ElementForces(nodal, supply)


def joint_flows(
    connections: Connections,
    warping: Warping,
    stiffness: ShearStiffness,
    fields: UnitFields,
    edges: Edges,
    corners: Sequence[Corner] = (),
) -> list[JointFlows]:
    """Return the flows of all joints under unit actions, arrays of shape (B, 3) [N/mm per N, per N mm].

    Stresses of welds are read outside the stated distance of `corners`. Raises ValueError when the mesh does not fit a joint:
    its sides share no edge, or a slit is not open.
    """
    if not connections.joints:
        return []
    forces = element_forces(warping)
    return [_flows(connections, joint, forces, stiffness, fields, edges, corners) for joint in connections.joints]


def _flows(
    connections: Connections, joint: Joint, forces: ElementForces, stiffness: ShearStiffness, fields: UnitFields,
    edges: Edges, corners: Sequence[Corner],
) -> JointFlows:  # fmt: skip
    mesh = fields.part_nodes.mesh
    slit, size = _slit_length(fields, edges, joint), float(np.ptp(mesh.nodes, axis=0).max())
    sides = joint_sides(connections, mesh, edges, joint)
    bonds = tuple(bond_lines(joint, fields, edges, sides[0].inside, corners))
    if not bonds:
        return JointFlows(joint, (), (CutOff(np.zeros((0, 3)), np.zeros(3)),), slit, size)
    weights = np.stack([edge_weights(mesh, edges, bond.edges)[0] for bond in bonds])
    cuts = [
        CutOff(
            _unit_columns(_tractions(forces, fields, edges, side, weights), stiffness),
            _unit_columns(forces.supply[side.inside].sum(axis=0)[None], stiffness)[0],
            side.shared_with,
        )
        for side in sides
    ]
    cuts.sort(key=lambda cut: -float(np.linalg.norm(cut.separated[:2])))
    return JointFlows(joint, bonds, tuple(cuts), slit, size)


def _tractions(
    forces: ElementForces, fields: UnitFields, edges: Edges, side: JointSide, weights: FloatArray
) -> FloatArray:
    """∫ tau . n over the bonds, whose nodal weights are (B, N): (B, 5)."""
    mesh = fields.part_nodes.mesh
    residual = np.zeros((len(mesh.nodes), forces.supply.shape[1]))
    add_at_nodes(residual, mesh.triangles[side.inside], forces.nodal[side.inside])
    nodes = np.unique(edge_nodes(mesh, edges, side.line))
    traction = np.linalg.solve(edge_mass_matrix(mesh, edges, side.line, nodes), residual[nodes])
    result: FloatArray = weights[:, nodes] @ traction
    return result


def _unit_columns(values: FloatArray, stiffness: ShearStiffness) -> FloatArray:
    """Columns of the five problems (N, 5) -> unit Vy, Vz, T (N, 3)."""
    return np.column_stack([values[:, SHEAR] + values[:, POISSON], values[:, TORSION] / stiffness.GIT])


def _slit_length(fields: UnitFields, edges: Edges, joint: Joint) -> float:
    """Length of the free edges of the two sides that lie on each other."""
    if not joint.is_slit:
        return 0.0
    mesh = fields.part_nodes.mesh
    pairs = facing_edges(mesh, edges)
    first, second = (np.array([name in names for name in mesh.part_names]) for names in (joint.first, joint.second))
    a, b = (mesh.part_of[edges.triangles[pairs[:, k], 0]] for k in (0, 1))
    mine = (first[a] & second[b]) | (second[a] & first[b])
    return float(edge_lengths(mesh, edges, pairs[mine, 0]).sum())
