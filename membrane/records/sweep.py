"""The sweep that a study asks for: which of its numbers take which values."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from math import prod

from membrane.numeric_keys import Steps


class Pick(StrEnum):
    """How points are picked from the axes."""

    GRID = "grid"  # every value of each axis with every value of the others
    RANDOM = "random"  # each axis independently
    TABLE = "table"  # the first values of all axes, the second values, and so on


class Spacing(StrEnum):
    """How values lie between the ends of an axis."""

    LINEAR = "linear"
    LOGARITHMIC = "logarithmic"


@dataclass(frozen=True)
class Axis:
    """One number of the study and the values that it takes, SI.

    key : its path, such as "patches.paste.added_density"
    steps : the way to it in the study's plain data
    values : its values; the two ends where it may lie anywhere between them
    between : True where random points may lie anywhere between the two values
    whole : True where only whole numbers will do
    """

    key: str
    steps: Steps
    values: tuple[float, ...]
    between: bool = False
    spacing: Spacing = Spacing.LINEAR
    whole: bool = False


@dataclass(frozen=True)
class Sweep:
    """All axes, and how points are picked from them.

    count : points of a random sweep
    seed : of its random numbers
    bracket : whether every point is to have a guaranteed bracket; else they are estimates
    """

    pick: Pick
    axes: tuple[Axis, ...]
    count: int = 0
    seed: int = 0
    bracket: bool = False

    @property
    def size(self) -> int:
        """How many points there are."""
        if self.pick is Pick.RANDOM:
            return self.count
        lengths = [len(axis.values) for axis in self.axes]
        return prod(lengths) if self.pick is Pick.GRID else lengths[0]
