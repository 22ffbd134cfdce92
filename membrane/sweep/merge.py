"""The parts of a sweep, worked on by several jobs, brought together in one store."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from itertools import islice
from pathlib import Path

from membrane.errors import OutputError
from membrane.records.arrays import Ints
from membrane.sweep.answer import Outcome
from membrane.sweep.part import WHOLE, part_files
from membrane.sweep.store import DONE, MISSING, Store
from membrane.sweep.task import Task

TOGETHER = 1000
"""Points that are taken over at once."""


def merge(task: Task, folder: Path, say: Callable[[str], None]) -> None:
    """Take what the parts in a folder have found over into its whole store.

    Parts are read as they are, also while jobs still work on them.
    Raises OutputError where there are no parts, or a store cannot be used.
    """
    files = part_files(folder)
    if not files:
        raise OutputError(f"there are no parts in {folder}; run membrane sweep --part first.")
    with Store.writing(WHOLE.file(folder)) as whole:
        whole.begin(task.entry)
        for file in files:
            with Store.reading(file) as part:
                if task.entry.name not in [entry.name for entry in part.sweeps()]:
                    say(f"{file.name} belongs to another study or sweep and is left out.")
                    continue
                rows = _news(part, task, whole.states(task.entry))
                while batch := list(islice(rows, TOGETHER)):
                    whole.add(task.entry, batch)


def _news(part: Store, task: Task, states: Ints) -> Iterator[tuple[str, Outcome]]:
    """What the whole store does not know: points it misses, answers to those that failed."""
    for name, outcome in part.named_outcomes(task.entry):
        state = states[outcome.point.number]
        if state == MISSING or (state != DONE and outcome.answer is not None):
            yield name, outcome
