"""The list of faults found while reading, and the schema's complaints put into our own words."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from typing import TypeVar, get_args

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails, PydanticCustomError

from xsec_fem.errors import Fault, InputError
from xsec_fem.model.wording import did_you_mean, key_text, listed, value_text, with_unit
from xsec_fem.units import UnitSystem

TableT = TypeVar("TableT", bound=BaseModel)
_OWN_WORDS = "own_words"


@dataclass
class FaultList:
    """Collects every fault and caution of one section file; `units` is None until the file has said them."""

    file: str
    units: UnitSystem | None = None
    faults: list[Fault] = field(default_factory=list)
    cautions: list[tuple[str, str]] = field(default_factory=list)

    def add(self, place: str, rule: str, value: str | None = None, remedy: str = "") -> None:
        """Note one fault; `place`, `rule`, `value` and `remedy` as in `Fault`."""
        fault = Fault(self.file, place, rule, value, remedy)
        if fault not in self.faults:
            self.faults.append(fault)

    def caution(self, code: str, message: str) -> None:
        """Note something that may be meant, but deserves a look."""
        if (code, message) not in self.cautions:
            self.cautions.append((code, message))

    def raise_if_any(self) -> None:
        """Raise one `InputError` with all faults, when there are any."""
        if self.faults:
            raise InputError(self.faults)

    def read(
        self, model: type[TableT], table: Mapping[str, object], place: str, kind: str, also: Iterable[str] = ()
    ) -> TableT | None:
        """Read one table of the file by its schema; None, and every complaint noted, when it does not fit.

        `kind` says what the table is ("a joint"); `also` are keys known beside those of the schema (for "did you
        mean").
        """
        try:
            return model.model_validate(dict(table))
        except ValidationError as error:
            for detail in _told_once(error.errors(include_url=False)):
                self._note(detail, model, place, kind, list(also))
            return None

    def _note(self, detail: ErrorDetails, model: type[BaseModel], place: str, kind: str, also: list[str]) -> None:
        steps = _steps(detail)
        if detail["type"] == "missing" and isinstance(steps[-1], str):
            self.add(_joined(place, _path(steps[:-1])), f"needs {steps[-1]}", None, _remedy(model, steps))
            return
        if detail["type"] == "extra_forbidden":
            inner, outer = _table_at(model, steps), len(steps) == 1
            known = [_key_of(inner, name) for name in inner.model_fields] + (also if outer else [])
            rule = f"is not a key of {kind}" if outer else f"is not a key of {_path(steps[:-1])}"
            self.add(_joined(place, _path(steps)), rule, None, did_you_mean(steps[-1], known))
            return
        if detail["type"] == "missing":  # an entry of a pair: the pair is the place
            steps = steps[:-1]
        rule, remedy = _rule(detail)
        key = next((str(step) for step in reversed(steps) if isinstance(step, str)), "")
        value = with_unit(detail["input"], key, self.units)
        self.add(_joined(place, _path(steps)), rule, value, remedy or _remedy(model, steps))


def own_words(rule: str, remedy: str = "") -> PydanticCustomError:
    """Return an error for a schema's validator to raise, whose text is kept as it is."""
    return PydanticCustomError(_OWN_WORDS, "{rule}", {"rule": rule, "remedy": remedy})


def _key_of(model: type[BaseModel], name: str) -> str:
    return model.model_fields[name].alias or name


def _remedy(model: type[BaseModel], steps: list[int | str]) -> str:
    """The sentence that the schema holds beside the key, or one made of its phrase; "" when it has none."""
    keys = [step for step in steps if isinstance(step, str)]
    inner = _table_at(model, steps)
    for name, info in inner.model_fields.items():
        if keys and _key_of(inner, name) == keys[-1] and info.description:
            return info.description if info.description.endswith(".") else f"Give {keys[-1]} ({info.description})."
    return ""


def _table_at(model: type[BaseModel], steps: list[int | str]) -> type[BaseModel]:
    """The schema of the table that holds the last key of a path."""
    for key in [step for step in steps if isinstance(step, str)][:-1]:
        annotations = [info.annotation for name, info in model.model_fields.items() if _key_of(model, name) == key]
        while annotations:
            annotation = annotations.pop()
            if isinstance(annotation, type) and issubclass(annotation, BaseModel):
                model = annotation
                break
            annotations.extend(get_args(annotation))
    return model


def _joined(place: str, path: str) -> str:
    return ": ".join(text for text in (place, path) if text)


def _path(steps: list[int | str]) -> str:
    text = ""
    for step in steps:
        text += f"[{step}]" if isinstance(step, int) else ("." if text else "") + key_text(step)
    return text


def _is_branch(step: int | str) -> bool:
    """True for the marks that the schema library puts into a path for a branch of a union or a wrapped type."""
    return isinstance(step, str) and bool(re.search(r"[\[(]|^(float|int|str|tuple|list|bool|none)$", step))


def _steps(detail: ErrorDetails) -> list[int | str]:
    """The path of a complaint in the user's file; the last step of these two kinds is a key, whatever it looks like."""
    loc = list(detail["loc"])
    last = loc[-1:] if detail["type"] in {"missing", "extra_forbidden"} else []
    return [step for step in loc[: len(loc) - len(last)] if not _is_branch(step)] + last


def _told_once(details: list[ErrorDetails]) -> list[ErrorDetails]:
    """Keep one complaint where several branches of a union complain about the same place.

    A list with wrong entries is also called too short by the schema library, which leaves them out when it counts.
    """
    kept: list[ErrorDetails] = []
    inner = {detail["loc"][:n] for detail in details for n in range(len(detail["loc"]))}
    details = [detail for detail in details if detail["type"] != "too_short" or detail["loc"] not in inner]
    seen: set[tuple[int | str, ...]] = set()
    for detail in details:
        steps = tuple(_steps(detail))
        branched = len(steps) < len(detail["loc"])
        if branched and steps in seen:
            continue
        seen.add(steps)
        kept.append(detail)
    return kept


def _rule(detail: ErrorDetails) -> tuple[str, str]:
    """Return (rule, remedy) of one complaint."""
    context = detail.get("ctx", {})
    if detail["type"] == _OWN_WORDS:
        return str(context["rule"]), str(context["remedy"])
    if detail["type"] == "literal_error":
        options = re.findall(r"'([^']*)'", str(context["expected"])) or [str(context["expected"])]
        return _one_of(options, detail["input"])
    context = {**context, "entry": isinstance(detail["loc"][-1], int)} if detail["loc"] else context
    phrase = _RULES.get(detail["type"])
    # the last resort has no wording of its own to pass on: it still says where, and shows the value
    return (phrase(context) if phrase else "has a value that does not fit"), ""


def _one_of(options: list[str], value: object) -> tuple[str, str]:
    near = did_you_mean(value, options) if isinstance(value, str) else ""
    return f"must be one of {listed(options)}", near if near.startswith("Did") else ""


def _bound(symbol: str, key: str) -> Callable[[Mapping[str, object]], str]:
    return lambda context: f"must be {symbol} {value_text(context[key])}"


def _fixed(text: str) -> Callable[[Mapping[str, object]], str]:
    return lambda context: text


_NUMBER = _fixed("must be a number")
_WHOLE = _fixed("must be a whole number")
_LIST = _fixed("must be a list")
_TABLE = _fixed("must be a table")
_PAIR = "must be a pair of numbers [y, z]"  # the only lists of fixed length in a section file are points
_RULES: dict[str, Callable[[Mapping[str, object]], str]] = {
    "greater_than": _bound(">", "gt"),
    "greater_than_equal": _bound(">=", "ge"),
    "less_than": _bound("<", "lt"),
    "less_than_equal": _bound("<=", "le"),
    "finite_number": _fixed("must be a finite number"),
    "float_type": _NUMBER,
    "float_parsing": _NUMBER,
    "int_type": _WHOLE,
    "int_parsing": _WHOLE,
    "int_parsing_size": _WHOLE,
    "int_from_float": _WHOLE,
    "string_type": _fixed('must be text in "quotes"'),
    "string_too_short": _fixed("must not be empty"),
    "bool_type": _fixed("must be true or false"),
    "bool_parsing": _fixed("must be true or false"),
    "list_type": _LIST,
    "tuple_type": lambda context: _PAIR if context.get("entry") else "must be a list",
    "model_type": _TABLE,
    "model_attributes_type": _TABLE,
    "dict_type": _TABLE,
    "missing": _fixed(_PAIR),
    "too_short": lambda context: f"needs at least {context['min_length']} entries",
    "too_long": lambda context: (
        _PAIR if context["max_length"] == 2 else f"takes at most {context['max_length']} entries"
    ),
    "value_error": lambda context: str(context["error"]),
}
