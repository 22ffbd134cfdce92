"""Branch numbers for every mode of a path, or of a grid of two axes."""

from __future__ import annotations

from collections.abc import Callable, Iterator
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
    modes_at: Callable[[float, float], Shapes],
    first: Floats,
    second: Floats,
    count: int,
    same: float = SAME,
) -> tuple[Followed, ...]:
    """Modes followed along the first axis, from starts followed along the second.

    modes_at : gives ``count`` + 4 modes at places on both axes
    returns : for each place on the second axis, the branches along the first; what is lost on
        the way to its start is lost there
    """
    first, second = np.asarray(first, dtype=float), np.asarray(second, dtype=float)
    along = lru_cache(REMEMBERED)(lambda place: modes_at(float(first[0]), place))
    modes = along(float(second[0]))
    numbers = np.arange(1, len(modes.eigenvalues) + 1)
    fresh = counter(len(numbers) + 1).__next__
    corner = Station(float(second[0]), modes, numbers)
    rows = []
    for start in _stations(along, corner, second, count, same, fresh):
        across = lru_cache(REMEMBERED)(_fixed(modes_at, start.place))
        beginning = replace(start, place=float(first[0]))
        rows.append(_gathered(_stations(across, beginning, first, count, same, fresh), count))
    return tuple(rows)


def _fixed(modes_at: Callable[[float, float], Shapes], place: float) -> ModesAt:
    return lambda other: modes_at(other, place)


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
