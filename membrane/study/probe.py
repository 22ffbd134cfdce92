"""What the numbers of a sound study may be, found by reading the study with others there."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import cached_property
from typing import Any

from membrane.errors import Problem
from membrane.numeric_keys import Steps, found_at, numeric_keys, replaced
from membrane.wording import nearest, shown

Read = Callable[[Mapping[str, Any]], tuple[Mapping[str, Any], tuple[Problem, ...]]]
"""From plain data to the same in SI numbers, and the problems in it."""


class Probe:
    """A sound study's plain data in SI numbers, and the reader that judges others."""

    def __init__(self, data: Mapping[str, Any], read: Read) -> None:
        self._data = data
        self._read = read

    @cached_property
    def keys(self) -> dict[str, Steps]:
        """Path of each number of the study, and the way to it."""
        return numeric_keys(self._data)

    def find(self, key: str) -> Steps:
        """The way to a number. Raises ValueError with a sentence where there is none."""
        if key in self.keys:
            return self.keys[key]
        below = [path for path in self.keys if path.startswith((f"{key}.", f"{key}["))]
        if below:
            raise ValueError(f"{shown(key)} is not one number; name one of {', '.join(below)}.")
        hint = nearest(key, self.keys)
        remedy = hint if hint != "." else "; give the study a value there first."
        raise ValueError(f"the study has no number {shown(key)}{remedy}")

    def is_whole(self, key: str) -> bool:
        """Whether the study counts something there."""
        return isinstance(found_at(self._data, self.keys[key]), int)

    def number(self, key: str, value: Any) -> float:
        """The SI number of a value of a key. Raises ValueError with a sentence."""
        if not isinstance(value, int | float | str) or isinstance(value, bool):
            raise ValueError(f"expected a number, with its unit in quotes, got {shown(value)}.")
        steps = self.keys[key]
        data, problems = self._read(replaced(self._data, steps, value))
        for problem in problems:
            if key.startswith(problem.path):
                raise ValueError(problem.sentence)
        return found_at(data, steps)  # type: ignore[no-any-return]
