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
"""Values of the second axis that are drawn, both ends among them."""


def diagram(title: str, sweep: Sweep, units: Sequence[str], results: SweepResults) -> Diagram:
    """A panel for each value of the second axis; of very many, some that are spread evenly.

    units : of the axes, "" for a plain number
    """
    first, *others = sweep.axes
    order = in_order(first)
    places = np.array(first.values)[order]
    titles = _titles(others[0], units[1]) if others else [""]
    shown = np.unique(np.linspace(0, len(titles) - 1, MOST_PANELS).round().astype(np.int64))
    columns = in_order(others[0])[shown] if others else shown
    return Diagram(
        title,
        ", ".join(filter(None, (first.key, _raised(units[0])))),
        places,
        tuple(_panel(titles[c], places, 1 + order * len(titles) + c, results) for c in columns),
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


def _titles(axis: Axis, unit: str) -> list[str]:
    return [f"{axis.key} = {value:g} {_raised(unit)}".rstrip() for value in axis.values]


def _raised(unit: str) -> str:
    """kg/m² for kg/m^2."""
    return unit.replace("^2", "²").replace("^3", "³")
