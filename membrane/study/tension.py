"""A tension: one number, a woven head's along and across, or a whole tensor."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from membrane.records.function import Function
from membrane.records.study import Tension
from membrane.study.table import Table
from membrane.units import Angle, PositiveVaryingLineTension, VaryingLineTension
from membrane.varying import is_varying

KEY = "tension"


@dataclass(frozen=True)
class _Uniform:
    tension: PositiveVaryingLineTension

    def record(self) -> Tension:
        return Tension.uniform(self.tension)


@dataclass(frozen=True)
class _Woven:
    along: PositiveVaryingLineTension
    across: PositiveVaryingLineTension
    angle: Angle = 0.0

    def record(self) -> Tension:
        return Tension.woven(self.along, self.across, self.angle)


@dataclass(frozen=True)
class _Full:
    xx: PositiveVaryingLineTension
    xy: VaryingLineTension
    yy: PositiveVaryingLineTension

    def __post_init__(self) -> None:
        numbers = [n for n in (self.xx, self.xy, self.yy) if not isinstance(n, Function)]
        # what varies is looked at all over the head, once there is one
        if len(numbers) == 3 and not numbers[0] * numbers[2] > numbers[1] ** 2:
            raise ValueError(
                "a membrane must be under tension in every direction: "
                "xx times yy must be greater than xy squared."
            )

    def record(self) -> Tension:
        return Tension.full(self.xx, self.xy, self.yy)


def read_tension(table: Table) -> Tension | None:
    """The tension at the key ``tension`` of the head or of a patch."""
    value = table.keys[KEY]
    if not isinstance(value, Mapping) or is_varying(value):
        uniform = table.read(_Uniform, {KEY: value})
        return None if uniform is None else uniform.record()
    inner = table.table(KEY)
    kind = _kind(frozenset(value))
    if inner is None or kind is None:
        table.refuse(KEY, "give {along, across, angle} or {xx, xy, yy}, not a mixture.")
        return None
    found = inner.read_all(kind)
    return None if found is None else found.record()


def _kind(keys: frozenset[str]) -> type[_Woven] | type[_Full] | None:
    woven, full = keys & {"along", "across", "angle"}, keys & {"xx", "xy", "yy"}
    if bool(woven) == bool(full):
        return None
    return _Woven if woven else _Full
