"""Rules of the bundle made into models without validating them again: they were, when the bundle was made.

The bundle ties each entry to the digest of its file, so the data are those that passed. A test holds
that every rule made here equals the validated one.
"""

from __future__ import annotations

import types
from collections.abc import Callable
from datetime import date
from functools import cache
from typing import Annotated, Any, ForwardRef, Union, get_args, get_origin

from pydantic import BaseModel

Convert = Callable[[Any], Any]


def trusted(model: type[BaseModel], data: dict[str, Any]) -> Any:
    """An instance of `model` from data that passed its validation before."""
    values: dict[str, Any] = {}
    given: set[str] = set()
    for name, key, convert, default in _plan(model):
        if key in data:
            values[name] = convert(data[key])
            given.add(name)
        else:
            values[name] = default()
    made = model.__new__(model)
    object.__setattr__(made, "__dict__", values)
    object.__setattr__(made, "__pydantic_fields_set__", given)
    object.__setattr__(made, "__pydantic_extra__", None)
    object.__setattr__(made, "__pydantic_private__", None)
    return made


@cache
def _plan(model: type[BaseModel]) -> list[tuple[str, str, Convert, Callable[[], Any]]]:
    """For each field: its name, its key in the data, what turns plain data into its value, its default."""
    return [(name, field.alias or name, _converter(field.annotation, model), _default(field))
            for name, field in model.model_fields.items()]


def _default(field) -> Callable[[], Any]:
    if field.default_factory is not None:
        return field.default_factory
    value = field.default  # frozen models and plain values may be shared, lists and dicts may not
    return value.copy if isinstance(value, (list, dict)) else lambda: value


def _converter(annotation: Any, model: type[BaseModel]) -> Convert:
    if isinstance(annotation, (str, ForwardRef)):
        return lambda data: trusted(model, data)  # a model that holds its own kind
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return lambda data: trusted(annotation, data)
    if annotation is date:
        return lambda data: date.fromisoformat(data) if isinstance(data, str) else data
    if annotation is float:
        return float
    origin, parts = get_origin(annotation), get_args(annotation)
    if origin is Annotated:
        return _converter(parts[0], model)
    if origin in (Union, types.UnionType):
        return _of_union(parts, model)
    if origin is list:
        inner = _converter(parts[0], model)
        return lambda data: [inner(one) for one in data]
    if origin is dict:
        inner = _converter(parts[1], model)
        return lambda data: {key: inner(one) for key, one in data.items()}
    return lambda data: data


def _of_union(parts: tuple, model: type[BaseModel]) -> Convert:
    """Of `X | None` the X; of several, a number stays what it is and anything else is taken as written."""
    others = [part for part in parts if part is not type(None)]
    if len(others) != 1:
        return lambda data: data
    inner = _converter(others[0], model)
    return lambda data: None if data is None else inner(data)
