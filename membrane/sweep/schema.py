"""The tables of a sweep's store, and the version that says whether we know them."""

from __future__ import annotations

import sqlite3
from pathlib import Path

from membrane.errors import OutputError

VERSION = 2
"""Of the schema. A later one is refused."""

_SCHEMA = """
CREATE TABLE sweeps (
    name TEXT PRIMARY KEY, study TEXT NOT NULL, title TEXT NOT NULL, axes TEXT NOT NULL,
    size INTEGER NOT NULL, turn INTEGER NOT NULL);
CREATE TABLE points (
    sweep TEXT NOT NULL, number INTEGER NOT NULL, name TEXT NOT NULL, point TEXT NOT NULL,
    sentence TEXT NOT NULL, seconds REAL NOT NULL, frequencies BLOB, error_cents BLOB,
    kind TEXT, solves INTEGER, worst_cents REAL, PRIMARY KEY (sweep, number)) WITHOUT ROWID;
CREATE INDEX by_name ON points (name);
"""

_SINCE_2 = """
CREATE TABLE branches (sweep TEXT PRIMARY KEY, numbers BLOB NOT NULL, lost TEXT NOT NULL);
"""


def prepare(file: Path, connection: sqlite3.Connection) -> None:
    """Make the tables of a new store; bring one that is there up to date."""
    if _version(connection) == 0 and not _tables(connection):
        _run(connection, _SCHEMA + _SINCE_2)
    check(file, connection)


def check(file: Path, connection: sqlite3.Connection) -> None:
    """Bring a store up to date. Raises OutputError where it is a later version's, or none."""
    if _version(connection) == 1:
        _run(connection, _SINCE_2)
    found = _version(connection)
    if found > VERSION:
        raise OutputError(
            f"{file} was written by a later version of membrane; "
            "use that version, or choose another folder."
        )
    if found != VERSION:
        raise OutputError(f"{file} is not the store of a sweep; choose another folder.")


def _run(connection: sqlite3.Connection, script: str) -> None:
    connection.executescript(f"BEGIN; {script} PRAGMA user_version = {VERSION}; COMMIT;")


def _version(connection: sqlite3.Connection) -> int:
    return int(connection.execute("PRAGMA user_version").fetchone()[0])


def _tables(connection: sqlite3.Connection) -> int:
    return int(connection.execute("SELECT count(*) FROM sqlite_master").fetchone()[0])
