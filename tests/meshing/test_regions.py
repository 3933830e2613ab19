"""Regions of a file to parts: each fault by its words, several at once."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from tests.meshing.sections import file_section
from xsec_fem.errors import InputError
from xsec_fem.meshing.regions import Region, assign_regions, common_file
from xsec_fem.model.section import MeshRegion

FILE = Path("bridge.msh")
WEB = Region(7, "web", np.array([0, 1]))
FLANGE = Region(8, "flange", np.array([2, 3, 4]))
PLAIN = Region(9, None, np.array([5]))
ALL = (WEB, FLANGE, PLAIN)


def assigned(wishes, regions=ALL, count=6):
    return assign_regions(file_section(FILE, wishes), regions, count, "triangle")


def test_parts_follow_names_and_numbers():
    assert assigned({"a": "flange", "b": 7, "c": 9}).tolist() == [1, 1, 0, 0, 0, 2]


def test_no_region_means_the_whole_file():
    assert assigned({"a": None}).tolist() == [0] * 6
    assert assigned({"a": None}, (), 3).tolist() == [0, 0, 0]


@pytest.mark.parametrize(
    ("wishes", "message"),
    [
        ({"a": "wob", "b": "flange", "c": 9}, r'part "a": region must be a region of bridge.msh \(got \'wob\'\). '
         r'Did you mean \'web\'\? It has "web", "flange", 9'),
        ({"a": 17, "b": "flange"}, r"\(got 17\)"),
        ({"a": "7", "b": "flange"}, r"\(got '7'\)"),
        ({"a": "web", "b": "flange"}, "parts must name every region of bridge.msh: 1 of 6 triangles in region 9 belong"),
        ({"a": "web"}, r'4 of 6 triangles in region "flange", 9 belong to no part'),
        ({"a": "web", "b": "flange", "c": 9, "d": 7}, 'part "d": region must not hold pieces of another part: '
         '2 triangles are also in part "a"'),
        ({"a": "web", "b": None}, r'2 triangles are also in part "a" \(got none, the whole file\)'),
    ],
)  # fmt: skip
def test_faults(wishes, message):
    with pytest.raises(InputError, match=message):
        assigned(wishes)


def test_triangles_outside_every_region_are_told():
    with pytest.raises(InputError, match="1 of 3 triangles outside every region belong to no part"):
        assigned({"a": "web"}, (WEB,), 3)


def test_a_file_without_regions_says_so():
    with pytest.raises(InputError, match="no named or numbered regions: leave region out"):
        assigned({"a": "web"}, (), 3)


def test_all_faults_come_at_once():
    with pytest.raises(InputError) as caught:
        assigned({"a": "x", "b": "y"})
    assert len(caught.value.faults) == 2
    assert all(fault.file == "test.toml" for fault in caught.value.faults)


def test_long_lists_are_cut():
    many = tuple(Region(k, f"r{k}", np.array([k])) for k in range(20))
    with pytest.raises(InputError, match=r'"r7" and 12 more'):
        assigned({"a": "zzz"}, many, 20)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        (
            {"path": Path("other.msh")},
            r'part "b": path must be the same for all parts, \'bridge.msh\' \(got \'other.msh',
        ),
        ({"scale": 25.4}, r'part "b": scale must be the same for all parts of the file, 1 \(got 25.4\)'),
    ],
)
def test_one_file_and_one_scale(change, message):
    section = file_section(FILE, {"a": "web", "b": "flange"})
    second = replace(section.parts[1], mesh_region=replace(section.parts[1].mesh_region, **change))
    with pytest.raises(InputError, match=message):
        common_file(replace(section, parts=(section.parts[0], second)))
    assert common_file(section) == MeshRegion(FILE, "web", 1.0)
