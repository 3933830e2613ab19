"""What is checked in gmsh's answers, with a stand-in that gives wrong ones."""

from __future__ import annotations

from types import SimpleNamespace

import numpy as np
import pytest

from xsec_fem.errors import MeshingError
from xsec_fem.meshing.curve_nodes import curved_edges
from xsec_fem.meshing.gmsh_mesher import _require_whole, face_triangles
from xsec_fem.meshing.occ_faces import Frame, Geometry

GEOMETRY = Geometry(((3, 0), (4, 1)), Frame((0.0, 0.0), 1.0), ("web", "flange"))
FAN = np.array([[1, 2, 5], [2, 3, 5], [3, 4, 5], [4, 1, 5]])
RIM = [1, 2, 2, 3, 3, 4, 4, 1]


def answering(**mesh):
    return SimpleNamespace(model=SimpleNamespace(mesh=SimpleNamespace(**mesh)))


def test_a_whole_mesh_passes():
    _require_whole(answering(getElementsByType=lambda kind: ([], RIM)), FAN)


@pytest.mark.parametrize(
    ("triangles", "message"),
    [
        (FAN[:3], "gmsh left 2 sides of triangles without a neighbour inside a part, and 0 with more than one"),
        (np.vstack([FAN, [[1, 5, 6]]]), "gmsh left 2 sides .* and 1 with more than one"),
    ],
)
def test_holes_and_overlaps_in_the_mesh_are_told(triangles, message):
    with pytest.raises(MeshingError, match=message):
        _require_whole(answering(getElementsByType=lambda kind: ([], RIM)), triangles)


def test_a_part_without_triangles_is_named():
    gmsh = answering(getElementsByType=lambda kind, face: ([], [1, 2, 3] if face == 3 else []))
    with pytest.raises(MeshingError, match="no triangle in part 'flange'"):
        face_triangles(gmsh, GEOMETRY)


def curve(parameters):
    """A circle with nodes 1 2 3, of which 2 lies inside the curve."""
    gmsh = answering(
        getElementsByType=lambda kind, tag: ([], [1, 2, 2, 3]), getNodes=lambda *_, **__: ([2], [], parameters)
    )
    gmsh.model.getEntities = lambda dim: [(1, 7)]
    gmsh.model.getType = lambda dim, tag: "Circle"
    gmsh.model.getParametrizationBounds = lambda dim, tag: ([0.0], [1.0])
    gmsh.model.getValue = lambda dim, tag, at: np.column_stack([np.cos(at), np.sin(at), 0 * at]).ravel()
    return gmsh


def test_nodes_of_a_curve_divide_its_parameter_evenly():
    edges = curved_edges(curve([0.4]), np.arange(4) - 1, 3)
    assert edges.ends.tolist() == [[0, 1], [1, 2]]
    angle = np.arctan2(edges.nodes[..., 1], edges.nodes[..., 0])
    assert angle == pytest.approx(np.array([[0.4 / 3, 0.8 / 3], [0.6, 0.8]]), rel=1e-14)


@pytest.mark.parametrize("parameter", [1.2, -0.1, 0.0])
def test_parameters_that_run_back_are_refused(parameter):
    with pytest.raises(MeshingError, match="nodes on curve 7 do not follow its parameter from 0 to 1"):
        curved_edges(curve([parameter]), np.arange(4) - 1, 3)
