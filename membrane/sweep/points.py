"""The points of a sweep by number, each made only when it is asked for."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from membrane.numeric_keys import replaced
from membrane.records.arrays import Ints
from membrane.records.sweep import Axis, Pick, Spacing, Sweep

_BITS = 2.0**-53
"""A random integer of 53 bits times this is a number from 0 up to 1."""


@dataclass(frozen=True)
class Point:
    """One variant of a study.

    number : from 1
    values : SI, in the order of the axes
    """

    number: int
    values: tuple[float, ...]


class Points:
    """All points of a sweep: what they are, and in which order they are best solved.

    shaping : for each axis, whether another value of it needs another mesh
    """

    def __init__(self, sweep: Sweep, shaping: Sequence[bool]) -> None:
        self.sweep = sweep
        self.shaping = tuple(shaping)

    def __len__(self) -> int:
        return self.sweep.size

    def point(self, number: int) -> Point:
        """The point of a number, from 1; the last axis of a grid runs fastest."""
        if self.sweep.pick is Pick.RANDOM:
            return Point(number, _random(self.sweep, number))
        axes = self.sweep.axes
        places: Sequence[Any] = [number - 1] * len(axes)
        if self.sweep.pick is Pick.GRID:
            places = np.unravel_index(number - 1, self._lengths)
        values = zip(axes, places, strict=True)
        return Point(number, tuple(_typed(axis, axis.values[place]) for axis, place in values))

    def numbers(self, start: int, stop: int) -> Ints:
        """Numbers (n,) of the points from one place in the order of solving to another.

        Points that share a mesh follow each other.
        """
        places = np.arange(start, stop)
        if self._order is not None:
            return self._order[places] + 1
        return self._grid_numbers(places) if self.sweep.pick is Pick.GRID else places + 1

    def mesh_of(self, point: Point) -> tuple[float, ...]:
        """What two points have in common if they share a mesh."""
        return tuple(v for v, shapes in zip(point.values, self.shaping, strict=True) if shapes)

    @cached_property
    def meshes(self) -> int:
        """How many different meshes the points need."""
        axes = [axis for axis, shapes in zip(self.sweep.axes, self.shaping, strict=True) if shapes]
        if not axes:
            return 1
        if self.sweep.pick is Pick.GRID:
            return int(np.prod([len(axis.values) for axis in axes]))
        if any(axis.between for axis in axes):
            return len(self)
        return len({self.mesh_of(self.point(n)) for n in range(1, len(self) + 1)})

    @property
    def _lengths(self) -> tuple[int, ...]:
        return tuple(len(axis.values) for axis in self.sweep.axes)

    @cached_property
    def _slowest_first(self) -> list[int]:
        """Places of the axes, those that need another mesh first."""
        return sorted(range(len(self.shaping)), key=lambda axis: not self.shaping[axis])

    def _grid_numbers(self, places: Ints) -> Ints:
        order, lengths = self._slowest_first, self._lengths
        inner = np.unravel_index(places, [lengths[axis] for axis in order])
        at = dict(zip(order, inner, strict=True))
        numbers: Ints = np.ravel_multi_index([at[axis] for axis in range(len(order))], lengths) + 1
        return numbers

    @cached_property
    def _order(self) -> Ints | None:
        """(n,) rows of a table with equal meshes together; None where there is no table."""
        if self.sweep.pick is not Pick.TABLE or not any(self.shaping):
            return None
        columns = [a.values for a, s in zip(self.sweep.axes, self.shaping, strict=True) if s]
        return np.lexsort(columns[::-1])


def study_data(source: Mapping[str, Any], axes: Sequence[Axis], values: Sequence[float]) -> Any:
    """A study's plain data with the values of some of its axes in place."""
    data: Any = {key: value for key, value in source.items() if key != "sweep"}
    for axis, value in zip(axes, values, strict=True):
        data = replaced(data, axis.steps, value)
    return data


def _random(sweep: Sweep, number: int) -> tuple[float, ...]:
    """Values of a random point, known without the points before it.

    Counter-based random numbers, Philox: J. K. Salmon et al., SC11 (2011), from memory.
    """
    stream = np.random.Philox(key=sweep.seed, counter=[0, number, 0, 0])
    shares = (int(raw >> 11) * _BITS for raw in stream.random_raw(len(sweep.axes)).tolist())
    return tuple(_at(axis, share) for axis, share in zip(sweep.axes, shares, strict=True))


def _at(axis: Axis, share: float) -> float:
    """The value of an axis at a share, from 0 up to 1, of all that it may have."""
    if not axis.between:
        return _typed(axis, axis.values[int(share * len(axis.values))])
    low, high = axis.values
    if axis.whole:
        return int(low) + int(share * (int(high) - int(low) + 1))
    if axis.spacing is Spacing.LOGARITHMIC:
        return float(low * (high / low) ** share)
    return low + share * (high - low)


def _typed(axis: Axis, value: float) -> float:
    return int(value) if axis.whole else float(value)
