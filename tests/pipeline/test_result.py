"""The result object as a user holds it, and the same numbers from a mesh kept and read back."""

from dataclasses import asdict

import numpy as np
import pytest

from tests.pipeline.sections import I_SHAPE, section
from xsec_fem import Actions, solve

SHEAR = '[[actions]]\nname = "V & <T>"\nVy = 300\nVz = 1000\nT = 200\nload_point = [10, 20]\n'
BACK = 'title = "back"\nunits = "N mm"\n[materials.m]\nE = 2.6\nnu = 0.3\n[[parts]]\nname = "a"\nmaterial = "m"\nshape = "file"\n'


@pytest.fixture(scope="module")
def result():
    return solve(section(I_SHAPE + SHEAR))


@pytest.mark.parametrize("ending", ["msh", "vtu"])
@pytest.mark.parametrize("order", [2, 4])
def test_mesh_kept_and_read_back_gives_the_same_numbers(tmp_path, ending, order):
    keep = f'[solve]\norder = {order}\nmesh_file = "kept.{ending}"\n'
    first = solve(section(I_SHAPE + SHEAR + keep, tmp_path), certificate=False)
    again = solve(section(BACK + f'path = "kept.{ending}"\n' + SHEAR, tmp_path), certificate=False)
    assert again.mesh.order == order
    size = 360.0
    for name, value in asdict(first.properties).items():
        if isinstance(value, float):
            # what is zero on this symmetric section is round-off of its size, or of its moments
            moments = {"Iyz": first.properties.Iyy, "EIyz": first.properties.EIyy}
            scale = size if name.startswith(("y", "z")) else moments.get(name, 0.0)
            assert getattr(again.properties, name) == pytest.approx(value, rel=1e-10, abs=1e-10 * scale), name
    assert again.cases[0].tau_max.value == pytest.approx(first.cases[0].tau_max.value, rel=1e-10)


def test_table_for_notebooks_escapes_names(result):
    page = result._repr_html_()
    assert page.startswith("<table>")
    assert "V &amp; &lt;T&gt;" in page
    assert "<T>" not in page


def test_stress_is_linear_in_the_actions(result):
    one, two = Actions(Vz=1.0, load_point="centroid"), Actions(Vz=3.0, My=5.0, load_point="centroid")
    bending = Actions(My=5.0)
    combined = 3 * result.stress(one).tau_components
    # one product and sum a value
    assert np.allclose(result.stress(two).tau_components, combined, rtol=1e-13, atol=1e-13 * np.abs(combined).max())
    assert np.allclose(result.stress(two).sigma_x, result.stress(bending).sigma_x, rtol=1e-13)


def test_stress_at_a_point_of_the_first_case(result):
    (stress,) = result.at(0.0, 0.0)
    (same,) = result.at(0.0, 0.0, result.cases[0].actions)
    assert stress == same
    assert stress.part == "a"


def test_point_outside(result):
    with pytest.raises(ValueError, match=r"the point \(1000, 0\) lies outside the section"):
        result.at(1000.0, 0.0)


def test_no_load_case_to_take():
    with pytest.raises(ValueError, match="the section has 0 load cases: give actions"):
        solve(section(I_SHAPE), certificate=False).at(0.0, 0.0)
