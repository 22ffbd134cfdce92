"""Parts of an edge: stretches by angle, by length or by its curves, each with a name."""

from __future__ import annotations

from dataclasses import dataclass
from math import pi
from typing import Any

from membrane.records.study import Along, EdgePart
from membrane.study.layers import read_name
from membrane.study.table import Table
from membrane.units import Angle, Length
from membrane.wording import nearest, shown

_ENDS = ("from", "to")
_KEYS = ("name", "edge", *_ENDS, "curves", "repeat")
_UNITS: dict[Along, tuple[str, Any]] = {Along.ANGLE: ("rad", Angle), Along.LENGTH: ("m", Length)}
_WANTED = 'expected an angle such as "30 deg" or a length along the edge such as "40 mm"'


@dataclass(frozen=True)
class _Keys:
    edge: str
    repeat: int = 1


@dataclass(frozen=True)
class _Curves:
    curves: tuple[int, int]


@dataclass(frozen=True)
class _Stretch:
    along: Along
    start: float
    stop: float


def read_edge_part(table: Table, known: tuple[str, ...] | None) -> EdgePart | None:
    """One of the parts of edges.

    known : names of the edges that can be split; None where a broken outline hides them
    """
    name = read_name(table)
    keys = table.read(_Keys, table.without("name", "curves", *_ENDS), _KEYS)
    stretch = _curves(table) if "curves" in table.keys else _between(table)
    if keys is not None and known is not None and keys.edge not in known:
        hint = nearest(keys.edge, known).removesuffix(".") or f"; the edges are {', '.join(known)}."
        table.refuse("edge", f"there is no edge {shown(keys.edge)}{hint}")
    if name is None or keys is None or stretch is None:
        return None
    _check_repeat(table, keys, stretch)
    return EdgePart(name, keys.edge, stretch.along, stretch.start, stretch.stop, keys.repeat)


def _curves(table: Table) -> _Stretch | None:
    for key in _ENDS:
        if key in table.keys:
            table.refuse(key, "stands beside curves; leave one out.")
    found = table.read(_Curves, table.only(("curves",)))
    if found is None:
        return None
    first, last = found.curves
    if not 1 <= first <= last:
        table.refuse("curves", "expected the first and the last curve, counted from 1.")
        return None
    return _Stretch(Along.CURVES, first - 1.0, float(last))


def _between(table: Table) -> _Stretch | None:
    ends = [_end(table, key) for key in _ENDS]
    start, stop = ends
    if start is None or stop is None:
        return None
    if start[0] is not stop[0]:
        table.refuse("to", f"is {_article(stop[0])} where from is {_article(start[0])}.")
        return None
    stretch = _Stretch(start[0], start[1], stop[1])
    if stretch.along is Along.LENGTH and not 0.0 <= stretch.start < stretch.stop:
        table.refuse("to", "must be a longer way along the edge than from, and neither negative.")
        return None
    if stretch.along is Along.ANGLE and _turn(stretch) in (0.0, 2 * pi):
        table.refuse("to", "is the angle that the part starts from; give the whole edge a support.")
        return None
    return stretch


def _end(table: Table, key: str) -> tuple[Along, float] | None:
    value: Any = table.keys.get(key)
    if value is None:
        table.refuse(key, 'is missing; give an angle such as "30 deg" or a length such as "40 mm".')
        return None
    for along, (unit, kind) in _UNITS.items():
        try:
            number = float(kind.__metadata__[0].read(value)) if isinstance(value, str) else None
        except ValueError:
            continue
        if number is not None:
            table.resolved[key] = f"{number!r} {unit}"
            return along, number
    table.refuse(key, f"{_WANTED}, got {shown(value)}.")
    return None


def _article(along: Along) -> str:
    return "an angle" if along is Along.ANGLE else "a length"


def _turn(stretch: _Stretch) -> float:
    return (stretch.stop - stretch.start) % (2 * pi)


def _check_repeat(table: Table, keys: _Keys, stretch: _Stretch) -> None:
    if keys.repeat < 1:
        table.refuse("repeat", f"expected at least 1 part, got {keys.repeat}.")
    if stretch.along is Along.CURVES and keys.repeat > 1:
        table.refuse("repeat", "needs from and to; curves are counted, not repeated.")
    if stretch.along is Along.ANGLE and keys.repeat * _turn(stretch) > 2 * pi * (1 + 1e-12):
        table.refuse("repeat", f"{keys.repeat} such parts do not fit into one turn.")
