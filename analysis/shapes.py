"""Whether plain values from a file have the shape that a type asks for, before anything is made of them."""

import dataclasses
import math
import types
from collections.abc import Mapping, Sequence
from typing import Any, Union, get_args, get_origin, get_type_hints


def fits(value: Any, hint: Any) -> bool:
    """Return whether a value as JSON gives it can stand for a type: texts, numbers, lists for sequences, dicts for mappings and values."""
    origin, parts = get_origin(hint), get_args(hint)
    if origin in (Union, types.UnionType):
        return any(fits(value, part) for part in parts)
    if origin is tuple:
        return isinstance(value, list) and _fit_tuple(value, parts)
    if origin is not None and issubclass(origin, Mapping):
        return isinstance(value, dict) and all(_is_key(key, parts[0]) and fits(part, parts[1]) for key, part in value.items())
    if origin is not None and issubclass(origin, Sequence):
        return isinstance(value, list) and all(fits(part, parts[0]) for part in value)
    if dataclasses.is_dataclass(hint):
        return _fits_fields(value, hint)
    return _is_plain(value, hint)


def _is_plain(value: Any, hint: Any) -> bool:
    if hint is Any:
        return True
    if hint is float:
        return type(value) in (int, float) and math.isfinite(value)
    return value is None if hint in (None, types.NoneType) else type(value) is hint


def _is_key(key: str, hint: Any) -> bool:
    return hint is str or (hint is int and key.isascii() and key.isdigit() and len(key) < 12)


def _fit_tuple(values: list[Any], parts: tuple[Any, ...]) -> bool:
    if len(parts) == 2 and parts[1] is Ellipsis:
        return all(fits(value, parts[0]) for value in values)
    return len(values) == len(parts) and all(map(fits, values, parts))


def _fits_fields(value: Any, hint: Any) -> bool:
    """Return whether a dict by name, or a list by place, holds the fields of a dataclass."""
    hints = get_type_hints(hint)
    if isinstance(value, list):
        return len(value) == len(hints) and all(map(fits, value, hints.values()))
    return isinstance(value, dict) and all(name in hints and fits(part, hints[name]) for name, part in value.items())
