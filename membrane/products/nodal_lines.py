"""nodal_lines.vtu and nodal_lines.csv: where to hold, mute or glue, point by point."""

from __future__ import annotations

import csv
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from membrane.products.vtu import write_vtu
from membrane.records.arrays import Floats
from membrane.records.spectrum import Spectrum

STEM = "nodal_lines"


@dataclass(frozen=True)
class Options:
    """None: both files hold every point of every line."""


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write every nodal line, as line cells bearing the mode's number, and as rows."""
    _write_vtu(spectrum, folder / f"{STEM}.vtu")
    with open(folder / f"{STEM}.csv", "w", newline="", encoding="utf-8") as file:
        writer = csv.writer(file)
        writer.writerow(["mode", "line", "point", "x_m", "y_m"])
        for mode, number, line in _lines(spectrum):
            columns = line.T.tolist()
            writer.writerows([mode, number, k, x, y] for k, (x, y) in enumerate(columns, 1))


def _lines(spectrum: Spectrum) -> Iterator[tuple[int, int, Floats]]:
    """Mode number, line number within the mode, and points (2, n)."""
    for partial in spectrum.partials:
        for number, line in enumerate(partial.nodal.lines, 1):
            yield partial.number, number, line


def _write_vtu(spectrum: Spectrum, path: Path) -> None:
    points, cells = [np.empty((2, 0))], [np.empty((2, 0), dtype=np.int64)]
    modes, numbers, start = [], [], 0
    for mode, number, line in _lines(spectrum):
        count = line.shape[1]
        ahead = np.arange(start, start + count - 1)
        points.append(line)
        cells.append(np.stack([ahead, ahead + 1]))
        modes += [mode] * (count - 1)
        numbers += [number] * (count - 1)
        start += count
    data = {"mode": np.array(modes, dtype=np.int64), "line": np.array(numbers, dtype=np.int64)}
    write_vtu(path, np.hstack(points), "line", np.hstack(cells), {}, data)
