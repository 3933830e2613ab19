"""Joints that share the flow: whom with, and how, against closed forms of thin walls and another library."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from tests.recovery.joint_sections import (
    ROUND_OFF,
    actions,
    joint,
    joint_of,
    part,
    result_of,
    shear,
    tee,
    tube,
    tube_glue,
)
from xsec_fem.fem.edges import edges_between, mesh_edges
from xsec_fem.model.reader import read_section
from xsec_fem.pipeline import solve

MESHES = Path(__file__).parents[2] / "meshes"
B, H = 100.0, 80.0


def test_five_boards_by_hand():
    """V S/I with S = b h z and I = b H³/12: 86.4 and 129.6 N/mm (worked beforehand: 0.617 and 0.926 MPa on 140)."""
    result = solve(read_section(MESHES / "five_boards.toml"), certificate=False)
    Iyy = 140 * 200**3 / 12
    S = [140 * 40 * 80, 140 * 40 * (80 + 40)]
    expected = [18000 * s / Iyy for s in (S[0], S[1], S[1], S[0])]
    joints = result.cases[0].joints
    assert [found.flow for found in joints] == pytest.approx(expected, rel=ROUND_OFF)
    assert [found.by_hand for found in joints] == pytest.approx(expected, rel=ROUND_OFF)
    assert [found.demand for found in joints] == pytest.approx([q / 140 for q in expected], rel=ROUND_OFF)
    assert [found.required["strength"] for found in joints] == [found.demand for found in joints]
    assert all(found.separates and not found.remarks for found in joints)


def test_a_closed_cell_names_who_shares():
    result = result_of(*tube(4, 4, 8), tube_glue("left", "right"), shear())
    left, right = joint_of(result, "left web"), joint_of(result, "right web")
    assert not left.separates
    assert left.shared_with == ("right web",)
    assert left.remarks == (
        "The joint does not separate the section: V S/I gives only the sum over 'left web' and 'right web'.",
    )
    assert left.by_hand == pytest.approx(right.by_hand, rel=1e-12)
    assert left.flow + right.flow == pytest.approx(left.by_hand, rel=ROUND_OFF)
    assert abs(right.flow) > abs(left.flow)
    assert left.to_dict()["shared_with"] == ["right web"]


def test_undeclared_contact_is_named_by_its_parts():
    result = result_of(*tube(4, 4, 8), tube_glue("left"), shear())
    assert joint_of(result, "left web").shared_with == ("top | right",)


@pytest.mark.parametrize("between", ['["top", "left"]', '["left", "top"]'])
def test_the_hand_value_is_that_of_the_flange_whoever_is_named_first(between):
    """Cutting the web out crosses as many joints, but its S is zero: the cut with the larger V S/I is taken, case by case."""
    result = result_of(*tube(4, 4, 8), joint("glue", between=between, name="left web"), shear())
    found = joint_of(result, "left web")
    sign = 1 if between.startswith('["left') else -1
    assert found.by_hand == pytest.approx(sign * 1000 * 106 * 4 * 40 / result.properties.Iyy, rel=ROUND_OFF)
    assert found.shared_with == ("top | right",)


def test_lists_of_parts_on_either_side():
    """Both webs together separate the flange: V S/I again, over two stretches."""
    result = result_of(*tube(4, 4, 8), joint("glue", between='["top", ["left", "right"]]', name="webs"), shear())
    found = joint_of(result, "webs")
    assert found.separates
    assert found.width == pytest.approx(12)
    assert found.flow == pytest.approx(found.by_hand, rel=ROUND_OFF)


# ---- thin walls: the indeterminate flow by compatibility ----------------------------------------------------------------
#
# Source of the method: closed thin-walled sections in S. P. Timoshenko and J. M. Gere, Mechanics of Materials (shear flow), and
# V. I. Feodosyev's and others' textbooks: sum of q ds/t = 0 round each cell without twist. Derived here for our boxes:
# flanges of thickness t at z = +-h/2, webs t_i. In the top flange the flow grows by k = V t h/(2 I) per length and drops by q_i at
# web i; the bottom flange mirrors it; the parabolic part of the webs' flows is the same over thickness in each web and cancels.


def tube_share(t: float, left: float, right: float) -> float:
    """Share of the left web: q_l (h/t_l + b/t) = q_r (h/t_r + b/t)."""
    stiff_l, stiff_r = H / left + B / t, H / right + B / t
    return stiff_r / (stiff_l + stiff_r)


def two_cell_shares(t: float, webs: tuple[float, float, float], bays: tuple[float, float]) -> np.ndarray:
    """q_i over their sum k (b1 + b2): two compatibility equations and the sum, with k = 1."""
    (t1, t2, t3), (b1, b2) = webs, bays
    matrix = np.array(
        [[-H / t1 - 2 * b1 / t, H / t2, 0.0], [-2 * b2 / t, -H / t2 - 2 * b2 / t, H / t3], [1.0, 1.0, 1.0]]
    )
    known = np.array([-(b1**2) / t, -(2 * b1 * b2 + b2**2) / t, b1 + b2])
    shares: np.ndarray = np.linalg.solve(matrix, known) / (b1 + b2)
    return shares


def two_cells(t: float, webs: tuple[float, float, float], bays: tuple[float, float]) -> list[str]:
    """Webs on mid-lines at 0, b1, b1 + b2."""
    places = (0.0, bays[0], sum(bays))
    low, high = -webs[0] / 2, places[2] + webs[2] / 2
    plate = f"rectangle width={high - low!r} height={t!r}"
    middle = (low + high) / 2
    return [
        part("top", plate, f"at=[{middle!r}, {H / 2!r}]"),
        part("bottom", plate, f"at=[{middle!r}, {-H / 2!r}]"),
        *(
            part(name, f"rectangle width={w!r} height={H - t!r}", f"at=[{y!r}, 0]")
            for name, w, y in zip("abc", webs, places, strict=True)
        ),
        "".join(joint("glue", between=f'["top", "{name}"]', name=name) for name in "abc"),
    ]


def test_two_cells_of_equal_make_share_like_the_closed_form_says_by_symmetry():
    shares = two_cell_shares(1.0, (1.0, 2.0, 1.0), (50.0, 50.0))
    assert shares[0] == pytest.approx(shares[2])
    assert shares.sum() == pytest.approx(1)


@pytest.mark.parametrize("ratio", [1.0, 2.0, 4.0])
def test_tube_of_unequal_webs_tends_to_the_thin_wall(ratio):
    """The error is first order in the thickness: half of it with half the thickness, and below the thickest wall over b."""
    errors = []
    for t in (2.0, 1.0):
        result = result_of(*tube(t, t, ratio * t), tube_glue("left", "right"), "[solve]\nnu_effect = false", shear())
        left, right = joint_of(result, "left web"), joint_of(result, "right web")
        assert left.flow + right.flow == pytest.approx(left.by_hand, rel=ROUND_OFF)
        errors.append(abs(left.flow / left.by_hand / tube_share(t, t, ratio * t) - 1))
    assert errors[1] < ratio * 1.0 / B
    assert errors[1] < 0.6 * errors[0] or max(errors) < 1e-3  # nothing is left by symmetry


def test_two_cell_tube_tends_to_the_thin_wall():
    errors = []
    for t in (2.0, 1.0):
        webs, bays = (t, 2 * t, 1.5 * t), (60.0, 40.0)
        result = result_of(*two_cells(t, webs, bays), "[solve]\nnu_effect = false", shear())
        joints = [joint_of(result, name) for name in "abc"]
        assert sum(found.flow for found in joints) == pytest.approx(joints[0].by_hand, rel=ROUND_OFF)
        assert joints[0].shared_with == ("b", "c")
        shares = np.array([found.flow for found in joints]) / joints[0].by_hand
        errors.append(np.abs(shares - two_cell_shares(t, webs, bays)).max())
    assert errors[1] < 2.0 / H
    assert errors[1] < 0.6 * errors[0]


def test_shear_and_torsion_superpose():
    """Jourawski's flow and Bredt's T/(2 Am) add, exactly in the field and as t -> 0 to the hand values."""
    t = 1.0
    tables = [*tube(t, t, 2 * t), tube_glue("left", "right"), "[solve]\nnu_effect = false"]
    both = actions(Vz=1000, T=50000, load_point='"shear centre"')
    result = result_of(*tables, shear(), actions(T=50000), both)
    shear_only, twist, together = ([joint_of(result, name, k) for name in ("left web", "right web")] for k in range(3))
    for one, two, sum_of in zip(shear_only, twist, together, strict=True):
        assert sum_of.flow == pytest.approx(one.flow + two.flow, rel=1e-12)
    assert twist[0].flow == pytest.approx(-twist[1].flow, rel=ROUND_OFF)
    bredt = 50000 / (2 * B * H)  # R. Bredt 1896
    assert abs(twist[0].flow) == pytest.approx(bredt, rel=0.01)  # first order in t/b = 1 %
    share = tube_share(t, t, 2 * t)
    hand = [share, 1 - share]
    expected = [h * together[0].by_hand + np.sign(q.flow) * bredt for h, q in zip(hand, twist, strict=True)]
    # first order in the thickest wall over b, of the flow that is shared out
    assert [found.flow for found in together] == pytest.approx(expected, abs=2 * t / B * abs(together[0].by_hand))


# ---- another library ----------------------------------------------------------------------------------------------------


def split_by_scikit_fem(mesh, bonds, first, nu):
    """Flow under unit Vz through groups of edges of the first side's boundary: its own assembly, solver and quadrature.

    Sum over a bond's nodes of ∫_A (tau . grad v_i - E f v_i); bonds are groups of edges without common nodes.
    """
    skfem = pytest.importorskip("skfem")
    corners = mesh.triangles[:, :3]
    used, numbered = np.unique(corners, return_inverse=True)
    tri = skfem.MeshTri(mesh.nodes[used].T.copy(), numbered.reshape(-1, 3).T.copy())
    element = {3: skfem.ElementTriP3, 4: skfem.ElementTriP4}[mesh.order]()
    basis = skfem.Basis(tri, element, intorder=2 * mesh.order + 2)
    inside = skfem.Basis(tri, element, intorder=2 * mesh.order + 2, elements=np.flatnonzero(first))
    one = skfem.Functional(lambda w: 1.0 + 0 * w.x[0])
    area = one.assemble(basis)
    centre = np.array([skfem.Functional(lambda w, k=k: w.x[k]).assemble(basis) for k in (0, 1)]) / area
    second = [
        [
            skfem.Functional(lambda w, j=j, k=k: (w.x[j] - centre[j]) * (w.x[k] - centre[k])).assemble(basis)
            for k in (0, 1)
        ]
        for j in (0, 1)
    ]
    a = np.linalg.inv(second) @ [0.0, 1.0]
    G_over_E = 1 / (2 * (1 + nu))

    def supply(w):
        return a[0] * (w.x[0] - centre[0]) + a[1] * (w.x[1] - centre[1])

    def sideways(w):
        y, z = w.x[0] - centre[0], w.x[1] - centre[1]
        f, r2 = a[0] * y + a[1] * z, y**2 + z**2
        return nu * (f * y - r2 * a[0] / 2), nu * (f * z - r2 * a[1] / 2)

    def load(v, w):
        d = sideways(w)
        return supply(w) * v + G_over_E * (d[0] * v.grad[0] + d[1] * v.grad[1])

    def stiff(u, v, _):
        return G_over_E * (u.grad[0] * v.grad[0] + u.grad[1] * v.grad[1])

    K, F = skfem.BilinearForm(stiff).assemble(basis), skfem.LinearForm(load).assemble(basis)
    psi = skfem.solve(*skfem.condense(K, F, D=np.array([0])))
    r = skfem.BilinearForm(stiff).assemble(inside) @ psi - skfem.LinearForm(load).assemble(inside)
    total = []
    for ends in bonds:
        ends = np.sort(np.searchsorted(used, ends), axis=1)
        facets = [int(np.flatnonzero((pair == tri.facets.T).all(axis=1))[0]) for pair in ends]
        total.append(float(r[np.unique(basis.get_dofs(np.array(facets)).all())].sum()))
    return total


# the same polynomials on the same straight-sided mesh: two assemblies and two solvers differ by round-off only
SAME = 1e-8


def test_split_of_a_tube_against_scikit_fem():
    result = result_of(*tube(6, 4, 9), tube_glue("left", "right"), shear(1.0), "[solve]\norder = 3")
    mesh = result.mesh
    edges = mesh_edges(mesh)
    bonds = [edges.corners[edges_between(mesh, edges, ("top",), (web,))] for web in ("left", "right")]
    first = mesh.part_of == mesh.part_names.index("top")
    expected = split_by_scikit_fem(mesh, bonds, first, 0.3)
    found = [joint_of(result, f"{web} web").flow for web in ("left", "right")]
    assert sum(found) == pytest.approx(sum(expected), rel=SAME)
    assert found == pytest.approx(expected, rel=SAME)


def test_split_of_unequal_beads_against_scikit_fem():
    result = result_of(*tee(4.0, -20.0), shear(1.0), "[solve]\norder = 3")
    mesh = result.mesh
    edges = mesh_edges(mesh)
    bonds = [edges.corners[edges_between(mesh, edges, ("flange",), (f"weld bead {k}",))] for k in (1, 2)]
    first = mesh.part_of == mesh.part_names.index("flange")
    expected = split_by_scikit_fem(mesh, bonds, first, 0.3)
    assert [bond.flow for bond in joint_of(result, "weld").bonds] == pytest.approx(expected, rel=SAME)


# ---- a cut anywhere -----------------------------------------------------------------------------------------------------


@settings(deadline=None, max_examples=8)
@given(st.floats(-40, 40), st.floats(-25, 25), st.floats(0, 180), st.floats(-1, 1), st.floats(-1, 1))
def test_a_solid_cut_in_two_glued_halves_carries_v_s_over_i(y, z, angle, Vy, Vz):
    """Rectangle 100 x 60 cut along any line through (y, z): flow = (Vz Sz/Iyy + Vy Sy/Izz) of one half, from the formulas."""
    from shapely import LineString, box
    from shapely.ops import split

    step = 300 * np.array([np.cos(np.radians(angle)), np.sin(np.radians(angle))])
    pieces = split(box(-50, -30, 50, 30), LineString([(y - step[0], z - step[1]), (y + step[0], z + step[1])])).geoms
    assume(len(pieces) == 2 and min(piece.area for piece in pieces) > 20)
    tables = [
        part(name, "polygon", f"points = {[list(p) for p in piece.exterior.coords[:-1]]}")
        for name, piece in zip(("one", "two"), pieces, strict=True)
    ]
    force = 1000 * (abs(Vy) + abs(Vz))
    result = result_of(
        *tables, joint("glue", between='["one", "two"]'), "[solve]\norder = 2",
        actions(Vy=1000 * Vy, Vz=1000 * Vz, load_point='"centroid"'),
    )  # fmt: skip
    found = joint_of(result, "j")
    half = pieces[0]
    S = half.area * np.array(half.centroid.coords[0])
    expected = -1000 * (Vz * S[1] / (100 * 60**3 / 12) + Vy * S[0] / (60 * 100**3 / 12))
    assert found.separates
    assert found.by_hand == pytest.approx(expected, abs=ROUND_OFF * force)
    assert found.flow == pytest.approx(expected, abs=ROUND_OFF * force)
