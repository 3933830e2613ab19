"""Every demo: identities to round-off, the hand values in its first lines, and a certificate."""

from pathlib import Path

import pytest

from xsec_fem import read_section, solve

MESHES = Path(__file__).parents[1] / "meshes"
DEMOS = sorted(path.name for path in MESHES.glob("*.toml"))


@pytest.fixture(scope="module")
def solved():
    cache = {}

    def get(name):
        if name not in cache:
            cache[name] = solve(read_section(MESHES / name))
        return cache[name]

    return get


@pytest.mark.parametrize("name", DEMOS)
def test_identities_hold_to_round_off(solved, name):
    result = solved(name)
    assert [check.name for check in result.checks if not check.ok] == []


@pytest.mark.parametrize("name", DEMOS)
def test_certificate_meets_the_accuracy(solved, name):
    result = solved(name)
    assert max(result.certificate.energy_error.values()) <= result.section.solve.accuracy


@pytest.mark.parametrize("name", DEMOS)
def test_document_is_plain_json(solved, name):
    assert solved(name).to_json().startswith('{\n "schema": "xsec_fem results 1"')


@pytest.mark.parametrize("name", DEMOS)
def test_no_demo_is_over_its_strength(solved, name):
    assert not solved(name).over_strength


@pytest.mark.parametrize("name", DEMOS)
def test_comment_says_what_it_shows(name):
    assert (MESHES / name).read_text(encoding="utf-8").startswith("# ")


def test_boards_by_hand(solved):
    """V S/(I b): 0.926 and 0.617 MPa in the glue, 1.5 V/A = 0.964 in the middle; common practice (see references: planks)."""
    result = solved("five_boards.toml")
    V, b, h = 18000.0, 140.0, 200.0
    means = [joint.mean for joint in result.cases[0].joints]
    by_hand = [V * b * (h / 2 - z) * (h / 2 + z) / 2 / (b * h**3 / 12) / b for z in (-60, -20, 20, 60)]
    assert [abs(mean) for mean in means] == pytest.approx(by_hand, rel=1e-9)  # equilibrium: exact on any mesh
    (probe,) = result.cases[0].probes
    # narrow rectangle: the side of a 140 x 200 section is above 1.5 V/A by the Poisson effect, 1.3 % here (T&G series)
    assert probe.values[0].tau_xz == pytest.approx(1.5 * V / (b * h), rel=0.02)


def test_sandwich_core(solved):
    """V/(b d), d between the middles of the faces: 0.0976 MPa (common practice for thin faces); 1 % from the thick ones."""
    (probe,) = solved("sandwich_panel.toml").cases[0].probes
    assert probe.values[0].tau == pytest.approx(600 / (100 * 61.9), rel=0.01)


def test_tubes_against_thin_wall_values(solved):
    """2 V/A closed, 4 V/A slit at the shear centre, which lies 2 R away: S. Timoshenko, Strength of Materials II, 1956.

    Thickness over radius is 1/12: the largest value is above the mean over the wall by about t/(2 R) = 4 %.
    """
    closed, slit = solved("closed_tube.toml"), solved("slit_tube.toml")
    area = closed.properties.A
    assert closed.cases[0].tau_max.value == pytest.approx(2 * 40000 / area, rel=0.05)
    assert slit.cases[0].tau_max.value == pytest.approx(4 * 40000 / slit.properties.A, rel=0.05)
    assert slit.properties.ysc_trefftz == pytest.approx(-2 * 96, rel=0.005)  # (t/R)²/4 = 0.2 %
    assert pytest.approx(3 * (96 / 8) ** 2, rel=0.05) == closed.properties.IT / slit.properties.IT  # 3 (R/t)²


def test_wide_flange_web(solved):
    """V S/(I t) at the neutral axis with root radii: 77.3 MPa, by hand from the section's own S, I, t."""
    result = solved("wide_flange.toml")
    web = next(probe for probe in result.cases[0].probes if probe.name.startswith("web"))
    r, web_t, depth, flange, width = 24.0, 12.0, 360.0, 20.0, 300.0
    inner = depth / 2 - flange
    fillet_area = (1 - 3.14159265358979 / 4) * r**2
    # centroid of a fillet from its corner: r (10 - 3 pi)/(3 (4 - pi)): derived here from square less quarter circle
    fillet_arm = inner - r * (10 - 3 * 3.14159265358979) / (3 * (4 - 3.14159265358979))
    S = width * flange * (depth / 2 - flange / 2) + web_t * inner**2 / 2 + 2 * fillet_area * fillet_arm
    by_hand = 300000 * S / (result.properties.Iyy * web_t)
    assert by_hand == pytest.approx(77.3, abs=0.05)
    assert web.values[0].tau == pytest.approx(by_hand, rel=1e-3)  # nearly even over a thin web
