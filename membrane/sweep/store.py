"""The store of a sweep: one SQLite file that no kill and no full disk can spoil.

Every answer is committed as it comes, with a write-ahead log and a sync of the disk. One
process writes: it holds a lock on the file beside the store. A store may hold several sweeps,
each under the name of its content.
"""

from __future__ import annotations

import fcntl
import json
import os
import sqlite3
from collections.abc import Iterable, Iterator
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from membrane.errors import OutputError
from membrane.records.arrays import Floats, Ints
from membrane.sweep.answer import Answer, Outcome
from membrane.sweep.branched import Branches
from membrane.sweep.points import Point
from membrane.sweep.schema import check, prepare

MISSING, DONE, FAILED = 0, 1, 2
"""States of a point."""

_COLUMNS = "point, sentence, seconds, frequencies, error_cents, kind, solves"


@dataclass(frozen=True)
class Entry:
    """A sweep as the store knows it.

    name, study : of its content, and of the content of the study alone
    axes : keys of the numbers that vary
    size : how many points it has
    """

    name: str
    study: str
    title: str
    axes: tuple[str, ...]
    size: int


@dataclass(frozen=True)
class Totals:
    """A sweep in a few numbers.

    settled : points that are done or have failed
    worst_cents : the largest error, None where no point is done
    seconds : that all points took, each on one process
    solves : full solves that were made
    """

    settled: int
    done: int
    worst_cents: float | None
    seconds: float
    solves: int


class Store:
    """An open store. Its methods raise OutputError where the file cannot be read or written."""

    def __init__(self, file: Path, connection: sqlite3.Connection) -> None:
        self._file = file
        self._connection = connection

    @classmethod
    @contextmanager
    def writing(cls, file: Path) -> Iterator[Store]:
        """The store to write to, made where there is none; nobody else may write to it."""
        with _failures(file), _lock(file), _connected(f"file:{_quoted(file)}") as connection:
            connection.execute("PRAGMA journal_mode = WAL")
            connection.execute("PRAGMA synchronous = FULL")
            prepare(file, connection)
            yield cls(file, connection)

    @classmethod
    @contextmanager
    def reading(cls, file: Path) -> Iterator[Store]:
        """A store that is there, also while another process writes to it."""
        if not file.is_file():
            raise OutputError(f"there is no sweep in {file.parent}; run membrane sweep first.")
        with _failures(file), _connected(f"file:{_quoted(file)}?mode=rw") as connection:
            check(file, connection)
            yield cls(file, connection)

    def sweeps(self) -> list[Entry]:
        """All sweeps, the one that was last worked on at the end."""
        rows = self._read("SELECT name, study, title, axes, size FROM sweeps ORDER BY turn")
        return [Entry(row[0], row[1], row[2], tuple(json.loads(row[3])), row[4]) for row in rows]

    def begin(self, entry: Entry) -> None:
        """Note a sweep, unless it is noted already, as the one that is worked on."""
        row = (entry.name, entry.study, entry.title, json.dumps(entry.axes), entry.size)
        turn = "(SELECT ifnull(max(turn), 0) + 1 FROM sweeps)"
        self._write(
            f"INSERT INTO sweeps VALUES (?, ?, ?, ?, ?, {turn}) "
            f"ON CONFLICT (name) DO UPDATE SET turn = {turn}",
            [row],
        )

    def states(self, entry: Entry) -> Ints:
        """(size + 1,), by number: MISSING, DONE or FAILED."""
        states = np.full(entry.size + 1, MISSING, dtype=np.int64)
        query = "SELECT number, sentence = '' FROM points WHERE sweep = ?"
        for number, is_done in self._read(query, (entry.name,)):
            states[number] = DONE if is_done else FAILED
        return states

    def add(self, entry: Entry, named: Iterable[tuple[str, Outcome]]) -> None:
        """Write outcomes, each with the name of its point, and see that they are on the disk."""
        rows = [(entry.name, o.point.number, name, *_row(o)) for name, o in named]
        columns = f"sweep, number, name, {_COLUMNS}, worst_cents"
        marks = ", ".join("?" * len(columns.split(",")))
        self._write(f"INSERT OR REPLACE INTO points ({columns}) VALUES ({marks})", rows)

    def totals(self, entry: Entry) -> Totals:
        """A sweep in a few numbers."""
        query = """
            SELECT count(*), ifnull(sum(sentence = ''), 0), max(worst_cents),
                ifnull(sum(seconds), 0.0), ifnull(sum(solves), 0)
            FROM points WHERE sweep = ?"""
        return Totals(*next(self._read(query, (entry.name,))))

    def known(self, name: str) -> Outcome | None:
        """The answer to a point of that name in any sweep."""
        query = f"SELECT {_COLUMNS} FROM points WHERE name = ? AND sentence = '' LIMIT 1"
        return next((_outcome(0, row) for row in self._read(query, (name,))), None)

    def named_outcomes(self, entry: Entry) -> Iterator[tuple[str, Outcome]]:
        """Every outcome of a sweep with the name of its point, in the order of the numbers."""
        query = f"SELECT number, name, {_COLUMNS} FROM points WHERE sweep = ? ORDER BY number"
        for number, name, *row in self._read(query, (entry.name,)):
            yield name, _outcome(number, row)

    def outcomes(self, entry: Entry) -> Iterator[Outcome]:
        """Every outcome of a sweep, in the order of the numbers."""
        yield from (outcome for _, outcome in self.named_outcomes(entry))

    def most_modes(self, entry: Entry) -> int:
        """The largest count of modes among the points of a sweep."""
        query = "SELECT ifnull(max(length(frequencies)), 0) / 8 FROM points WHERE sweep = ?"
        return int(next(self._read(query, (entry.name,)))[0])

    def branches(self, entry: Entry) -> Branches | None:
        """The branches of a sweep; None where they have not been followed."""
        query = "SELECT numbers, lost FROM branches WHERE sweep = ?"
        found = next(self._read(query, (entry.name,)), None)
        if found is None:
            return None
        numbers = np.frombuffer(found[0], dtype="<i4").reshape(entry.size, -1)
        lost = tuple((branch, point) for branch, point in json.loads(found[1]))
        return Branches(numbers.astype(np.int64), lost)

    def keep_branches(self, entry: Entry, branches: Branches) -> None:
        """Write the branches of a sweep, all at once."""
        blob = branches.numbers.astype("<i4").tobytes()
        row = (entry.name, blob, json.dumps(branches.lost))
        self._write("INSERT OR REPLACE INTO branches VALUES (?, ?, ?)", [row])

    def _read(self, query: str, values: tuple[Any, ...] = ()) -> Iterator[Any]:
        yield from self._connection.execute(query, values)

    def _write(self, command: str, rows: list[tuple[Any, ...]]) -> None:
        with self._connection:  # all of them or none
            self._connection.executemany(command, rows)


