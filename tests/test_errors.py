"""The error tree and the one-line form of a fault."""

import pytest

from xsec_fem import errors


@pytest.mark.parametrize("name", ["InputError", "MeshingError", "MissingLibraryError", "SolveError"])
def test_one_base_class_catches_all(name):
    assert issubclass(getattr(errors, name), errors.XsecError)
    assert name in errors.__doc__


def test_fault_reads_as_one_line():
    fault = errors.Fault(
        "five_boards.toml", 'parts[1] "board 2": height', "must be > 0", "-40", "Give the board's depth."
    )
    assert str(fault) == (
        'five_boards.toml: parts[1] "board 2": height must be > 0 (got -40). Give the board\'s depth.'
    )


@pytest.mark.parametrize(
    ("fault", "line"),
    [
        (errors.Fault("a.toml", "units", "is missing"), "a.toml: units is missing."),
        (errors.Fault("", "radius", "must fit", "8"), "radius must fit (got 8)."),
        (errors.Fault("a.toml", "", "is not TOML", None, "Mend line 3."), "a.toml is not TOML. Mend line 3."),
    ],
)
def test_missing_pieces_leave_no_marks(fault, line):
    assert str(fault) == line


def test_input_error_lists_every_fault():
    faults = [errors.Fault("a.toml", f"parts[{k}]", "must touch") for k in range(3)]
    error = errors.InputError(faults)
    assert error.faults == tuple(faults)
    assert str(error).splitlines() == [str(fault) for fault in faults]


def test_input_error_needs_a_fault():
    with pytest.raises(ValueError, match=r"InputError needs at least one fault \(got \[\]\)"):
        errors.InputError([])
