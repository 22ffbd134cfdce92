"""Edge lengths anywhere on an outline, from samples of them, found fast."""

from __future__ import annotations

from functools import cached_property
from math import hypot, inf

import numpy as np

from membrane.records.arrays import Floats, Ints

_FEW = 40
"""Samples that are looked through one by one."""

_DEEPEST = 40

_OVERRULED = 1e-6


class SizeMap:
    """Edge length = the least of size + growth x distance over all samples, and of ``most``.

    points : (2, n), metres
    sizes : (n,), metres
    growth : how much longer an edge may be per length away from a sample
    most : metres
    """

    def __init__(self, points: Floats, sizes: Floats, growth: float, most: float = inf) -> None:
        self.points, self.sizes, self.growth, self.most = points, sizes, growth, most

    def at(self, x: float, y: float) -> float:
        """Longest edge, metres, at a point."""
        return min(self.most, self._root.least(x, y)) if self.sizes.size else self.most

    @property
    def least(self) -> float:
        """No edge need be shorter, metres."""
        return min(self.most, float(self.sizes.min(initial=inf)))

    def capped(self, most: float) -> SizeMap:
        """The map with no edge longer than ``most``, without the samples that this overrules."""
        kept = self.sizes < most
        return SizeMap(self.points[:, kept], self.sizes[kept], self.growth, most)

    def shortened(self, places: Floats, factor: float) -> SizeMap:
        """The map with edges shorter by a factor at ``places`` (2, n)."""
        shorter = [factor * self.at(x, y) for x, y in places.T]
        points = np.hstack([self.points, places])
        sizes = np.concatenate([self.sizes, shorter])
        return SizeMap(points, sizes, self.growth, self.most)

    @cached_property
    def _root(self) -> _Square:
        low, high = self.points.min(axis=1), self.points.max(axis=1)
        centre = 0.5 * (low + high)
        half = 0.5 * float((high - low).max())
        return _Square(self, centre[0], centre[1], half, np.arange(self.sizes.size))

    def thinned(self) -> SizeMap:
        """The same map without the samples that others overrule everywhere."""
        kept = [
            k
            for k, (x, y) in enumerate(self.points.T)
            if self.at(x, y) > (1 - _OVERRULED) * self.sizes[k]
        ]
        return SizeMap(self.points[:, kept], self.sizes[kept], self.growth, self.most)


class _Square:
    """A square of the plane and the samples that can be the least somewhere in it.

    It is cut into quarters when it is first asked for, while it has more than a few samples.
    """

    def __init__(self, sizes: SizeMap, x: float, y: float, half: float, above: Ints) -> None:
        self.sizes, self.x, self.y, self.half = sizes, x, y, half
        px, py = sizes.points[:, above]
        away, reach = np.hypot(px - x, py - y), np.sqrt(2.0) * half
        nearest = sizes.sizes[above] + sizes.growth * np.maximum(away - reach, 0.0)
        farthest = sizes.sizes[above] + sizes.growth * (away + reach)
        self.samples = above[nearest <= farthest.min()]
        self.quarters: dict[tuple[bool, bool], _Square] = {}

    def least(self, x: float, y: float) -> float:
        """The size at a point, which may lie outside where no point of the outline does."""
        square = self
        for _ in range(_DEEPEST):
            if square.samples.size <= _FEW:
                break
            square = square._quarter(x > square.x, y > square.y)
        growth = self.sizes.growth
        return min([s + growth * hypot(px - x, py - y) for px, py, s in square._listed])

    def _quarter(self, right: bool, up: bool) -> _Square:
        quarter = self.quarters.get((right, up))
        if quarter is None:
            half = 0.5 * self.half
            x, y = self.x + (2 * right - 1) * half, self.y + (2 * up - 1) * half
            quarter = _Square(self.sizes, x, y, half, self.samples)
            self.quarters[right, up] = quarter
        return quarter

    @cached_property
    def _listed(self) -> list[tuple[float, float, float]]:
        x, y = self.sizes.points[:, self.samples]
        return list(
            zip(x.tolist(), y.tolist(), self.sizes.sizes[self.samples].tolist(), strict=True)
        )
