"""The command ``sweep``: every point of a study's sweep, into a store and a table."""

from __future__ import annotations

from pathlib import Path

import typer

from membrane.cli.progress import shown_count
from membrane.study import read_study


def run_sweep(file: Path, out: Path, part: str | None, retry: bool, quiet: bool) -> None:
    """Read, work, write and sum up. Raises MembraneError."""
    study = read_study(file)
    from membrane.sweep.engine import Serial
    from membrane.sweep.part import WHOLE, Part
    from membrane.sweep.store import Store
    from membrane.sweep.tables import write_tables
    from membrane.sweep.task import task_of
    from membrane.sweep.work import work

    task = task_of(study)
    chosen = WHOLE if part is None else Part.read(part)
    say = _nothing if quiet else typer.echo
    with shown_count(quiet) as progress:
        tally = work(task, out, Serial(), chosen, retry, progress, say)
    with Store.reading(chosen.file(out)) as store:
        write_tables(out, store, task.entry)
    say(f"{tally.done} of {tally.wanted} points are done, {tally.failed} failed.")


def _nothing(sentence: str) -> None:
    """Said where nothing is to be printed."""
