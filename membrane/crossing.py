"""Whether a closed polygon of many sides crosses itself."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints

_SWEEP = np.exp(0.6j)
"""Direction of the sweep, chosen so that sides are unlikely to be square to it."""


def crossing(corners: Floats) -> tuple[int, int] | None:
    """Numbers, from 0, of the first two sides that cross, or None where none do.

    corners : (2, n), in order; side k starts at corner k
    """
    start = corners[0] + 1j * corners[1]
    stop = np.roll(start, -1)
    one, other = _beside(start, stop)
    crossed = _cross(start, stop, one, other)
    if not crossed.any():
        return None
    pairs = np.sort(np.stack([one, other])[:, crossed], axis=0)
    first, second = pairs[:, np.lexsort(pairs[::-1])[0]]
    return int(first), int(second)


def _beside(start: Floats, stop: Floats) -> tuple[Ints, Ints]:
    """Pairs of sides, not neighbours, that a line square to the sweep can meet at once."""
    count = start.size
    ends = np.stack([(start / _SWEEP).real, (stop / _SWEEP).real])
    low, high = ends.min(axis=0), ends.max(axis=0)
    order = np.argsort(low)
    reach = np.searchsorted(low[order], high[order], side="right") - np.arange(count) - 1
    one = np.repeat(np.arange(count), reach)
    step = np.arange(one.size) - np.repeat(np.cumsum(reach) - reach, reach)
    one, other = order[one], order[one + 1 + step]
    apart = np.abs(one - other)
    far = (apart > 1) & (apart < count - 1)
    return one[far], other[far]


def _cross(start: Floats, stop: Floats, one: Ints, other: Ints) -> Bools:
    parted: Bools = _parted(start, stop, one, other) & _parted(start, stop, other, one)
    return parted


def _parted(start: Floats, stop: Floats, side: Ints, ends: Ints) -> Bools:
    """Whether the ends of sides lie on both sides of, or on, the lines through others."""
    along = np.conj(stop[side] - start[side])
    left = (along * (start[ends] - start[side])).imag
    right = (along * (stop[ends] - start[side])).imag
    parted: Bools = left * right <= 0.0
    return parted
