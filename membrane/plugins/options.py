"""Options: a frozen dataclass filled from the keys of a study, each value checked."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import MISSING, Field, fields, is_dataclass
from enum import Enum
from functools import lru_cache
from pathlib import Path, PurePath
from types import UnionType
from typing import Annotated, Any, TypeVar, Union, get_args, get_origin, get_type_hints

import numpy as np

from membrane.errors import PluginError, Problem, StudyError
from membrane.plugins.sentences import sentence
from membrane.records.function import Function
from membrane.units import Quantity
from membrane.wording import nearest, shown

T = TypeVar("T")


def read_options(
    kind: type[T], keys: Mapping[str, Any], beside: Sequence[str] = (), base: Path | None = None
) -> T:
    """An instance of the dataclass ``kind`` from a table of a study.

    beside : other keys of the table, which an unknown key may have been meant for
    base : the folder that relative paths of files start from

    Unknown keys, missing keys and bad values are all reported in one StudyError, with
    paths relative to the table; so is a ValueError of the dataclass's own
    ``__post_init__``. Raises PluginError where ``kind`` is not a dataclass with hints.
    """
    known = _hints(kind)
    problems = [_unknown(key, (*known, *beside)) for key in keys if key not in known]
    problems += [
        _missing(f.name, known[f.name])
        for f in _fields(kind)
        if f.name not in keys and _required(f)
    ]
    values: dict[str, Any] = {}
    for key in known.keys() & keys.keys():
        problems += _read_into(values, key, known[key], keys[key], base or Path())
    if not problems:
        try:
            return kind(**values)
        except ValueError as failure:
            problems = [Problem("", str(failure))]
    raise StudyError(sorted(problems, key=lambda problem: _place(problem, known)))


def plain(options: Any) -> Any:
    """Options as plain data in the study file's own keys; what is None is left out."""
    if isinstance(options, Function):
        return plain(options.source)
    if is_dataclass(options):
        pairs = ((f.name, getattr(options, f.name)) for f in fields(options))
        return {name: plain(value) for name, value in pairs if value is not None}
    if isinstance(options, Mapping):
        return {str(key): plain(value) for key, value in options.items()}
    if isinstance(options, Enum):
        return options.value
    if isinstance(options, PurePath):
        return str(options)
    if isinstance(options, list | tuple | set | frozenset):
        return [plain(value) for value in options]
    return options


def unit_of(options: Any, name: str) -> str:
    """The SI unit of a field of options or of what it lists, "" where it has none."""
    return _unit(_hints(type(options))[name])


def _unit(hint: Any) -> str:
    quantity = _quantity(hint)
    inner = (_unit(part) for part in get_args(hint))
    return quantity.unit if quantity else next(filter(None, inner), "")


def _read_into(
    values: dict[str, Any], key: str, hint: Any, value: Any, base: Path
) -> list[Problem]:
    from pydantic import ValidationError

    try:
        values[key] = _adapter(hint).validate_python(_own(value), context={"base": base})
    except ValidationError as failure:
        return [Problem(*sentence(key, error)) for error in failure.errors()]
    return []


def _own(value: Any) -> Any:
    """Numbers and arrays of numpy, which scripts use, as Python's own."""
    return value.tolist() if isinstance(value, np.generic | np.ndarray) else value


@lru_cache(maxsize=512)
def _adapter(hint: Any) -> Any:
    from pydantic import TypeAdapter

    return TypeAdapter(_strict(hint))


def _strict(hint: Any) -> Any:
    """The same type, with a bool or a string no longer taken for a number."""
    from pydantic import Strict

    if hint in (int, float, str, bool):
        return Annotated[hint, Strict()]
    origin, inner = get_origin(hint), get_args(hint)
    if origin is UnionType or origin is Union:
        return Union[tuple(_strict(part) for part in inner)]  # noqa: UP007 (made at run time)
    if origin in (tuple, list):
        return origin[tuple(part if part is ... else _strict(part) for part in inner)]
    return hint


def _hints(kind: type) -> dict[str, Any]:
    """Field name -> type, with its units, for the fields that a study can set."""
    if not (isinstance(kind, type) and is_dataclass(kind)):
        raise PluginError(f"The options {kind!r} must be a frozen dataclass.")
    try:
        hints = get_type_hints(kind, include_extras=True)
    except NameError as failure:
        raise PluginError(f"The options of {kind.__module__} cannot be read: {failure}.") from None
    return {f.name: hints[f.name] for f in _fields(kind)}


def _fields(kind: type) -> list[Field[Any]]:
    return [f for f in fields(kind) if f.init]


def _required(field: Field[Any]) -> bool:
    return field.default is MISSING and field.default_factory is MISSING


def _missing(name: str, hint: Any) -> Problem:
    quantity = _quantity(hint)
    example = f" such as {shown(quantity.example)}" if quantity else ""
    return Problem(name, f"is missing; give it a value{example}.")


def _quantity(hint: Any) -> Quantity | None:
    found = (item for item in getattr(hint, "__metadata__", ()) if isinstance(item, Quantity))
    return next(found, None)


def _unknown(key: str, known: tuple[str, ...]) -> Problem:
    hint = nearest(key, known)
    return Problem(key, f"unknown key{hint if hint != '.' else _allowed(known)}")


def _allowed(known: tuple[str, ...]) -> str:
    return f"; known here are {', '.join(known)}." if known else "; no keys are known here."


def _place(problem: Problem, known: Mapping[str, Any]) -> tuple[int, str]:
    """Problems come in the order of the fields, unknown keys first."""
    order = list(known)
    key = problem.path.split("[")[0].split(".")[0]
    return (order.index(key) + 1 if key in order else 0, problem.path)
