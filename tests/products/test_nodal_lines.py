"""nodal_lines.vtu and nodal_lines.csv hold every point of every line."""

from __future__ import annotations

import csv
from dataclasses import replace
from pathlib import Path

import numpy as np

from membrane.products import nodal_lines
from membrane.records.spectrum import Spectrum
from tests.products.vtk_reader import arrays_of, points_of, read_grid


def test_the_rows_are_the_lines(patched: Spectrum, tmp_path: Path) -> None:
    nodal_lines.write(patched, tmp_path, nodal_lines.Options())
    with open(tmp_path / "nodal_lines.csv", newline="") as file:
        rows = list(csv.DictReader(file))
    lines = [
        (partial.number, number, line)
        for partial in patched.partials
        for number, line in enumerate(partial.nodal.lines, 1)
    ]
    assert len(lines) >= 5
    assert len(rows) == sum(line.shape[1] for *_, line in lines)
    for mode, number, line in lines:
        own = [r for r in rows if (r["mode"], r["line"]) == (str(mode), str(number))]
        assert [int(r["point"]) for r in own] == list(range(1, line.shape[1] + 1))
        written = [[float(r["x_m"]), float(r["y_m"])] for r in own]
        np.testing.assert_array_equal(np.array(written).T, line)


def test_the_cells_are_the_lines(patched: Spectrum, tmp_path: Path) -> None:
    nodal_lines.write(patched, tmp_path, nodal_lines.Options())
    grid = read_grid(tmp_path / "nodal_lines.vtu")
    points, data = points_of(grid), arrays_of(grid.GetCellData())
    ends = np.array(
        [[grid.GetCell(i).GetPointId(k) for k in range(2)] for i in range(grid.GetNumberOfCells())]
    ).T
    pieces = np.hypot(*(points[:2, ends[0]] - points[:2, ends[1]]))
    for partial in patched.partials:
        exact = sum(np.hypot(*np.diff(line)).sum() for line in partial.nodal.lines)
        np.testing.assert_allclose(pieces[data["mode"] == partial.number].sum(), exact)
    assert grid.GetNumberOfCells() > 100
    assert data["line"].min() == 1


def test_a_head_without_lines_gives_empty_files(patched: Spectrum, tmp_path: Path) -> None:
    first = replace(patched, partials=patched.partials[:1])
    nodal_lines.write(first, tmp_path, nodal_lines.Options())
    assert read_grid(tmp_path / "nodal_lines.vtu").GetNumberOfCells() == 0
    assert (tmp_path / "nodal_lines.csv").read_text().splitlines() == ["mode,line,point,x_m,y_m"]
