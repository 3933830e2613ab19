"""Folders, fields.vtu and its names."""

from __future__ import annotations

from pathlib import Path

import meshio
import numpy as np
import pytest

from xsec_fem.cli.main import main
from xsec_fem.cli.output_files import output_folders, writing_to
from xsec_fem.errors import InputError

FIELDS = {"tau_xy", "tau_xz", "tau", "tau_vector", "sigma_x", "von_mises"}


@pytest.mark.parametrize(
    ("files", "out", "folders"),
    [
        (["a.toml"], None, ["out/a"]),
        (["dir/a.toml"], "x", ["x"]),
        (["a.toml", "b.toml"], "x", ["x/a", "x/b"]),
        (["a.toml", "d/a.toml", "e/a.toml"], None, ["out/a", "out/a_2", "out/a_3"]),
    ],
)
def test_folders(files, out, folders):
    found = output_folders([Path(file) for file in files], Path(out) if out else None)
    assert [folder.as_posix() for folder in found] == folders


def test_failures_to_write_are_faults():
    said = r"^output folder x cannot be written: no space left on device\. Give another"
    with pytest.raises(InputError, match=said), writing_to(Path("x")):
        raise OSError(28, "No space left on device")


def test_fields_of_one_case(boards, here):
    assert main(["solve", str(boards), "--quiet", "--no-pictures"]) == 0
    grid = meshio.read(here / "out" / "boards" / "fields.vtu")
    assert set(grid.point_data) == FIELDS
    tau = np.hypot(grid.point_data["tau_xy"], grid.point_data["tau_xz"])
    np.testing.assert_allclose(grid.point_data["tau"], tau, rtol=1e-12)
    np.testing.assert_allclose(grid.point_data["tau_vector"][:, 1], grid.point_data["tau_xz"])
    assert grid.point_data["tau_vector"].shape[1] == 3


def test_fields_of_several_cases_carry_their_names(tee, here):
    assert main(["solve", str(tee), "--quiet", "--no-pictures"]) == 0
    grid = meshio.read(here / "out" / "tee" / "fields.vtu")
    assert set(grid.point_data) == {f"{case} {name}" for case in ("down_at_the_centroid", "aside") for name in FIELDS}
