"""A walk along a path, in steps as long as the modes stay like themselves."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace

import numpy as np

from membrane.branches.shapes import Shapes, turned_onto
from membrane.branches.step import Step, step
from membrane.records.arrays import Floats, Ints

ModesAt = Callable[[float], Shapes]
"""The wanted modes and ``GUARDS`` more at a place on the path."""

GUARDS = 4
"""Modes looked at beyond the wanted ones, so that a branch may leave and come back."""

LIKE, VERY_LIKE = 0.8, 0.97
"""Squared cosines: below the one the step is halved, above the other it may grow."""

FIRST, LEAST, GROWTH = 0.1, 1.0 / 512.0, 1.5
"""First and shortest step, of the whole path, and how much the next one may be longer."""


@dataclass(frozen=True)
class Station:
    """Where a walk has come to.

    branches : (m,) number of the branch that each mode lies on
    lost : numbers of wanted branches that ended since the station before
    """

    place: float
    shapes: Shapes
    branches: Ints
    lost: tuple[int, ...] = ()


@dataclass(frozen=True)
class Walk:
    """How a path is walked.

    start : where it begins; clusters there are first turned to what they become
    count : modes wanted
    same : relative distance below which eigenvalues are one cluster
    fresh : gives the number of a branch that comes in from above
    shortest : no step is halved to less; a veering narrower than that is taken for a crossing
    """

    modes_at: ModesAt
    start: float
    count: int
    same: float
    fresh: Callable[[], int]
    shortest: float

    def stations(self, start: Station, places: Floats) -> Iterator[Station]:
        """A station at each of the places, which follow the start in order."""
        here, stride = start, FIRST * abs(places[-1] - start.place)
        for place in map(float, places):
            here = replace(here, lost=())
            while here.place != place:
                here, stride = self._onward(here, place, stride)
            yield here

    def _onward(self, here: Station, place: float, stride: float) -> tuple[Station, float]:
        """The next station on the way to a place, and the stride from there."""
        while True:
            there = _towards(here.place, place, stride)
            new = self.modes_at(there)
            taken = step(self._old(here, new), new, self.same)
            alike = taken.alike[: self.count]
            half = abs(there - here.place) / 2
            if alike.min() >= LIKE or half < self.shortest:
                grown = GROWTH if alike.min() > VERY_LIKE else 1.0
                return self._arrived(here, there, taken), stride * grown
            stride = half

    def _old(self, here: Station, new: Shapes) -> Shapes:
        """The modes here; at the start their clusters are turned to what they become."""
        if here.place == self.start:
            return turned_onto(new, here.shapes, self.same)
        return here.shapes

    def _arrived(self, here: Station, there: float, taken: Step) -> Station:
        branches = np.zeros(len(taken.shapes.eigenvalues), dtype=np.int64)
        kept = ~taken.lost
        branches[taken.partner[kept]] = here.branches[kept]
        new = branches == 0
        branches[new] = [self.fresh() for _ in range(np.count_nonzero(new))]
        ended = here.branches[: self.count][taken.lost[: self.count]]
        return Station(there, taken.shapes, branches, (*here.lost, *map(int, ended)))


def _towards(here: float, place: float, stride: float) -> float:
    """At most a stride from here to a place; the place itself where nearly there."""
    way = place - here
    return place if abs(way) <= 1.01 * stride else here + float(np.copysign(stride, way))
