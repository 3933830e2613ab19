"""The validation bites: every plausible bug put into the package is caught by a case; so is a list of bugs that is too short."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from tests.mutation import MUTANTS, chosen_ids
from xsec_fem.theory import poisson

ROOT = Path(__file__).parents[2]


@pytest.mark.slow
def test_every_mutant_is_caught() -> None:
    run = subprocess.run(
        [sys.executable, "-m", "tests.mutation", "--first"],
        cwd=ROOT,
        capture_output=True,
        text=True,
        check=False,
        timeout=500,
    )
    assert run.returncode == 0, run.stdout + run.stderr
    assert "SURVIVES" not in run.stdout
    assert "without one 0 miss" in run.stdout


def test_there_are_enough_mutants_with_names_of_their_own() -> None:
    names = [mutant.name for mutant in MUTANTS]
    assert len(names) >= 12
    assert len(set(names)) == len(names)
    assert len(chosen_ids()) < len(chosen_ids(everything=True))


def test_a_mutant_is_in_the_package_only_while_it_is_applied() -> None:
    from xsec_fem.theory import warping

    right = poisson.poisson_term
    mutant = next(mutant for mutant in MUTANTS if mutant.name == "nu sign")
    with mutant.applied():
        assert poisson.poisson_term is not right
        assert warping.poisson_term is poisson.poisson_term  # where it was imported by name, too
    assert poisson.poisson_term is right
    assert warping.poisson_term is right


@pytest.mark.parametrize("name", [mutant.name for mutant in MUTANTS])
def test_every_mutant_changes_something_that_is_there(name: str) -> None:
    mutant = next(mutant for mutant in MUTANTS if mutant.name == name)
    before = vars(mutant.where)[mutant.attribute]
    with mutant.applied():
        assert vars(mutant.where)[mutant.attribute] is not before
    assert vars(mutant.where)[mutant.attribute] is before


def test_an_unknown_name_is_refused() -> None:
    run = subprocess.run(
        [sys.executable, "-m", "tests.mutation", "none such"], cwd=ROOT, capture_output=True, text=True, check=False
    )
    assert run.returncode == 2
    assert "no mutant is called none such" in run.stderr
