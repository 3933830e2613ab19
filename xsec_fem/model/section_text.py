"""From a path to the text of a section file, and from the text to its tables; every failure is a fault in plain words."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.wording import did_you_mean, value_text

_START = "Start from `xsec-fem starter rectangle`."
# what the TOML parser of the standard library says, put plainly: (its words, rule, remedy)
_SYNTAX = (
    ("twice", "declares a table a second time", "Give every material a name of its own; parts are [[parts]]."),
    ("immutable", "adds to a table or list that is already complete", "Write [[parts]] with two brackets for lists."),
    ("verwrite", "gives a key a second time", "Keep one of the two."),
    ("uplicate", "gives a key a second time", "Keep one of the two."),
    ("Unclosed array", "opens a list that is not closed", "Close it with ]."),
    ("Unclosed inline", "opens a table that is not closed", "Close it with }."),
    ("nterminated", "opens a quote that is not closed", "Close the quote on the same line."),
    ("Expected '\"'", "opens a quote that is not closed", "Close the quote on the same line."),
    ("Expected '='", "has no = after the key", 'Write key = value, for example width = 140 or name = "web".'),
    ("Expected newline", "goes on after the value", "Put one key = value on each line, and a # before a remark."),
    ("Expected ']'", "opens a table's name that is not closed", "Write [materials.steel] or [[parts]]."),
    ("Unescaped", "has a backslash in a text", 'Write paths with / or in \'single quotes\'.'),
    ("escape", "has a backslash in a text", 'Write paths with / or in \'single quotes\'.'),
    ("Invalid hex", "has a backslash in a text", "Write paths with / or in 'single quotes'."),
    ("Invalid date", "has a date that does not exist", 'Put text in "quotes".'),
    ("Illegal character", "has a character that is not allowed here", "Close quotes on the same line."),
    ("Invalid initial character", "has a key that is not allowed", 'Put names with spaces or letters like ü in "quotes".'),
    ("Invalid statement", "is not key = value, [table] or [[list]]", "Put a # before a remark."),
    ("Invalid value", "has a value that is not a number, text, list, true or false", 'Put text in "quotes".'),
)  # fmt: skip


def read_text(path: Path, file: str) -> tuple[str, bytes]:
    """Return the text of the file at `path` and its bytes; `file` is its name in messages.

    Raises
    ------
    InputError
        When there is no such file, or it is a folder, not readable, not UTF-8 text, or empty.
    """
    raw = _read_bytes(path, file)
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        raise _input_error(file, "", "is UTF-16 text", None, "Save it as UTF-8.")
    try:
        text = raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        remedy = "Give a section file (TOML, saved as UTF-8)."
        place = f"line {line}"
        raise _input_error(file, place, "is not UTF-8 text", f"byte {raw[error.start]:#04x}", remedy) from None
    if "\0" in text:
        raise _input_error(file, "", "is not a text file", None, "Give a section file (TOML, saved as UTF-8).")
    if not text.strip():
        raise _input_error(file, "", "is empty", None, _START)
    return text, raw


def parse_tables(text: str, file: str) -> dict[str, object]:
    """Return the tables of a TOML text; raises InputError with line and column when it is not TOML."""
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError([_syntax_fault(str(error), text, file)]) from None
    except RecursionError:
        raise _input_error(
            file, "", "nests lists or tables too deeply", None, "Leave out the extra brackets."
        ) from None
    except ValueError:  # the standard library refuses whole numbers of more than 4300 digits
        raise _input_error(file, "", "has a number with thousands of digits", None, "Write it as 1e9.") from None


def _read_bytes(path: Path, file: str) -> bytes:
    try:
        return path.read_bytes()
    except FileNotFoundError:
        raise _input_error(file, "", "does not exist", None, _near_files(path)) from None
    except IsADirectoryError:
        inside = ", ".join(sorted(found.name for found in path.glob("*.toml"))[:5])
        remedy = f"Give a file in it: {inside}." if inside else "Give a section file (TOML)."
        raise _input_error(file, "", "is a folder, not a section file", None, remedy) from None
    except (OSError, ValueError) as error:  # ValueError: a NUL character in the path
        reason = getattr(error, "strerror", None) or "its name is not allowed"
        raise _input_error(file, "", f"cannot be read: {reason}", None, "Check the path and its access.") from None


def _near_files(path: Path) -> str:
    folder = path.parent
    if not folder.is_dir():
        return f"There is no folder {value_text(str(folder))} either."
    names = sorted(found.name for found in folder.glob("*.toml"))
    return did_you_mean(path.name, names) if names else _START


def _syntax_fault(message: str, text: str, file: str) -> Fault:
    """Turn 'words (at line 3, column 9)' or 'words (at end of document)' into a fault that shows the line."""
    lines = text.splitlines()
    found = re.search(r"\(at line (\d+), column (\d+)\)", message)
    if found:
        line, column = int(found[1]), int(found[2])
        place = f"line {line}, column {column}"
        value = lines[line - 1].strip() if line <= len(lines) else ""
    else:
        place, value = f"line {len(lines)}, end of the file", lines[-1].strip() if lines else ""
    rule, remedy = next(
        ((rule, remedy) for words, rule, remedy in _SYNTAX if words in message), ("is not valid TOML", "")
    )
    return Fault(file, place, rule, value_text(value) if value else None, remedy)


def _input_error(file: str, place: str, rule: str, value: str | None, remedy: str) -> InputError:
    return InputError([Fault(file, place, rule, value, remedy)])
