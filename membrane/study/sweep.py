"""The table ``sweep``: which numbers of the study vary, and over which values."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from membrane.records.sweep import Axis, Pick, Sweep
from membrane.study.axes import read_axis
from membrane.study.probe import Probe
from membrane.study.sweep_table import read_table
from membrane.study.table import Table
from membrane.units import File


@dataclass(frozen=True)
class _Keys:
    pick: Pick = Pick.GRID
    count: int | None = None
    seed: int | None = None
    file: File | None = None
    bracket: bool = False


_BELONGS = {"count": Pick.RANDOM, "seed": Pick.RANDOM, "file": Pick.TABLE}


def read_sweep(table: Table, probe: Probe, base: Path) -> Sweep | None:
    """The sweep over a study that is sound itself; None where a problem has been noted.

    probe : the study, which knows what each of its numbers may be
    base : the folder that the path of a CSV file starts from
    """
    keys = table.read(_Keys, table.without("axes"), ("axes",), base)
    if keys is None or not _fit_together(table, keys):
        return None
    axes = _axes(table, keys, probe)
    _refuse_twice(table, axes)
    if not axes or None in axes:
        return None
    known = tuple(axis for axis in axes if axis is not None)
    return Sweep(keys.pick, known, keys.count or 0, keys.seed or 0, keys.bracket)


def _axes(table: Table, keys: _Keys, probe: Probe) -> list[Axis | None]:
    if keys.file is not None:
        return read_table(table, keys.file, probe)
    inner = table.array("axes")
    if not inner:
        table.refuse("axes", "is missing; give at least one [[sweep.axes]] with a key.")
    return [read_axis(axis, probe, keys.pick) for axis in inner]


def _fit_together(table: Table, keys: _Keys) -> bool:
    before = len(table.problems.found)
    for key, pick in _BELONGS.items():
        if getattr(keys, key) is not None and keys.pick is not pick:
            table.refuse(key, f'goes with pick = "{pick}"; leave one out.')
    if keys.pick is Pick.RANDOM and keys.count is None:
        table.refuse("count", "is missing; say how many random points there are to be.")
    if keys.count is not None and keys.count < 1:
        table.refuse("count", f"expected at least 1 point, got {keys.count}.")
    if keys.seed is not None and not 0 <= keys.seed < 2**63:
        table.refuse("seed", f"expected a whole number from 0 on, got {keys.seed}.")
    if keys.pick is Pick.TABLE and keys.file is None:
        table.refuse("file", 'is missing; give the CSV file with the points, "points.csv".')
    if keys.file is not None and "axes" in table.keys:
        table.refuse("axes", "stands beside file, whose columns are the axes; leave one out.")
    return len(table.problems.found) == before


def _refuse_twice(table: Table, axes: list[Axis | None]) -> None:
    taken = set()
    for place, axis in enumerate(axes, 1):
        if axis is not None and axis.key in taken:
            table.refuse(f"axes[{place}]", f"{axis.key} has an axis already; leave one out.")
        taken.add(axis.key if axis else None)
