"""Meshes refined until the guaranteed error is small enough."""

from dataclasses import replace

import pytest

from tests.pipeline.sections import I_SHAPE, L_SHARP, TWIST, section
from xsec_fem import read_section, solve
from xsec_fem.pipeline import adaptive


def wanted(text, accuracy):
    read = section(text + TWIST)
    return replace(read, solve=replace(read.solve, accuracy=accuracy))


def test_sharp_corner_reaches_a_small_error_with_few_unknowns():
    result = solve(wanted(L_SHARP, 0.002))
    assert max(result.certificate.energy_error.values()) <= 0.002
    assert len(result.mesh.nodes) <= 10_000
    numerics = sum(seconds for stage, seconds in result.timings.items() if stage != "mesh")
    print(f"{len(result.mesh.nodes)} nodes, {numerics:.2f} s of numerics")


@pytest.mark.parametrize("order", [2, 3, 4, 5])
def test_every_degree_reaches_the_accuracy(order):
    read = wanted(L_SHARP, 0.01)
    result = solve(replace(read, solve=replace(read.solve, order=order)))
    assert max(result.certificate.energy_error.values()) <= 0.01


def test_errors_fall_from_step_to_step():
    seen = []
    result = solve(wanted(L_SHARP, 0.0005), progress=seen.append)
    assert tuple(seen) == result.mesh_steps
    errors = [step.energy_error for step in seen]
    assert len(errors) > 1
    assert errors == sorted(errors, reverse=True)


def test_first_mesh_of_a_rolled_profile_meets_the_default():
    result = solve(section(I_SHAPE + TWIST))
    assert len(result.mesh_steps) == 1
    assert not any(caution.code == "accuracy" for caution in result.warnings)


def test_budget_is_said_plainly(monkeypatch):
    monkeypatch.setattr(adaptive, "NODE_BUDGET", 100)
    result = solve(wanted(L_SHARP, 1e-6))
    (message,) = [caution.message for caution in result.warnings if caution.code == "accuracy"]
    assert "above the 1e-06 asked for: the mesh already has" in message
    assert len(result.mesh_steps) == 1


def test_mesh_from_a_file_is_certified_as_it_is(tmp_path):
    drawn = section(L_SHARP + TWIST + '[solve]\norder = 2\nmesh_file = "kept.msh"\n', tmp_path)
    solve(drawn, certificate=False)
    (tmp_path / "again.toml").write_text(
        'title = "again"\nunits = "N mm"\n[materials.m]\nE = 2.6\nnu = 0.3\n[[parts]]\nname = "a"\nmaterial = "m"\n'
        'shape = "file"\npath = "kept.msh"\n[solve]\naccuracy = 1e-9\n'
    )
    result = solve(read_section(tmp_path / "again.toml"))
    assert len(result.mesh_steps) == 1
    (message,) = [caution.message for caution in result.warnings if caution.code == "accuracy"]
    assert "a mesh from a file is not refined" in message


def test_without_certificate_nothing_is_claimed():
    result = solve(section(L_SHARP + TWIST), certificate=False)
    assert result.certificate is None
    assert "certificate" not in result.to_dict()
    assert result.mesh_steps == ()


def test_certificate_holds_the_values_of_the_result():
    result = solve(section(I_SHAPE + TWIST))
    certificate, properties = result.certificate, result.properties
    for name in ("IT", "Asy", "Asz"):
        low, high = getattr(certificate, name)
        # the FE value is itself one end of its interval: round-off decides the last digit
        assert low * (1 - 1e-10) <= getattr(properties, name) <= high * (1 + 1e-10)
    for name in ("ysc_trefftz", "zsc_trefftz", "ysc", "zsc"):
        low, high = getattr(certificate, name)
        assert low <= getattr(properties, name) <= high
    assert not certificate.strict
    assert certificate.reason
