"""An axis of a sweep: a number of the study, and the values that it takes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.records.sweep import Axis, Pick, Spacing
from membrane.study.probe import Probe
from membrane.study.table import Table
from membrane.wording import shown

MOST_VALUES = 1_000_000
"""Values of one axis, all of which are held in memory."""

_ENDS = ("from", "to")
_VALUES = ("values", *_ENDS)


@dataclass(frozen=True)
class _Keys:
    key: str
    steps: int | None = None
    spacing: Spacing | None = None


def read_axis(table: Table, probe: Probe, pick: Pick) -> Axis | None:
    """One of the axes; None where a problem has been noted."""
    keys = table.read(_Keys, table.without(*_VALUES), _VALUES)
    if keys is None or not _is_known(table, probe, keys.key):
        return None
    listed = "values" in table.keys
    if not (_fit_listed(table) if listed else _fit_ends(table, keys, pick)):
        return None
    values = _values(table, probe, keys.key) if listed else _ends(table, probe, keys)
    if values is None:
        return None
    between = not listed and pick is Pick.RANDOM
    if not listed and not between:
        values = spaced(values[0], values[1], keys.steps or 0, keys.spacing or Spacing.LINEAR)
    whole = probe.is_whole(keys.key)
    if whole and any(value != round(value) for value in values):
        table.refuse("", f"{keys.key} takes whole numbers; give them as values.")
        return None
    return Axis(
        keys.key, probe.find(keys.key), values, between, keys.spacing or Spacing.LINEAR, whole
    )


def spaced(low: float, high: float, steps: int, spacing: Spacing) -> tuple[float, ...]:
    """``steps`` numbers from one end to the other, both of them included."""
    space = np.linspace if spacing is Spacing.LINEAR else np.geomspace
    return tuple(space(low, high, steps).tolist())


def _is_known(table: Table, probe: Probe, key: str) -> bool:
    try:
        probe.find(key)
    except ValueError as failure:
        table.refuse("key", str(failure))
        return False
    return True


def _fit_listed(table: Table) -> bool:
    beside = [key for key in (*_ENDS, "steps", "spacing") if key in table.keys]
    for key in beside:
        table.refuse(key, "stands beside values; leave one out.")
    values = table.keys["values"]
    if not isinstance(values, list | tuple):
        table.refuse("values", f"expected a list of values, got {shown(values)}.")
    elif not values:
        table.refuse("values", "is empty; give at least one value.")
    else:
        return not beside
    return False


def _fit_ends(table: Table, keys: _Keys, pick: Pick) -> bool:
    before = len(table.problems.found)
    for key in _ENDS:
        if key not in table.keys:
            table.refuse(key, "is missing; give from and to, or values.")
    if pick is Pick.RANDOM and keys.steps is not None:
        table.refuse("steps", "does nothing in a random sweep, whose count says how many.")
    elif pick is Pick.GRID and keys.steps is None:
        table.refuse("steps", "is missing; say how many values from one end to the other.")
    elif keys.steps is not None and not 2 <= keys.steps <= MOST_VALUES:
        table.refuse("steps", f"expected from 2 to {MOST_VALUES} values, got {keys.steps}.")
    return len(table.problems.found) == before


def _ends(table: Table, probe: Probe, keys: _Keys) -> tuple[float, ...] | None:
    ends = [_number(table, probe, keys.key, end, table.keys[end]) for end in _ENDS]
    low, high = ends
    if low is None or high is None:
        return None
    table.resolved.update({"from": low, "to": high})
    if keys.spacing is Spacing.LOGARITHMIC and not low * high > 0.0:
        table.refuse("spacing", "logarithmic spacing needs both ends above zero.")
    elif low == high:
        table.refuse("to", "is the same as from; give values = [one] for a single value.")
    else:
        return low, high
    return None


def _values(table: Table, probe: Probe, key: str) -> tuple[float, ...] | None:
    given = table.keys["values"]
    numbers = [
        _number(table, probe, key, f"values[{place}]", value)
        for place, value in enumerate(given, 1)
    ]
    table.resolved["values"] = numbers
    found = tuple(number for number in numbers if number is not None)
    return found if len(found) == len(numbers) else None


def _number(table: Table, probe: Probe, key: str, place: str, value: object) -> float | None:
    try:
        return probe.number(key, value)
    except ValueError as failure:
        table.refuse(place, str(failure))
        return None
