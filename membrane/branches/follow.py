"""Branch numbers for every mode of a path, or of a grid."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import count as counter

import numpy as np

from membrane.branches.shapes import Shapes
from membrane.branches.walk import LEAST, ModesAt, Station, Walk
from membrane.records.arrays import Floats, Ints

SAME = 2e-4
"""Relative distance below which eigenvalues are one cluster."""

REMEMBERED = 8
"""Places whose modes are kept: those that halved steps come back to."""


@dataclass(frozen=True)
class Lost:
    """A branch that could not be followed on to a place."""

    branch: int
    place: float


@dataclass(frozen=True)
class Followed:
    """Branches along a path.

    branches : (n_places, count), the branch of each mode, which are in rising order; the
        numbers are those of the modes at the first place, from 1, and higher for branches
        that come in later
    lost : wanted branches that ended, where they were first missing
    """

    branches: Ints
    lost: tuple[Lost, ...]


def follow(modes_at: ModesAt, places: Floats, count: int, same: float = SAME) -> Followed:
    """The lowest ``count`` modes followed along a path.

    modes_at : gives ``count`` + 4 modes at any place between the first and the last
    places : (n,), rising or falling
    same : relative distance below which eigenvalues are taken for equal
    """
    places = np.asarray(places, dtype=float)
    modes_at = lru_cache(REMEMBERED)(modes_at)
    first = modes_at(float(places[0]))
    numbers = np.arange(1, len(first.eigenvalues) + 1)
    start = Station(float(places[0]), first, numbers)
    fresh = counter(len(numbers) + 1).__next__
    return _gathered(_stations(modes_at, start, places, count, same, fresh), count)


def follow_grid(
    modes_at: Callable[..., Shapes], axes: Sequence[Floats], count: int, same: float = SAME
) -> dict[tuple[int, ...], Followed]:
    """Modes followed along the first axis, from starts followed along the second, and so on.

    modes_at : gives ``count`` + 4 modes at a place on each axis
    axes : places (n,) on each, rising or falling
    returns : for every choice of places on the other axes, counted from 0, the branches along
        the first; what is lost on the way to its start is lost there
    """
    grid = _Grid(modes_at, [np.asarray(axis, dtype=float) for axis in axes], count, same)
    return {at: _gathered(grid.along(0, at, start), count) for at, start in grid.starts(1)}


class _Grid:
    """Ways through a grid that all come from one corner."""

    def __init__(
        self, modes_at: Callable[..., Shapes], axes: Sequence[Floats], count: int, same: float
    ) -> None:
        self._modes_at = modes_at
        self._axes = axes
        self._count = count
        self._same = same
        modes = modes_at(*self._begins(len(axes)))
        numbers = np.arange(1, len(modes.eigenvalues) + 1)
        self._corner = Station(0.0, modes, numbers)
        self._fresh = counter(len(numbers) + 1).__next__

    def starts(self, first: int) -> Iterator[tuple[tuple[int, ...], Station]]:
        """Where the axes before ``first`` begin, at every choice of places on the others."""
        if first == len(self._axes):
            yield (), self._corner
            return
        for others, start in self.starts(first + 1):
            for place, station in enumerate(self.along(first, others, start)):
                yield (place, *others), station

    def along(self, axis: int, others: tuple[int, ...], start: Station) -> Iterator[Station]:
        """Stations along an axis, those after it at some places, those before where they begin."""
        before, places = self._begins(axis), self._axes[axis]
        after = [float(a[i]) for a, i in zip(self._axes[axis + 1 :], others, strict=True)]

        def modes_at(place: float) -> Shapes:
            return self._modes_at(*before, place, *after)

        beginning = replace(start, place=float(places[0]))
        remembered = lru_cache(REMEMBERED)(modes_at)
        return _stations(remembered, beginning, places, self._count, self._same, self._fresh)

    def _begins(self, axes: int) -> list[float]:
        return [float(places[0]) for places in self._axes[:axes]]


def _stations(
    modes_at: ModesAt,
    start: Station,
    places: Floats,
    count: int,
    same: float,
    fresh: Callable[[], int],
) -> Iterator[Station]:
    """The start and a station at every later place."""
    yield start
    if len(places) > 1:
        shortest = LEAST * abs(float(places[-1] - places[0]))
        walk = Walk(modes_at, start.place, count, same, fresh, shortest)
        yield from walk.stations(start, places[1:])


def _gathered(stations: Iterator[Station], count: int) -> Followed:
    branches: list[Ints] = []
    lost: list[Lost] = []
    for station in stations:
        branches.append(station.branches[:count])
        lost.extend(Lost(branch, station.place) for branch in station.lost)
    return Followed(np.array(branches), tuple(lost))
