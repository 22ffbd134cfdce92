"""From a table of the study, {formula = …}, {csv = …} or {function = …}, to a function."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import Enum
from pathlib import Path
from typing import Any

from membrane.errors import StudyError
from membrane.records.breaks import Break
from membrane.records.function import Function, Rule
from membrane.units import Point
from membrane.varying.breaks import breaks_of
from membrane.varying.formula import Formula
from membrane.varying.scattered import through_points
from membrane.varying.scripted import from_script
from membrane.varying.smoothness import is_smooth_at_origin
from membrane.wording import listed, shown

KINDS = ("formula", "csv", "function")
ORIGIN = (0.0, 0.0)

Points = tuple[tuple[float, float], ...]


class KeyProblem(ValueError):
    """Something wrong with one key of a value that is a table."""

    def __init__(self, key: str, sentence: str) -> None:
        super().__init__(sentence)
        self.key = key


class Outside(Enum):
    """What holds outside the convex hull of scattered points."""

    REFUSED = "refused"
    NEAREST = "nearest"


@dataclass(frozen=True)
class _Found:
    """A rule, and where it is known not to be smooth."""

    rule: Rule
    kinks: Points = ()
    breaks: tuple[Break, ...] = ()
    notes: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True)
class _Varying:
    unit: str | None = None
    kinks: tuple[Point, ...] = ()


@dataclass(frozen=True, kw_only=True)
class _Formula(_Varying):
    formula: str

    def rule(self) -> _Found:
        formula = Formula.parsed(self.formula)
        kinks = () if is_smooth_at_origin(formula) else (ORIGIN,)
        breaks = breaks_of(formula)
        notes = tuple(_not_followed(self.formula, line) for line in breaks.unknown)
        return _Found(formula, kinks, breaks.known, notes)


@dataclass(frozen=True, kw_only=True)
class _Csv(_Varying):
    csv: str
    outside: Outside = Outside.REFUSED

    def rule(self) -> _Found:
        return _Found(through_points(Path(self.csv), self.outside is Outside.NEAREST))


@dataclass(frozen=True, kw_only=True)
class _Scripted(_Varying):
    function: str
    script: str | None = None

    def rule(self) -> _Found:
        if self.script is None:
            sentence = 'is missing; give the script with the function, such as "my_fields.py".'
            raise KeyProblem("script", sentence)
        file = Path(self.script)
        if file.suffix != ".py" or not file.is_file():
            raise KeyProblem("script", f"there is no Python file {file}.")
        return _Found(from_script(file, self.function))


_READERS = {"formula": _Formula, "csv": _Csv, "function": _Scripted}


def is_varying(value: Any) -> bool:
    """Whether a value of a study is meant to vary over the head."""
    return isinstance(value, Mapping) and any(kind in value for kind in KINDS)


def read_function(value: Mapping[str, Any]) -> tuple[Function, str | None]:
    """The function that a table describes, in its own unit, and that unit's name.

    Raises KeyProblem with the key and a sentence.
    """
    from membrane.plugins.options import plain, read_options

    kind, *others = (kind for kind in KINDS if kind in value)
    if others:
        raise KeyProblem("", f"give one of {listed(KINDS)}, not {' and '.join((kind, *others))}.")
    try:
        keys: Any = read_options(_READERS[kind], value)
    except StudyError as error:
        first = error.problems[0]
        raise KeyProblem(first.path, first.sentence) from None
    try:
        found = keys.rule()
    except KeyProblem:
        raise
    except ValueError as failure:
        raise KeyProblem(kind, str(failure)) from None
    kinks = (*found.kinks, *keys.kinks)
    return Function(plain(keys), found.rule, kinks, found.breaks, found.notes), keys.unit


def _not_followed(formula: str, line: str) -> str:
    return (
        f"The formula {shown(formula)} has a jump or a kink where {shown(line)}, which the mesh "
        "does not follow; draw a patch whose border runs there, even one that adds nothing."
    )
