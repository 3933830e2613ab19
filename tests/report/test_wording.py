"""Phrases shared by pictures and summary."""

from __future__ import annotations

import pytest

from xsec_fem.model.section import Actions
from xsec_fem.report.wording import actions_text, counted, load_point_text, slug, unique_slugs
from xsec_fem.units import UNIT_SYSTEMS

NMM = UNIT_SYSTEMS["N mm"]


@pytest.mark.parametrize(
    ("name", "text"),
    [
        ("support, ULS", "support_uls"), ("Träger (groß)", "trager_gro"), ("../../etc", "etc"), ("日本", "case"),
        ("a" * 100, "a" * 60), ("", "case"), ("1.5 G + Q", "1_5_g_q"),
    ],
)  # fmt: skip
def test_slug(name, text):
    assert slug(name) == text


def test_equal_slugs_are_told_apart():
    assert unique_slugs(["a", "A", "a!", "b"]) == ["a", "a_2", "a_3", "b"]


def test_actions_name_what_is_not_zero_with_units():
    assert actions_text(Actions(Vz=-18000.0, T=2e6, N=1.5), NMM) == "N = 1.5 N, Vz = -18000 N, T = 2e6 N mm"
    assert actions_text(Actions(), NMM) == "no actions"


@pytest.mark.parametrize(
    ("actions", "text"),
    [
        (Actions(T=1.0), ""),
        (Actions(Vz=1.0), "through the shear centre (no load_point given)"),
        (Actions(Vy=1.0, load_point="centroid"), "through the centroid"),
        (Actions(Vy=1.0, load_point=(20.0, -805.0)), "at (20, -805) mm"),
    ],
)
def test_load_point(actions, text):
    assert load_point_text(actions, NMM) == text


def test_counted():
    assert (counted(1, "node"), counted(0, "part")) == ("1 node", "0 parts")
