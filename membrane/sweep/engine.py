"""Engines: what works through the points, one after another or on many processes."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Protocol

from membrane.sweep.answer import Answering, Outcome, outcome_of
from membrane.sweep.points import Point

Bundle = tuple[Point, ...]
"""Points that go to one process together: they share a mesh."""


class Engine(Protocol):
    """Works through bundles and gives outcomes as they come, in any order.

    It takes no more bundles than it is working on, so that they may be made as they are taken.
    """

    def outcomes(self, answering: Answering, bundles: Iterator[Bundle]) -> Iterator[list[Outcome]]:
        """Some outcomes at a time, until there are no more bundles."""
        ...


class Serial:
    """All points in this process, one after another."""

    def outcomes(self, answering: Answering, bundles: Iterator[Bundle]) -> Iterator[list[Outcome]]:
        """One outcome at a time, in the order of the points."""
        for bundle in bundles:
            for point in bundle:
                yield [outcome_of(point, answering)]
