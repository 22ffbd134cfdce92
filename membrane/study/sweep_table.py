"""The points of a sweep from a CSV file, one a row, each column a number of the study."""

from __future__ import annotations

import csv
import re
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from pathlib import Path

from membrane.records.sweep import Axis
from membrane.study.probe import Probe
from membrane.study.table import Table

_HEADING = re.compile(r"\s*(\S.*?)\s*(?:\[([^][]*[^][\d][^][]*)\])?\s*")
"""A key, and a unit in brackets after it; a bare number in brackets is the key's own."""

_BARE = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d{1,3})?")


@dataclass(frozen=True)
class _Column:
    """A heading of the file: the key, and how many SI units bare numbers below it count."""

    key: str
    factor: Fraction


def read_table(table: Table, file: Path, probe: Probe) -> list[Axis | None]:
    """An axis for each column; nothing where a problem has been noted."""
    try:
        rows = _rows(file)
        columns = [_column(heading, probe) for heading in rows[0]]
        return [_axis(columns, place, rows[1:], probe) for place in range(len(columns))]
    except ValueError as failure:
        table.refuse("file", f"{file.name}: {failure}")
        return []


def _rows(file: Path) -> list[list[str]]:
    """All rows but empty ones, the heading first. Raises ValueError with a sentence."""
    try:
        text = file.read_text(encoding="utf-8-sig")
        rows = [row for row in csv.reader(text.splitlines(), strict=True) if any(row)]
    except (OSError, UnicodeDecodeError, csv.Error) as failure:
        raise ValueError(f"the file cannot be read ({failure}); save it as CSV in UTF-8.") from None
    if len(rows) < 2:
        raise ValueError("there are no points; give a heading of keys and one row a point.")
    for place, row in enumerate(rows[1:], 1):
        if len(row) != len(rows[0]):
            wanted = len(rows[0])
            raise ValueError(f"point {place} has {len(row)} values, the heading {wanted}.")
    return rows


def _column(heading: str, probe: Probe) -> _Column:
    found = _HEADING.fullmatch(heading)
    if found is None:
        raise ValueError("a column has no heading; name the key of the study.")
    key, unit = found[1], found[2]
    probe.find(key)
    return _Column(key, Fraction(repr(probe.number(key, f"1 {unit}"))) if unit else Fraction(1))


def _axis(columns: list[_Column], place: int, rows: Sequence[Sequence[str]], probe: Probe) -> Axis:
    column = columns[place]
    values = [_number(column, row[place].strip(), at, probe) for at, row in enumerate(rows, 1)]
    for number in {min(values), max(values)}:  # those between them are sound then, too
        _judged(column.key, number, values.index(number) + 1, probe)
    whole = probe.is_whole(column.key)
    return Axis(column.key, probe.find(column.key), tuple(values), whole=whole)


def _number(column: _Column, text: str, at: int, probe: Probe) -> float:
    """The SI number of a cell: a bare number in the column's unit, or one with its own."""
    if not _BARE.fullmatch(text):
        return _judged(column.key, text, at, probe)
    number = Fraction(text) * column.factor
    return int(number) if probe.is_whole(column.key) and number.denominator == 1 else float(number)


def _judged(key: str, value: float | str, at: int, probe: Probe) -> float:
    try:
        return probe.number(key, value)
    except ValueError as failure:
        raise ValueError(f"{key} of point {at}: {failure}") from None
