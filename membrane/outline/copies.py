"""Loose copies of drawn curves, by which the curves of a cut head are recognised."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from membrane.kernel import Kernel
from membrane.records.arrays import Floats

# Where along a curve its points are compared, as shares of its parameter range.
_SHARES = np.array([0.17, 0.5, 0.79])
_NEAR = 1e-6


@dataclass(frozen=True)
class Copy:
    """A drawn curve as it was before the cut, and the box around it.

    name : what it was drawn as
    place : which of the curves of that name it is, from 0
    """

    name: str
    place: int
    tag: int
    low: Floats
    high: Floats

    def may_hold(self, points: Floats, slack: float) -> bool:
        """Whether ``points`` (2, n) lie in its box, give or take ``slack`` metres."""
        low, high = self.low[:, None] - slack, self.high[:, None] + slack
        return bool(np.all((points >= low) & (points <= high)))


@dataclass(frozen=True)
class Probe:
    """Three points of a curve of the cut head, and how far off a copy of it may be."""

    tag: int
    points: Floats
    slack: float

    @property
    def middle(self) -> Floats:
        """(2,), metres: the second of the points."""
        return np.asarray(self.points[:, 1])


def copies(kernel: Kernel, name: str, tags: Sequence[int]) -> list[Copy]:
    """The copies ``tags`` of the curves that make what is called ``name``, in their order."""
    return [Copy(name, place, tag, *kernel.box(tag)) for place, tag in enumerate(tags)]


def probe(kernel: Kernel, tag: int) -> Probe:
    """Points on a curve of the cut head."""
    first, last = kernel.bounds(tag)
    points = kernel.evaluate(tag, first + _SHARES * (last - first))
    return Probe(tag, points, _NEAR * kernel.length(tag))


def matching(kernel: Kernel, probed: Probe, among: Iterable[Copy]) -> Iterator[Copy]:
    """The copies on which a curve lies, the nearest first."""
    near = [copy for copy in among if copy.may_hold(probed.points, probed.slack)]
    distances = [kernel.distance(probed.points, copy.tag) for copy in near]
    for k in np.argsort(distances, kind="stable"):
        if distances[k] <= probed.slack:
            yield near[k]


def runs_along(kernel: Kernel, probed: Probe, copy: Copy) -> bool:
    """Whether a curve that lies on a copy runs the copy's own way."""
    there = kernel.tangent(copy.tag, kernel.parameters(probed.points[:, [1]], copy.tag))
    here = kernel.tangent(probed.tag, kernel.parameters(probed.points[:, [1]], probed.tag))
    return bool((here * there).sum() > 0.0)
