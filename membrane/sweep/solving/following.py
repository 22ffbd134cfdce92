"""The branches of a sweep: the modes of one point carried on to its neighbours on the grid."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

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


def why_not_followed(points: Points) -> str:
    """The sentence that says why branches cannot be followed; "" where they can."""
    sweep = points.sweep
    if sweep.pick is not Pick.GRID:
        return f'they are followed along the axes of a grid, not with pick = "{sweep.pick}".'
    shaping = [axis.key for axis, shapes in zip(sweep.axes, points.shaping, strict=True) if shapes]
    if shaping:
        return f"modes cannot be followed from mesh to mesh, as {listed(shaping)} would need."
    return ""


def followed(solves: ReducedSolves, points: Points, count: int) -> Branches:
    """The branches of the lowest ``count`` modes, along the first axis from along the others.

    Places on the way count the values of an axis, so that steps are fine where these are close.
    Raises MembraneError where the modes at a place cannot be found.
    """
    axes = points.sweep.axes
    orders = [in_order(axis) for axis in axes]
    places = [np.array(range(len(order)), dtype=float) for order in orders]
    values = [np.array(axis.values)[order] for axis, order in zip(axes, orders, strict=True)]

    def modes_at(*at: float) -> Shapes:
        ways = zip(at, places, values, strict=True)
        point = Point(0, tuple(float(np.interp(one, steps, v)) for one, steps, v in ways))
        return shapes_at(solves, point, count + GUARDS)

    with threadpool_limits(limits=1, user_api="blas"):
        return _gathered(follow_grid(modes_at, places, count), orders)


def _gathered(rows: Mapping[tuple[int, ...], Followed], orders: Sequence[Ints]) -> Branches:
    """Branches in the order of the points' numbers; the last axis runs fastest.

    orders : where the places that were walked are on their axes
    """
    shape = tuple(map(len, orders))
    count = next(iter(rows.values())).branches.shape[1]
    found = np.zeros((int(np.prod(shape)), count), dtype=np.int64)
    lost = []
    for others, row in rows.items():
        ends = [int(order[place]) for order, place in zip(orders[1:], others, strict=True)]
        walked = np.ravel_multi_index((orders[0], *ends), shape)
        found[walked] = row.branches
        lost += [(ended.branch, 1 + int(walked[int(ended.place)])) for ended in row.lost]
    return Branches(found, tuple(lost))
