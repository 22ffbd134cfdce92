"""Word of what is being done, on anything that takes over a second."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from threading import Timer
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from membrane.sweep.work import Tally

PATIENCE = 1.0
"""Seconds before anything is shown."""


@contextmanager
def shown_progress(quiet: bool) -> Iterator[Callable[[str], None]]:
    """A callback for the names of stages; silent where stderr is not a terminal."""
    from rich.console import Console

    console = Console(stderr=True)
    if quiet or not console.is_terminal:
        yield lambda stage: None
        return
    status = console.status("")
    timer = Timer(PATIENCE, status.start)
    timer.daemon = True
    timer.start()
    try:
        yield lambda stage: status.update(f"{stage} …")
    finally:
        timer.cancel()
        timer.join()
        status.stop()


@contextmanager
def shown_count(quiet: bool) -> Iterator[Callable[[Tally], None]]:
    """A callback for how far a sweep has come; silent where stderr is not a terminal.

    Shown are a bar, the points done per second and the time left.
    """
    from rich.console import Console
    from rich.progress import (
        BarColumn,
        MofNCompleteColumn,
        Progress,
        TextColumn,
        TimeRemainingColumn,
    )

    console = Console(stderr=True)
    if quiet or not console.is_terminal:
        yield lambda tally: None
        return
    rate = TextColumn("{task.fields[rate]}")
    columns = BarColumn(), MofNCompleteColumn(), rate, TimeRemainingColumn()
    with Progress(*columns, console=console) as progress:
        bar = progress.add_task("", rate="")

        def update(tally: Tally) -> None:
            speed = progress.tasks[0].speed
            rate = f"{speed:.3g} a second" if speed else ""
            progress.update(bar, total=tally.wanted, completed=tally.done + tally.failed, rate=rate)

        yield update
