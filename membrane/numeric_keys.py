"""The numbers of a study's plain data by their paths, such as patches.paste.added_density."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

Steps = tuple[str | int, ...]
"""The way to a number: keys of tables and places in lists, from 0."""


def numeric_keys(data: Mapping[str, Any]) -> dict[str, Steps]:
    """The path of every number in a study's plain data, and the way to it.

    A table in a list is named by its ``name``, any other entry by its place from 1.
    """
    return {path.removeprefix("."): steps for path, steps in _numbers(data, "", ())}


def found_at(data: Any, steps: Steps) -> Any:
    """What stands there. Raises KeyError or IndexError where nothing does."""
    for step in steps:
        data = data[step]
    return data


def replaced(data: Any, steps: Steps, value: Any) -> Any:
    """The same plain data with another value in one place; the rest is shared."""
    if not steps:
        return value
    first, *rest = steps
    copy: Any = dict(data) if isinstance(data, Mapping) else list(data)
    copy[first] = replaced(copy[first], tuple(rest), value)
    return copy


def _numbers(value: Any, path: str, steps: Steps) -> Iterator[tuple[str, Steps]]:
    if isinstance(value, int | float) and not isinstance(value, bool):
        yield path, steps
    elif isinstance(value, Mapping):
        for key, inner in value.items():
            yield from _numbers(inner, f"{path}.{key}", (*steps, key))
    elif isinstance(value, Sequence) and not isinstance(value, str):
        for place, inner in enumerate(value):
            yield from _numbers(inner, path + _entry(inner, place), (*steps, place))


def _entry(item: Any, place: int) -> str:
    name = item.get("name") if isinstance(item, Mapping) else None
    return f".{name}" if name else f"[{place + 1}]"