def _row(outcome: Outcome) -> tuple[Any, ...]:
    answer = outcome.answer
    values = json.dumps(outcome.point.values)
    start = (values, outcome.sentence, outcome.seconds)
    if answer is None:
        return (*start, None, None, None, None, None)
    blobs = _blob(answer.frequencies), _blob(answer.error_cents)
    return (*start, *blobs, answer.kind, answer.solves, float(answer.error_cents.max()))


def _outcome(number: int, row: Any) -> Outcome:
    values, sentence, seconds, frequencies, errors, kind, solves = row
    answer = None
    if frequencies is not None:
        answer = Answer(_floats(frequencies), _floats(errors), kind, solves)
    return Outcome(Point(number, tuple(json.loads(values))), answer, sentence, seconds)


def _blob(numbers: Floats) -> bytes:
    return np.asarray(numbers, dtype="<f8").tobytes()


def _floats(blob: bytes) -> Floats:
    return np.frombuffer(blob, dtype="<f8")


def _quoted(file: Path) -> str:
    from urllib.parse import quote

    return quote(str(file.resolve()))


@contextmanager
def _connected(uri: str) -> Iterator[sqlite3.Connection]:
    connection = sqlite3.connect(uri, uri=True, timeout=30.0)
    try:
        yield connection
    finally:
        with suppress(sqlite3.Error):  # what could not be written has been told already
            connection.close()


@contextmanager
def _lock(file: Path) -> Iterator[None]:
    """The right to write, which ends with the process however that ends."""
    file.parent.mkdir(parents=True, exist_ok=True)
    handle = os.open(file.with_suffix(".lock"), os.O_RDWR | os.O_CREAT, 0o644)
    try:
        fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
        yield
    except BlockingIOError:
        raise OutputError(
            f"another process is writing to {file}; wait for it, or choose another folder."
        ) from None
    finally:
        os.close(handle)


@contextmanager
def _failures(file: Path) -> Iterator[None]:
    try:
        yield
    except sqlite3.DatabaseError as failure:
        raise OutputError(
            f"the sweep's store {file} cannot be used: {failure}; what was stored before is "
            "kept. Make room or choose another folder, and run the same command again."
        ) from failure
    except OSError as failure:
        raise OutputError(
            f"the sweep's folder {file.parent} cannot be used: {failure.strerror}; "
            "make room or choose another folder, and run the same command again."
        ) from failure
