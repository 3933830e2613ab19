"""Picture files: names, sizes, not blank, the same twice."""

from __future__ import annotations

import sys

import numpy as np
import pytest
from PIL import Image

from xsec_fem.errors import MissingLibraryError
from xsec_fem.report import two_processes
from xsec_fem.report.picture_files import write_pictures, write_sketch


def test_one_case_has_short_names(solved, tmp_path):
    files = write_pictures(solved("boards"), tmp_path)
    assert [file.name for file in files] == ["sketch.png", "tau_xz.png", "tau_xy.png", "tau.png"]
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(file.name for file in files)
    for file in files:
        with Image.open(file) as image:
            assert image.info["dpi"] == pytest.approx((150, 150), abs=0.1)  # stored in whole dots per metre
            pixels = np.asarray(image)
        assert pixels.shape[2] == 3
        assert min(pixels.shape[:2]) > 400
        ink = (pixels < 250).any(axis=2).mean()
        assert 0.02 < ink < 0.9
        # nothing touches the border: no text cut off
        border = [pixels[0], pixels[-1], pixels[:, 0], pixels[:, -1]]
        assert all((edge == 255).all() for edge in border)


def test_several_cases_carry_their_names(solved, tmp_path, monkeypatch):
    written = []
    for folder, both in (("a", False), ("b", True)):
        monkeypatch.setattr(two_processes, "_can_fork", lambda both=both: both)
        (tmp_path / folder).mkdir()
        files = write_pictures(solved("tee"), tmp_path / folder, two_processes=True)
        written.append([(file.name, file.read_bytes()) for file in files])
    assert written[0] == written[1]  # one process or two: the same files
    prefixes = ("down_at_the_centroid", "aside")
    expected = [f"{prefix}_{key}.png" for prefix in prefixes for key in ("tau_xz", "tau_xy", "tau")]
    assert [name for name, _ in written[0]] == ["sketch.png", *expected]


def test_a_vector_file_is_the_same_twice(solved, tmp_path):
    texts = []
    for _ in range(2):
        files = write_sketch(solved("boards").section, tmp_path, svg=True)
        texts.append(files[1].read_text())
    assert [file.name for file in files] == ["sketch.png", "sketch.svg"]
    assert texts[0] == texts[1]
    assert "Two boards" in texts[0]


def test_vector_files_stay_small_and_keep_their_text(solved, tmp_path):
    write_pictures(solved("tube"), tmp_path, svg=True)
    text = (tmp_path / "tau.svg").read_text()
    assert len(text) < 1_000_000
    assert "Thin tube" in text
    assert "[kPa]" in text


def test_text_that_the_font_lacks_raises_no_warning(solved, tmp_path):
    from dataclasses import replace

    section = replace(solved("boards").section, title="断面 $x^$")
    assert [file.name for file in write_sketch(section, tmp_path)] == ["sketch.png"]


def test_without_matplotlib_it_says_what_to_do(solved, tmp_path, monkeypatch):
    monkeypatch.setitem(sys.modules, "matplotlib.figure", None)
    with pytest.raises(MissingLibraryError, match=r"no pictures: matplotlib cannot be loaded .* run `xsec-fem doctor`"):
        write_pictures(solved("boards"), tmp_path)
    assert not list(tmp_path.iterdir())
