"""The branches that the modes of a sweep's points lie on."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Ints
from membrane.records.sweep import Axis


@dataclass(frozen=True)
class Branches:
    """Branches of all points, whether these have an answer or not.

    numbers : (n_points, count), the branch of each mode of each point, from 1: at the end where
        the first axis, and the second, begins, a branch has the number of its mode
    lost : (branch, number of the point) where a branch could not be followed on
    """

    numbers: Ints
    lost: tuple[tuple[int, int], ...]

    @property
    def count(self) -> int:
        """How many modes of a point are followed."""
        return int(self.numbers.shape[1])

    def of(self, point: int, mode: int) -> int | None:
        """The branch of a mode of a point, both from 1; None for a mode that is not followed."""
        return int(self.numbers[point - 1, mode - 1]) if mode <= self.count else None


def in_order(axis: Axis) -> Ints:
    """(n,) places of an axis's values from one end to the other, the earlier listed end first."""
    order = np.argsort(axis.values, kind="stable")
    return order if order[0] < order[-1] or len(order) == 1 else order[::-1]
