"""What a sweep has found so far, as arrays, read from its store."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from membrane.errors import OutputError
from membrane.records.arrays import Floats, Ints
from membrane.sweep.branched import Branches
from membrane.sweep.part import WHOLE
from membrane.sweep.store import Store


@dataclass(frozen=True)
class SweepResults:
    """All points that are done, n of them, in the order of their numbers.

    numbers : (n,), from 1
    axes : key -> (n,), SI
    frequencies : (n, modes), Hz; NaN where a point has fewer modes than others
    error_cents : (n, modes), how far off each may be, up or down
    branches : (n, modes), the branch of each mode, from 1; 0 where it is not followed
    lost : (branch, number of the point) where a branch could not be followed on
    kinds : (n,), what the errors are
    failures : number -> the sentence that says why there is no answer
    """

    numbers: Ints
    axes: Mapping[str, Floats]
    frequencies: Floats
    error_cents: Floats
    branches: Ints
    lost: tuple[tuple[int, int], ...]
    kinds: tuple[str, ...]
    failures: Mapping[int, str]

    def frame(self) -> Any:
        """The rows of points.csv as a pandas DataFrame; needs pandas."""
        from membrane.sweep.frame import frame

        return frame(self)


def read_sweep(folder: Path | str) -> SweepResults:
    """The sweep that was last worked on in a folder, also while it is worked on.

    Raises OutputError where there is none.
    """
    with Store.reading(WHOLE.file(Path(folder))) as store:
        entries = store.sweeps()
        if not entries:
            raise OutputError(f"no sweep has begun in {folder}; run membrane sweep first.")
        outcomes = list(store.outcomes(entries[-1]))
        branches = store.branches(entries[-1])
    done = [(o.point, o.answer) for o in outcomes if o.answer is not None]
    values = np.array([point.values for point, _ in done], dtype=float)
    columns = values.reshape(len(done), len(entries[-1].axes)).T
    numbers = np.array([point.number for point, _ in done], dtype=np.int64)
    frequencies = _padded([answer.frequencies for _, answer in done])
    return SweepResults(
        numbers=numbers,
        axes=dict(zip(entries[-1].axes, columns, strict=True)),
        frequencies=frequencies,
        error_cents=_padded([answer.error_cents for _, answer in done]),
        branches=_branches(branches, numbers, frequencies),
        lost=branches.lost if branches else (),
        kinds=tuple(answer.kind for _, answer in done),
        failures={o.point.number: o.sentence for o in outcomes if o.answer is None},
    )


def _branches(branches: Branches | None, numbers: Ints, frequencies: Floats) -> Ints:
    """(n, modes) of the points that are done, 0 where nothing is known."""
    found = np.zeros(frequencies.shape, dtype=np.int64)
    if branches is not None:
        width = min(branches.count, frequencies.shape[1])
        found[:, :width] = branches.numbers[:, :width][numbers - 1]
        found[np.isnan(frequencies)] = 0
    return found


def _padded(rows: list[Floats]) -> Floats:
    """(n, longest) with NaN after the end of a shorter row."""
    padded = np.full((len(rows), max(map(len, rows), default=0)), np.nan)
    for place, row in enumerate(rows):
        padded[place, : len(row)] = row
    return padded
