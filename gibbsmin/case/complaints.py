"""What the schema finds wrong, in words for the person who wrote the file, with the line and the key."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from typing import Any, Final, get_args

from pydantic import ValidationError

from gibbsmin.case.fields import RuleError, Table
from gibbsmin.case.held_schema import Held
from gibbsmin.case.lines import Key
from gibbsmin.case.schema import CaseFrame
from gibbsmin.case.source import Source, dotted
from gibbsmin.errors import CaseError, nearest

_EXPECTED: Final = {
    "float_type": "a number",
    "int_type": "a whole number",
    "int_from_float": "a whole number",
    "string_type": "a text in quotes",
    "bool_type": "true or false",
    "list_type": "a list in [ ]",
    "dict_type": "a table",
    "model_type": "a table",
    "model_attributes_type": "a table",
    "string_too_short": "a text that is not empty",
    "finite_number": "a finite number",
}
_LIMITS: Final = {
    "greater_than": ("more than", "gt"),
    "greater_than_equal": ("at least", "ge"),
    "less_than": ("less than", "lt"),
    "less_than_equal": ("at most", "le"),
}
_MOST: Final = 5


def complaint(error: ValidationError, source: Source, kind: type[CaseFrame]) -> CaseError:
    """Turn what the schema found into one error.

    Parameters
    ----------
    error : ValidationError
        From the schema.
    source : Source
        The file, for the lines.
    kind : type of CaseFrame
        What the file was read as.

    Returns
    -------
    CaseError
        For the first problem in the file; further ones follow in its message, a line each.
    """
    problems: dict[Key, str] = {}
    for detail in error.errors(include_url=False):
        key, message = _explain(detail, kind)
        problems.setdefault(key, message)
    found = [source.error(message, key) for key, message in problems.items()]
    found.sort(key=lambda one: one.line or sys.maxsize)
    first, rest = found[0], found[1:]
    more = [f"\n  also line {one.line}: {one.key}: {one.message}" for one in rest[: _MOST - 1]]
    if len(rest) >= _MOST:
        more.append(f"\n  and {len(rest) - _MOST + 1} more")
    return CaseError(first.message + "".join(more), first.file, first.key, first.line)


def _explain(detail: Any, case: type[CaseFrame]) -> tuple[Key, str]:
    """Key and message of one problem."""
    kind, value, context = detail["type"], detail["input"], detail.get("ctx", {})
    key = _inside(detail["loc"])
    if kind == "value_error":
        cause = context["error"]
        deeper = cause.key if isinstance(cause, RuleError) else ()
        return (*key, *deeper), str(cause)
    if kind == "extra_forbidden":
        return key, _unknown(key, case)
    if kind == "missing":
        return key, f"is missing: {_purpose(key, case)}"
    if kind in _LIMITS:
        words, limit = _LIMITS[kind]
        return key, f"expected {words} {context[limit]}, got {value!r}"
    if kind == "literal_error":
        return key, f"expected {context['expected']}, got {_found(value)}"
    if key in (("sweep",), ("stage",)):
        return key, f"expected a list of tables; write each as [[{key[0]}]], in double brackets"
    return key, f"expected {_EXPECTED.get(kind, 'something else')}, got {_found(value)}"


def _inside(loc: tuple[Any, ...]) -> Key:
    """Path of a problem in the file; what the schema adds for its own use is left out."""
    own = {"float", "str"}
    return tuple(part for place, part in enumerate(loc) if not (place >= 2 and part in own))


def _unknown(key: Key, case: type[CaseFrame]) -> str:
    """Say that a key does not exist, and which do."""
    word = str(key[-1])
    if len(key) == 1:
        known = list(case.model_fields)
        if word == "held" and "stage" in known:
            return "is for a single mixture; in a train every [[stage]] holds its own"
        return f"there is no such table or key in this version{_choices(word, known)}"
    if key[0] == "held":
        energy = {"enthalpy": "heat", "internal_energy": "heat"}
        hint = f"; its place is taken by {energy[word]}, counted from the feeds" if word in energy else ""
        return f"cannot be held in a case{hint}{_choices(word, keys_of(Held))}"
    known = keys_of(_table_at(key[:-1], case))
    return f"there is no key of this name{_choices(word, known)}"


def _choices(word: str, known: list[str]) -> str:
    return f"{nearest(word, known) or ';'} known here are {', '.join(known)}"


def keys_of(table: type[Table]) -> list[str]:
    """Names of the keys of a table, as in the file."""
    return [field.alias or name for name, field in table.model_fields.items()]


def _table_at(key: Key, case: type[CaseFrame]) -> type[Table]:
    """Kind of the table at a path; names of feeds and numbers of list entries lead on to what they are."""
    table: type[Table] = case
    for part in key:
        field = next((one for name, one in table.model_fields.items() if (one.alias or name) == part), None)
        table = table if field is None else next(_tables_in(field.annotation), table)
    return table


def _tables_in(annotation: Any) -> Iterator[type[Table]]:
    """Kinds of tables that an annotation holds."""
    if isinstance(annotation, type) and issubclass(annotation, Table):
        yield annotation
    for part in get_args(annotation):
        yield from _tables_in(part)


def _purpose(key: Key, case: type[CaseFrame]) -> str:
    """Say what a missing key is for, with an example."""
    table = _table_at(key[:-1], case)
    field = next((one for name, one in table.model_fields.items() if (one.alias or name) == key[-1]), None)
    if field is None or not field.examples:
        return f"expected {dotted(key)}"
    example = field.examples[0]
    purpose = str(field.description).split(". ")[0].rstrip(".")
    shown = f"a table [{dotted(key)}]" if isinstance(example, dict) else f"for example {key[-1]} = {_toml(example)}"
    return f"{purpose[0].lower()}{purpose[1:]}; {shown}"


def _toml(value: Any) -> str:
    return f'"{value}"' if isinstance(value, str) else repr(value)


def _found(value: Any) -> str:
    """Show a value by its kind."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, dict):
        return "a table"
    if isinstance(value, list):
        return "a list"
    text = repr(value)
    return text if len(text) <= 60 else text[:57] + "..."
