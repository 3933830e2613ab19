"""Fields for viewers: read back by another reader, jumps between parts kept."""

from __future__ import annotations

import meshio
import numpy as np
import pytest

from tests.meshing.sections import rectangle, section
from xsec_fem.errors import MeshingError
from xsec_fem.fem.reference_triangle import lattice
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.vtu_fields import sub_triangles, write_fields

TWO = section({"left": rectangle(0, 0, 2, 3), "right": rectangle(2, 0, 5, 3)})


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5])
def test_sub_triangles_fill_the_triangle_once(order):
    corner = lattice(order)[sub_triangles(order)]
    side1, side2 = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
    assert (side1[:, 0] * side2[:, 1] - side1[:, 1] * side2[:, 0]).tolist() == [1] * order**2
    assert len({tuple(sorted(row)) for row in sub_triangles(order).tolist()}) == order**2


@pytest.mark.parametrize("order", [1, 2, 4])
def test_fields_are_read_back_with_a_jump_between_parts(tmp_path, order):
    mesh = mesh_section(TWO, order)
    places = mesh.nodes[mesh.triangles]
    value = places[..., 0] + 10 * mesh.part_of[:, None]
    path = tmp_path / "fields.vtu"
    write_fields(path, mesh, {"tau": places * [1, -1], "s & <t>": value})
    raw = meshio.read(path)
    cells = raw.cells[0]
    assert (cells.type, cells.data.shape) == ("triangle", (len(mesh.triangles) * order**2, 3))
    region = raw.cell_data["region"][0]
    assert (raw.cell_data["part left"][0] == (region == 0)).all()
    assert (raw.cell_data["part right"][0] == (region == 1)).all()
    assert raw.point_data["tau"].shape == (len(raw.points), 3)
    assert raw.point_data["tau"] == pytest.approx(raw.points * [1, -1, 0], abs=1e-12)
    for part in (0, 1):
        own = np.unique(cells.data[region == part])
        assert raw.point_data["s & <t>"][own] == pytest.approx(raw.points[own, 0] + 10 * part, abs=1e-12)
        assert len(own) == len(np.unique(mesh.triangles[mesh.part_of == part]))
    assert not len(np.intersect1d(cells.data[region == 0], cells.data[region == 1]))


def test_values_of_neighbours_in_a_part_are_averaged(tmp_path):
    mesh = mesh_section(section({"r": rectangle(0, 0, 1, 1)}), 1)
    value = np.arange(len(mesh.triangles), dtype=float)[:, None] * np.ones(3)
    write_fields(tmp_path / "f.vtu", mesh, {"v": value})
    raw = meshio.read(tmp_path / "f.vtu")
    node = 0
    around = np.flatnonzero((mesh.triangles == node).any(axis=1))
    assert raw.point_data["v"][node] == pytest.approx(around.mean(), rel=1e-12)


@pytest.mark.parametrize("shape", [(3,), (1, 3), (2, 15), (2, 3, 2, 2)])
def test_a_field_of_another_shape_is_refused(tmp_path, shape):
    mesh = mesh_section(section({"r": rectangle(0, 0, 1, 1)}), 1)
    with pytest.raises(MeshingError, match=r"field 'v' has shape \(.*\), but the mesh has \d+ triangles of 3 nodes"):
        write_fields(tmp_path / "f.vtu", mesh, {"v": np.zeros(shape)})
