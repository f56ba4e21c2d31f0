"""JSON in and out by the types of dataclasses: one declaration gives the check of a request and its description."""

import math
from collections.abc import Mapping
from dataclasses import MISSING, Field, fields, is_dataclass
from functools import cache
from types import NoneType, UnionType
from typing import Any, Literal, TypeAlias, Union, get_args, get_origin, get_type_hints

from curvelab.errors import InputError

Schema: TypeAlias = dict[str, Any]

LARGEST = 1e100
"""No quantity is larger, and what is reckoned from it is still a number."""

SHOWN = 60
"""Longest part of a wrong value that a message repeats."""

_PLAIN: Mapping[Any, Schema] = {
    float: {"type": "number"},
    int: {"type": "integer"},
    str: {"type": "string"},
    bool: {"type": "boolean"},
    NoneType: {"type": "null"},
    Any: {},
}
_EXPECTED: Mapping[Any, str] = {
    float: f"a number of at most {LARGEST:g}",
    int: "a whole number",
    str: "a text",
    bool: "true or false",
    NoneType: "null",
}


@cache
def hints_of(record: type) -> Mapping[str, Any]:
    """The types of a dataclass's fields, resolved."""
    return get_type_hints(record)


def schema_of(kind: Any) -> Schema:
    """The JSON Schema (2020-12) of a type: what `value_of` takes."""
    origin, arguments = get_origin(kind), get_args(kind)
    if kind in _PLAIN:
        return dict(_PLAIN[kind])
    if is_dataclass(kind) and isinstance(kind, type):
        return _record_schema(kind)
    if origin is Literal:
        return {"enum": list(arguments)}
    if origin in (Union, UnionType):
        return {"anyOf": [schema_of(each) for each in arguments]}
    return _list_schema(arguments) if origin is tuple else {"type": "object"}


def _list_schema(kinds: tuple[Any, ...]) -> Schema:
    if kinds[1:] == (...,):
        return {"type": "array", "items": schema_of(kinds[0])}
    each = [schema_of(kind) for kind in kinds]
    return {"type": "array", "prefixItems": each, "items": False, "minItems": len(kinds)}


def _record_schema(record: type) -> Schema:
    hints = hints_of(record)
    properties: Schema = {}
    kind = getattr(record, "kind", None)
    if isinstance(kind, str):
        properties["kind"] = {"const": kind}
    for each in fields(record):
        properties[each.name] = {**schema_of(hints[each.name]), **dict(each.metadata)}
    needed = (["kind"] if isinstance(kind, str) else []) + [each.name for each in fields(record) if is_needed(each)]
    return {"type": "object", "properties": properties, "required": needed, "additionalProperties": False}


def is_needed(field: "Field[Any]") -> bool:
    """Whether a field has no default."""
    return field.default is MISSING and field.default_factory is MISSING


def value_of(kind: Any, given: Any, place: str) -> Any:
    """What was given, as a value of the type.

    Raises
    ------
    InputError
        It is something else; the message says where.
    """
    if is_dataclass(kind) and isinstance(kind, type):
        return _record_of(kind, given, place)
    origin, arguments = get_origin(kind), get_args(kind)
    if origin is Literal:
        if not isinstance(given, str | int) or given not in arguments:
            raise wrong(given, place, f"one of: {', '.join(map(str, arguments))}")
        return given
    if origin in (Union, UnionType):
        return _union_of(arguments, given, place)
    if origin is tuple:
        return _list_of(arguments, given, place)
    if origin is Mapping or kind is Mapping:
        if not isinstance(given, dict):
            raise wrong(given, place, "an object")
        return given
    return given if kind is Any else _plain_of(kind, given, place)


def _plain_of(kind: Any, given: Any, place: str) -> Any:
    if kind is float and isinstance(given, int | float) and not isinstance(given, bool):
        try:
            number = float(given)
        except OverflowError:
            number = math.inf
        if abs(number) <= LARGEST:
            return number
    elif kind is int and isinstance(given, int) and not isinstance(given, bool):
        if abs(given) < 2**31:
            return given
    elif kind in (str, bool, NoneType) and type(given) is kind:
        return given
    raise wrong(given, place, _EXPECTED[kind])


def _union_of(kinds: tuple[Any, ...], given: Any, place: str) -> Any:
    """The first of the types that takes it; of records, the one of its ``kind``."""
    records: dict[str, type] = {each.kind: each for each in kinds if hasattr(each, "kind")}
    if records:
        kind = given.get("kind") if isinstance(given, dict) else None
        if not isinstance(kind, str) or kind not in records:
            raise wrong(kind, f"{place}.kind", f"one of: {', '.join(records)}")
        return _record_of(records[kind], given, place)
    problem: InputError | None = None
    for each in sorted(kinds, key=lambda kind: kind is NoneType):
        try:
            return value_of(each, given, place)
        except InputError as error:
            problem = problem or error
    assert problem is not None
    raise problem


def _list_of(kinds: tuple[Any, ...], given: Any, place: str) -> tuple[Any, ...]:
    many = kinds[1:] == (...,)
    if not isinstance(given, list) or not (many or len(given) == len(kinds)):
        raise wrong(given, place, "a list" if many else f"a list of {len(kinds)}")
    each = [kinds[0]] * len(given) if many else list(kinds)
    return tuple(value_of(kind, item, f"{place}[{k}]") for k, (kind, item) in enumerate(zip(each, given, strict=True)))


def _record_of(record: type, given: Any, place: str) -> Any:
    if not isinstance(given, dict):
        raise wrong(given, place, "an object")
    hints, known = hints_of(record), {each.name: each for each in fields(record)}
    for name in given:
        if name not in known and not (name == "kind" and hasattr(record, "kind")):
            raise InputError(f"{place}: '{shown(name)}' is not known", f"Expected: {', '.join(known) or 'nothing'}")
    for name, field in known.items():
        if name not in given and is_needed(field):
            raise InputError(f"{place}: '{name}' is missing", f"Expected: {', '.join(known)}")
    return record(**{name: value_of(hints[name], given[name], f"{place}.{name}") for name in known if name in given})


def wrong(given: Any, place: str, expected: str) -> InputError:
    """The error for a value that is of another type."""
    return InputError(f"{place} = {shown(given)} is not valid", f"Expected {expected}")


def shown(value: Any) -> str:
    """A value as a message shows it: short and on one line."""
    text = " ".join(str(value).split())
    return text if len(text) <= SHOWN else f"{text[:SHOWN]}..."
