"""Sharp corners rounded on request, and the section solved again."""

import numpy as np
import pytest

from tests.pipeline.sections import HEAD, L_SHARP, TWIST, section
from xsec_fem import InputError, solve
from xsec_fem.meshing.mesh_files import read_mesh_file
from xsec_fem.model.root_radius import with_root_radius

HOLED = HEAD + (
    'shape = "rectangle"\nwidth = 10\nheight = 10\n[[parts.holes]]\nshape = "rectangle"\nwidth = 4\nheight = 4\n'
)


def test_radius_replaces_the_corner_by_a_finite_stress():
    result = solve(section(L_SHARP + TWIST + "[solve]\ntry_radius = 0.2\n"))
    assert len(result.corners) == 1
    assert result.rounded.corners == ()
    # material is added in the corner: (1 - pi/4) r², exact
    added = (1 - np.pi / 4) * 0.2**2
    assert pytest.approx(added, rel=1e-6) == result.rounded.properties.A - result.properties.A
    document = result.to_dict()["try_radius"]
    assert document["radius"] == 0.2
    assert document["cases"][0]["tau_max"]["value"] == result.rounded.cases[0].tau_max.value


@pytest.mark.parametrize("turn", range(6))
def test_corner_may_be_where_the_outline_closes(turn):
    points = [[0, 0], [8, 0], [8, 1], [1, 1], [1, 10], [0, 10]]
    points = points[turn:] + points[:turn]
    read = section(HEAD + f'shape = "polygon"\npoints = {points}\n')
    rounded = with_root_radius(read, 0.5, [(1.0, 1.0)])
    face = rounded.parts[0].face
    assert face.area - read.parts[0].face.area == pytest.approx((1 - np.pi / 4) * 0.25, rel=1e-12)
    ends = [
        (a.end, b.start)
        for a, b in zip(face.outer.segments, face.outer.segments[1:] + face.outer.segments[:1], strict=True)
    ]
    assert all(end == start for end, start in ends)


def test_corners_of_holes_are_rounded_too():
    read = section(HOLED)
    rounded = with_root_radius(read, 1.0, [(-2.0, -2.0), (2.0, -2.0), (2.0, 2.0), (-2.0, 2.0)])
    assert rounded.parts[0].face.area - read.parts[0].face.area == pytest.approx(4 - np.pi, rel=1e-12)


def test_places_without_a_corner_change_nothing():
    read = section(HOLED)
    assert with_root_radius(read, 1.0, [(0.5, 0.5)]) == read


def test_radius_that_does_not_fit():
    with pytest.raises(InputError, match=r'try_radius must fit the corner of part "a" at \(1, 1\): below 7 \(got 8\)'):
        solve(section(L_SHARP + "[solve]\ntry_radius = 8\n"))


def test_mesh_kept_is_that_of_the_section_itself(tmp_path):
    """The trial with a radius must not overwrite the mesh that the user asked to keep."""
    text = L_SHARP + TWIST + '[solve]\ntry_radius = 0.2\nmesh_file = "kept.msh"\n'
    result = solve(section(text, tmp_path), certificate=False)
    kept = read_mesh_file(tmp_path / "kept.msh")
    assert len(kept.nodes) == len(result.mesh.nodes)
    assert len(result.rounded.mesh.nodes) != len(kept.nodes)
