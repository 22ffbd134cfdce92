"""The work on a sweep: what is missing goes to the engine, what comes back to the store."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from itertools import groupby
from pathlib import Path

import numpy as np

from membrane.records.arrays import Ints
from membrane.sweep.engine import Bundle, Engine
from membrane.sweep.part import WHOLE, Part
from membrane.sweep.points import Point
from membrane.sweep.store import DONE, FAILED, MISSING, Store
from membrane.sweep.task import Task

MOST_TOGETHER = 8
"""Points that go to a process at once: what a kill loses, for each process."""

STRETCH = 1000
"""Points that are planned at once."""

ENOUGH_BUNDLES = 32
"""Bundles that share the work out evenly."""


@dataclass(frozen=True)
class Tally:
    """How far a sweep, or a part of it, has come: points wanted, done and failed."""

    wanted: int
    done: int
    failed: int

    def with_one(self, succeeded: bool) -> Tally:
        """One point more."""
        return Tally(self.wanted, self.done + succeeded, self.failed + (not succeeded))


Progress = Callable[[Tally], None]


def work(
    task: Task,
    folder: Path,
    engine: Engine,
    part: Part = WHOLE,
    retry: bool = False,
    progress: Progress = lambda tally: None,
    say: Callable[[str], None] = lambda sentence: None,
) -> Tally:
    """Work until every point of the part is done or has failed.

    retry : try again what failed before
    progress : called at the start and after every point
    say : called with sentences on what was found in the store
    Raises OutputError where the store cannot be used.
    """
    numbers = task.points.numbers(*part.of(len(task.points)))
    with Store.writing(part.file(folder)) as store:
        states = _begun(task, store, say)[numbers]
        if retry:
            states[states == FAILED] = MISSING
        tally = Tally(numbers.size, *(int(np.sum(states == s)) for s in (DONE, FAILED)))
        progress(tally)
        plan = _Plan(task, store, numbers[states == MISSING])
        for outcomes in engine.outcomes(task.answering, plan.bundles()):
            store.add(task.entry, [(task.name_of(o.point), o) for o in outcomes])
            for outcome in outcomes:
                tally = tally.with_one(outcome.answer is not None)
                progress(tally)
    return replace(tally, done=tally.done + plan.known)


def _begun(task: Task, store: Store, say: Callable[[str], None]) -> Ints:
    """The states of all points, after a word on what the store held before."""
    others = [entry for entry in store.sweeps() if entry.name != task.entry.name]
    states = store.states(task.entry)
    if np.any(states):
        say(f"Going on: {np.count_nonzero(states)} of {task.entry.size} points are there already.")
    elif others:
        say("The study has changed: a new sweep begins, the earlier one is kept beside it.")
    store.begin(task.entry)
    return states


class _Plan:
    """The missing points in bundles, made as they are asked for.

    known : points whose answers were found in an earlier sweep over the same study
    """

    def __init__(self, task: Task, store: Store, numbers: Ints) -> None:
        self._task = task
        self._store = store
        self._numbers = numbers
        same = [e for e in store.sweeps() if e.study == task.entry.study]
        self._has_relatives = len(same) > 1
        self.known = 0

    def bundles(self) -> Iterator[Bundle]:
        """Points that share a mesh, a few at a time."""
        together = int(np.clip(self._numbers.size // ENOUGH_BUNDLES, 1, MOST_TOGETHER))
        for start in range(0, self._numbers.size, STRETCH):
            numbers = self._numbers[start : start + STRETCH].tolist()
            points = self._unknown([self._task.points.point(number) for number in numbers])
            for _, group in groupby(points, self._task.points.mesh_of):
                same = tuple(group)
                yield from (same[i : i + together] for i in range(0, len(same), together))

    def _unknown(self, points: list[Point]) -> list[Point]:
        """The points that no earlier sweep has answered; the others are taken over."""
        if not self._has_relatives:
            return points
        left, found = [], []
        for point in points:
            name = self._task.name_of(point)
            outcome = self._store.known(name)
            if outcome is None:
                left.append(point)
            else:
                found.append((name, replace(outcome, point=point)))
        self._store.add(self._task.entry, found)
        self.known += len(found)
        return left
