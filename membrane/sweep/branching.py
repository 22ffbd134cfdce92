"""The second pass of a sweep: branches followed once every point is settled, and stored."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import numpy as np

from membrane.errors import MembraneError
from membrane.sweep.answer import sentence_of
from membrane.sweep.branched import Branches
from membrane.sweep.part import WHOLE
from membrane.sweep.solving import followed, why_not_followed
from membrane.sweep.store import MISSING, Store
from membrane.sweep.task import Task


def branch(task: Task, folder: Path, say: Callable[[str], None]) -> Branches | None:
    """The branches of a sweep, followed unless they are stored; None where they cannot be.

    They depend on the sweep alone: however often it was interrupted, they are the same.
    say : called with the sentence that says why there are none
    Raises OutputError where the store cannot be used.
    """
    reason = why_not_followed(task.points)
    if reason:
        say(f"No branches: {reason}")
        return None
    with Store.writing(WHOLE.file(folder)) as store:
        if np.any(store.states(task.entry)[1:] == MISSING):
            say("No branches: they are followed when no point is missing.")
            return None
        return _kept(task, store, say)


def _kept(task: Task, store: Store, say: Callable[[str], None]) -> Branches | None:
    count, known = store.most_modes(task.entry), store.branches(task.entry)
    if count == 0 or (known is not None and known.count == count):
        return known
    try:
        found = followed(task.answering, task.points, count)
    except MembraneError as failure:
        say(f"No branches: on the way from point to point, {sentence_of(failure)}")
        return None
    store.keep_branches(task.entry, found)
    return found
