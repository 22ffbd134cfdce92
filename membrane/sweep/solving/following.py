"""The branches of a sweep: the modes of one point carried on to its neighbours on the grid."""

from __future__ import annotations

import numpy as np
from threadpoolctl import threadpool_limits

from membrane.branches import Followed, Shapes, follow_grid
from membrane.branches.walk import GUARDS
from membrane.records.arrays import Ints
from membrane.records.sweep import Pick
from membrane.sweep.branched import Branches, in_order
from membrane.sweep.points import Point, Points
from membrane.sweep.solving.reduced import ReducedSolves
from membrane.sweep.solving.shapes import shapes_at
from membrane.wording import listed

MOST_AXES = 2


def why_not_followed(points: Points) -> str:
    """The sentence that says why branches cannot be followed; "" where they can."""
    sweep = points.sweep
    if sweep.pick is not Pick.GRID:
        return f'they are followed along the axes of a grid, not with pick = "{sweep.pick}".'
    shaping = [axis.key for axis, shapes in zip(sweep.axes, points.shaping, strict=True) if shapes]
    if shaping:
        return f"modes cannot be followed from mesh to mesh, as {listed(shaping)} would need."
    if len(sweep.axes) > MOST_AXES:
        return f"they are followed along at most {MOST_AXES} axes, not {len(sweep.axes)}."
    return ""


def followed(solves: ReducedSolves, points: Points, count: int) -> Branches:
    """The branches of the lowest ``count`` modes, along the first axis from along the second.

    Places on the way count the values of an axis, so that steps are fine where these are close.
    Raises MembraneError where the modes at a place cannot be found.
    """
    axes = points.sweep.axes
    orders = [*map(in_order, axes), np.zeros(1, dtype=np.int64)]  # a second axis, if there is none
    first, second = (np.asarray(np.arange(len(order)), dtype=float) for order in orders[:MOST_AXES])
    values = [np.array(axis.values)[order] for axis, order in zip(axes, orders, strict=False)]

    def modes_at(*places: float) -> Shapes:
        ways = zip(places, (first, second), values, strict=False)
        point = Point(0, tuple(float(np.interp(place, steps, v)) for place, steps, v in ways))
        return shapes_at(solves, point, count + GUARDS)

    with threadpool_limits(limits=1, user_api="blas"):
        rows = follow_grid(modes_at, first, second, count)
    return _gathered(rows, orders[0], orders[1])


def _gathered(rows: tuple[Followed, ...], first: Ints, second: Ints) -> Branches:
    """Branches in the order of the points' numbers; the second axis runs fastest.

    first, second : where the places that were walked are on their axes
    """
    shape = len(first), len(second)
    numbers = np.empty((*shape, rows[0].branches.shape[1]), dtype=np.int64)
    lost = []
    for row, column in zip(rows, second, strict=True):
        numbers[first, column] = row.branches
        for ended in row.lost:
            at = np.ravel_multi_index((first[int(ended.place)], column), shape)
            lost.append((ended.branch, 1 + int(at)))
    return Branches(numbers.reshape(-1, numbers.shape[-1]), tuple(lost))
