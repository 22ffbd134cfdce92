"""The frequencies of a sweep against its first axis, as they are drawn."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.records.arrays import Floats, Ints
from membrane.records.diagram import Diagram, Panel
from membrane.records.sweep import Axis, Spacing, Sweep
from membrane.sweep.branched import in_order
from membrane.sweep.results import SweepResults

MOST_PANELS = 16
"""Choices of values on the other axes that are drawn, the first and the last among them."""


def diagram(title: str, sweep: Sweep, units: Sequence[str], results: SweepResults) -> Diagram:
    """A panel for each choice of values on the other axes; of very many, some spread evenly.

    units : of the axes, "" for a plain number
    """
    first, *others = sweep.axes
    places = np.array(first.values)[in_order(first)]
    shape = [len(axis.values) for axis in sweep.axes]
    numbers = np.reshape(np.arange(1, sweep.size + 1), shape)[np.ix_(*map(in_order, sweep.axes))]
    choices = list(np.ndindex(*shape[1:]))
    shown = np.unique(np.linspace(0, len(choices) - 1, MOST_PANELS).round().astype(np.int64))
    titles = [_title(others, units[1:], choices[n]) for n in shown]
    walks = [numbers[(slice(None), *choices[n])] for n in shown]
    return Diagram(
        title,
        ", ".join(filter(None, (first.key, _raised(units[0])))),
        places,
        tuple(_panel(t, places, w, results) for t, w in zip(titles, walks, strict=True)),
        logarithmic=first.spacing is Spacing.LOGARITHMIC,
    )


def _panel(title: str, places: Floats, numbers: Ints, results: SweepResults) -> Panel:
    """A walk through the points of some numbers; those without an answer leave a gap."""
    found = np.searchsorted(results.numbers, numbers) % len(results.numbers)
    done = (results.numbers[found] == numbers)[:, None]
    place_of = dict(zip(numbers.tolist(), places.tolist(), strict=True))
    return Panel(
        title,
        np.where(done, results.frequencies[found], np.nan),
        np.where(done, results.branches[found], 0),
        tuple((branch, place_of[n]) for branch, n in results.lost if n in place_of),
    )


def _title(axes: Sequence[Axis], units: Sequence[str], at: Sequence[int]) -> str:
    values = (axis.values[in_order(axis)[place]] for axis, place in zip(axes, at, strict=True))
    named = zip(axes, values, units, strict=True)
    return "\n".join(f"{a.key} = {value:g} {_raised(unit)}".rstrip() for a, value, unit in named)


def _raised(unit: str) -> str:
    """kg/m² for kg/m^2."""
    return unit.replace("^2", "²").replace("^3", "³")
