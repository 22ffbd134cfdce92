"""The branches of a sweep: followed, drawn, and a word on what became of them."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from membrane.cli.progress import shown_progress
from membrane.errors import OutputError
from membrane.records.study import Study

if TYPE_CHECKING:
    from membrane.sweep.branched import Branches
    from membrane.sweep.task import Task

PICTURE, PARTIAL = "branches.png", "branches.partial.png"

MOST_NAMED = 5
"""Lost branches that are named one by one."""


def follow_branches(task: Task, folder: Path, quiet: bool, say: Callable[[str], None]) -> None:
    """Follow and store them; say where they cannot be, or are lost. Raises OutputError."""
    from membrane.sweep.branching import branch

    with shown_progress(quiet) as stage:
        stage("Following the branches")
        found = branch(task, folder, say)
    if found is not None and found.lost:
        say(_lost(found))


def draw_branches(study: Study, task: Task, folder: Path) -> None:
    """Write the picture, or see that no old one is left. Raises OutputError."""
    from membrane.products.branch_picture import write_branches
    from membrane.sweep.diagram import diagram
    from membrane.sweep.results import read_sweep
    from membrane.sweep.solving import units_of

    results = read_sweep(folder)
    try:
        if not results.branches.any():
            (folder / PICTURE).unlink(missing_ok=True)
            return
        drawing = diagram(study.title, task.sweep, units_of(study), results)
        write_branches(drawing, folder / PARTIAL)
        os.replace(folder / PARTIAL, folder / PICTURE)
    except OSError as failure:
        raise OutputError(
            f"{folder / PICTURE} cannot be written: {failure.strerror}; "
            "make room there and run the same command again."
        ) from failure


def _lost(found: Branches) -> str:
    named = [f"{branch} at point {point}" for branch, point in found.lost[:MOST_NAMED]]
    more = len(found.lost) - len(named)
    named += [f"{more} more"] if more else []
    return f"Branches lost on the way: {', '.join(named)}; what goes on there has a new number."
