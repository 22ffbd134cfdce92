"""points.csv and failures.csv: what a sweep has found, in the order of its points."""

from __future__ import annotations

import csv
import os
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import Any

from membrane.errors import OutputError
from membrane.sweep.answer import Outcome
from membrane.sweep.branched import Branches
from membrane.sweep.store import Entry, Store

POINTS, FAILURES = "points.csv", "failures.csv"
_MODE_COLUMNS = ("mode", "frequency_hz", "error_cents", "branch", "kind_of_error")


def write_tables(folder: Path, store: Store, entry: Entry) -> None:
    """Write both tables anew; the one of failures only where there are any.

    Numbers have all their digits, keys are in SI units; a mode that is not followed has no
    branch. Raises OutputError.
    """
    branches = store.branches(entry)
    points = (row for outcome in store.outcomes(entry) for row in _modes(outcome, branches))
    failures = [_failure(o) for o in store.outcomes(entry) if o.answer is None]
    try:
        _write(folder / POINTS, ("point", *entry.axes, *_MODE_COLUMNS), points)
        if failures:
            _write(folder / FAILURES, ("point", *entry.axes, "sentence"), failures)
        else:
            (folder / FAILURES).unlink(missing_ok=True)
    except OSError as failure:
        raise OutputError(
            f"the tables in {folder} cannot be written: {failure.strerror}; "
            "make room there and run the same command again."
        ) from failure


def _modes(outcome: Outcome, branches: Branches | None) -> Iterator[tuple[Any, ...]]:
    point, answer = outcome.point, outcome.answer
    if answer is None:
        return
    pairs = zip(answer.frequencies.tolist(), answer.error_cents.tolist(), strict=True)
    for mode, (frequency, error) in enumerate(pairs, 1):
        branch = branches.of(point.number, mode) if branches else None
        yield (point.number, *point.values, mode, frequency, error, branch, answer.kind)


def _failure(outcome: Outcome) -> tuple[Any, ...]:
    return (outcome.point.number, *outcome.point.values, outcome.sentence)


def _write(file: Path, heading: tuple[str, ...], rows: Iterable[tuple[Any, ...]]) -> None:
    """The file is there whole or as it was before."""
    partial = file.with_suffix(".partial")
    with open(partial, "w", newline="", encoding="utf-8") as out:
        writer = csv.writer(out)
        writer.writerow(heading)
        writer.writerows(rows)
    os.replace(partial, file)
