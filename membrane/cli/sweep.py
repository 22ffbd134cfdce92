"""The command ``sweep``: every point of a study's sweep, into a store and a table."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import typer

from membrane.cli.failures import INTERRUPTED
from membrane.cli.progress import shown_count
from membrane.cli.sweep_branches import draw_branches, follow_branches
from membrane.errors import StudyError
from membrane.study import read_study
from membrane.wording import listed

if TYPE_CHECKING:
    from membrane.sweep.engine import Engine
    from membrane.sweep.store import Totals
    from membrane.sweep.task import Task


@dataclass(frozen=True)
class Wanted:
    """What the command line asks for."""

    out: Path
    workers: int | None
    scheduler: str | None
    part: str | None
    merge: bool
    retry: bool
    parquet: bool
    branches: bool
    quiet: bool


def run_sweep(file: Path, wanted: Wanted) -> None:
    """Read, work, write and sum up. Raises MembraneError."""
    study = read_study(file)
    from membrane.sweep.merge import merge
    from membrane.sweep.task import task_of

    task = task_of(study)
    say = _nothing if wanted.quiet else typer.echo
    notes: list[str] = []
    try:
        if wanted.merge:
            _check_alone(wanted)
            merge(task, wanted.out, say)
        else:
            _work(task, wanted, say)
        if wanted.part is None and wanted.branches:
            follow_branches(task, wanted.out, wanted.quiet, notes.append)
    except KeyboardInterrupt:
        typer.echo("Stopped; the points so far are kept. Run it again to go on.", err=True)
        raise typer.Exit(INTERRUPTED) from None
    if wanted.part is None:
        _write(task, wanted, say)
        if wanted.branches:
            draw_branches(study, task, wanted.out)
        for note in notes:
            say(note)
        say(f"The tables are in {wanted.out}.")


def _work(task: Task, wanted: Wanted, say: Callable[[str], None]) -> None:
    from membrane.sweep.part import WHOLE, Part
    from membrane.sweep.work import work

    part = WHOLE if wanted.part is None else Part.read(wanted.part)
    engine = _engine(wanted, task.entry.size)
    with shown_count(wanted.quiet) as progress:
        tally = work(task, wanted.out, engine, part, wanted.retry, progress, say)
    if part != WHOLE:
        done = f"{tally.done} of {tally.wanted} points are done, {tally.failed} failed"
        say(f"Part {wanted.part}: {done}. When all parts are, run it with --merge.")


def _write(task: Task, wanted: Wanted, say: Callable[[str], None]) -> None:
    """The tables, and the sweep in a few numbers."""
    from membrane.sweep.part import WHOLE
    from membrane.sweep.store import Store
    from membrane.sweep.tables import write_tables

    with Store.reading(WHOLE.file(wanted.out)) as store:
        write_tables(wanted.out, store, task.entry)
        totals = store.totals(task.entry)
    if wanted.parquet:
        from membrane.sweep.frame import write_parquet
        from membrane.sweep.results import read_sweep

        write_parquet(read_sweep(wanted.out), wanted.out)
    for line in _summed_up(totals, task.entry.size):
        say(line)


def _summed_up(totals: Totals, size: int) -> list[str]:
    missing, failed = size - totals.settled, totals.settled - totals.done
    lines = [f"{totals.done} of {size} points are done."]
    if missing:
        lines.append(f"{missing} are missing; run the sweep, or its parts, again.")
    if failed:
        lines.append(f"{failed} failed; failures.csv says why, --retry tries them again.")
    if totals.done:
        lines.append(
            f"No frequency is off by more than {totals.worst_cents:.2g} cent, as estimated; "
            f"{totals.seconds / totals.settled:.2g} s a point, {totals.solves} full solves."
        )
    return lines


def _check_alone(wanted: Wanted) -> None:
    """Raise StudyError where something that belongs to solving stands beside --merge."""
    beside = {
        "--workers": wanted.workers,
        "--scheduler": wanted.scheduler,
        "--part": wanted.part,
        "--retry": wanted.retry or None,
    }
    given = [name for name, value in beside.items() if value is not None]
    if given:
        raise StudyError(f"--merge solves nothing; leave {listed(given)} out.")


def _engine(wanted: Wanted, points: int) -> Engine:
    """The scheduler's workers, or as many processes as there are cores; Dask only if needed."""
    from membrane.sweep.engine import Serial

    if wanted.workers is not None and wanted.workers < 1:
        raise StudyError(f"--workers: expected at least 1 process, got {wanted.workers}.")
    if wanted.workers is not None and wanted.scheduler is not None:
        raise StudyError("--workers: the scheduler has its own workers; leave one out.")
    if wanted.workers == 1 or points == 1:
        return Serial()
    from membrane.sweep import cluster

    if wanted.scheduler is not None:
        return cluster.Scheduler(wanted.scheduler)
    count = min(wanted.workers or cluster.CORES, points)
    return cluster.Processes(count) if count > 1 else Serial()


def _nothing(sentence: str) -> None:
    """Said where nothing is to be printed."""
