"""The schema's complaints in our own words, also those that no table of the section file provokes today."""

from typing import Annotated, Literal

import pytest
from pydantic import BaseModel, ConfigDict, Field, Strict

from xsec_fem.errors import InputError
from xsec_fem.model.faults import FaultList, own_words


class Inner(BaseModel):
    model_config = ConfigDict(extra="forbid")
    depth: float = Field(description="whole depth")


class Outer(BaseModel):
    model_config = ConfigDict(extra="forbid")
    width: Annotated[float, Strict()] = Field(1.0, description="Give the width.")
    count: Annotated[int, Field(ge=1, lt=9)] = 1
    mode: Literal["a", "b"] = "a"
    inner: Inner | None = None
    rows: list[Inner] = []
    either: Annotated[str, Strict()] | Annotated[int, Strict()] | None = None
    table: dict[str, int] = {}
    pattern: Annotated[str, Field(pattern="^x")] = "x"
    short: Annotated[str, Field(min_length=1)] = "x"
    few: Annotated[list[int], Field(max_length=3)] = []
    flag: Annotated[bool, Strict()] = True


@pytest.mark.parametrize(
    ("table", "lines"),
    [
        ({"width": "1"}, ['f: p: width must be a number (got "1"). Give the width.']),
        ({"count": 9}, ["f: p: count must be < 9 (got 9)."]),
        ({"count": 0}, ["f: p: count must be >= 1 (got 0)."]),
        ({"count": 1.5}, ["f: p: count must be a whole number (got 1.5)."]),
        ({"count": "one"}, ['f: p: count must be a whole number (got "one").']),
        ({"mode": "c"}, ['f: p: mode must be one of "a", "b" (got "c").']),
        ({"inner": 3}, ["f: p: inner must be a table (got 3)."]),
        ({"inner": {}}, ["f: p: inner needs depth. Give depth (whole depth)."]),
        ({"inner": {"depth": "?"}}, ['f: p: inner.depth must be a number (got "?"). Give depth (whole depth).']),
        ({"inner": {"depth": 1, "dept": 2}}, ['f: p: inner.dept is not a key of inner. Did you mean "depth"?']),
        ({"rows": [{"depth": 1}, {}]}, ["f: p: rows[1] needs depth. Give depth (whole depth)."]),
        ({"rows": 2}, ["f: p: rows must be a list (got 2)."]),
        ({"either": 1.5}, ['f: p: either must be text in "quotes" (got 1.5).']),
        ({"table": []}, ["f: p: table must be a table (got [])."]),
        ({"pattern": "y"}, ['f: p: pattern has a value that does not fit (got "y").']),
        ({"short": ""}, ['f: p: short must not be empty (got "").']),
        ({"few": [1, 2, 3, 4]}, ["f: p: few takes at most 3 entries (got [1, 2, 3, 4])."]),
        ({"flag": 1}, ["f: p: flag must be true or false (got 1)."]),
        ({"wdth": 1}, ['f: p: wdth is not a key of a thing. Did you mean "width"?']),
        ({"extra": 1}, ['f: p: extra is not a key of a thing. Did you mean "extras"?']),
        ({"str": 1, "list[int]": 2}, ["f: p: str is not a key of a thing.", 'f: p: "list[int]" is not a key of a thing.']),
    ],
)  # fmt: skip
def test_complaints_in_our_own_words(table, lines):
    faults = FaultList("f")
    assert faults.read(Outer, table, "p", "a thing", ["extras"]) is None
    said = [str(fault) for fault in faults.faults]
    assert [line.partition(" Known:")[0] for line in said] == lines or said == lines


def test_a_table_that_fits_is_returned():
    faults = FaultList("f")
    read = faults.read(Outer, {"width": 3.0, "either": 5}, "p", "a thing")
    assert read is not None
    assert (read.width, read.either, faults.faults) == (3.0, 5, [])
    faults.raise_if_any()


def test_a_fault_or_caution_is_noted_once_and_all_are_raised_together():
    faults = FaultList("f")
    for _ in range(2):
        faults.add("a", "must be > 0", "1")
        faults.caution("code", "message")
    faults.add("b", "needs c")
    assert faults.cautions == [("code", "message")]
    with pytest.raises(InputError, match=r"^f: a must be > 0 \(got 1\)\.\nf: b needs c\.$"):
        faults.raise_if_any()


def test_own_words_pass_through():
    error = own_words("must be {odd}", "Try again.")
    assert error.message() == "must be {odd}"
