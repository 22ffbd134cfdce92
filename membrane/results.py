"""A result folder that is only ever replaced by a whole result.

What is promised: a run is written to a hidden folder beside the wanted one and moved into
place in one step of the file system. Whenever the run is killed, the wanted folder holds
either what was there before or the new result whole. Where there was an earlier result,
the two folders change places in one step (renameat2 with RENAME_EXCHANGE, on Linux). A file
system without that step takes two; a kill between them leaves the earlier result in the
hidden folder ``.NAME.earlier``, and the next run puts it back before anything else.
Hidden folders that a killed run has left are removed by the next. A folder with files in it
that no run has written is refused, so that they are not lost. A power cut is not covered.
"""

from __future__ import annotations

import ctypes
import errno
import fcntl
import json
import os
import shutil
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from glob import escape
from pathlib import Path
from secrets import token_hex
from typing import Any

from membrane.errors import OutputError

SUMMARY = "summary.json"
_KEYS = {"software", "modes"}

# From <linux/fs.h> and <fcntl.h>.
_RENAME_EXCHANGE = 2
_AT_FDCWD = -100
_NO_EXCHANGE = {errno.ENOSYS, errno.EINVAL, errno.EOPNOTSUPP}


def check_free(folder: Path | str) -> Path:
    """The whole path of a folder that may be written to or replaced.

    Raises OutputError where something else than an earlier result is there.
    """
    place = Path(folder).expanduser().resolve()
    with _os_failures(place):
        _recover(place)
        if place.exists() and not place.is_dir():
            raise OutputError(f"{place} is a file; choose another folder for the result.")
        if place.is_dir():
            _check_only_results(place)
    return place


@contextmanager
def in_place(folder: Path | str) -> Iterator[Path]:
    """A hidden folder to write into; it is moved to ``folder`` when the block ends well.

    An earlier result there is kept until then, and is kept whole where the block fails.
    Raises OutputError where the folder cannot be made, replaced or moved.
    """
    place = check_free(folder)
    with _os_failures(place):
        place.parent.mkdir(parents=True, exist_ok=True)
        _sweep(place)
        partial = place.with_name(_prefix(place) + token_hex(6))
        partial.mkdir()
        claim = _claim(partial)
    try:
        with _os_failures(place):
            yield partial
            check_free(place)
            _move(partial, place)
    finally:
        shutil.rmtree(partial, ignore_errors=True)
        if claim is not None:
            os.close(claim)


def _check_only_results(place: Path) -> None:
    """Raise OutputError where a folder holds anything that no earlier run has written."""
    names = {entry.name for entry in place.iterdir()}
    summary = _summary(place)
    if names and summary is None:
        raise OutputError(
            f"{place} holds something else than an earlier result; "
            "choose another folder, so that nothing is lost."
        )
    strange = sorted(names - set((summary or {}).get("files", names)))
    if strange:
        raise OutputError(
            f"{place} holds {', '.join(strange)}, which no run has written; "
            "move that elsewhere or choose another folder, so that nothing is lost."
        )


def _summary(place: Path) -> dict[str, Any] | None:
    """The summary of an earlier result; None where there is none."""
    try:
        summary = json.loads((place / SUMMARY).read_bytes())
    except (FileNotFoundError, NotADirectoryError, ValueError):
        return None
    return summary if isinstance(summary, dict) and summary.keys() >= _KEYS else None


def _prefix(place: Path) -> str:
    return f".{place.name}.partial-"


def _earlier(place: Path) -> Path:
    return place.with_name(f".{place.name}.earlier")


def _move(partial: Path, place: Path) -> None:
    """Put the new folder in place; afterwards ``partial`` is the earlier one or gone."""
    if not place.exists() or not any(place.iterdir()):
        partial.rename(place)  # replaces an empty folder in one step
    elif not _exchange(partial, place):
        _move_in_two_steps(partial, place)


def _move_in_two_steps(partial: Path, place: Path) -> None:
    earlier = _earlier(place)
    place.rename(earlier)
    partial.rename(place)
    shutil.rmtree(earlier, ignore_errors=True)


def _exchange(one: Path, other: Path) -> bool:
    """Let two folders change places in one step; False where that cannot be done."""
    if not sys.platform.startswith("linux"):
        return False
    rename = getattr(ctypes.CDLL(None, use_errno=True), "renameat2", None)
    if rename is None:
        return False
    paths = os.fsencode(one), os.fsencode(other)
    if rename(_AT_FDCWD, paths[0], _AT_FDCWD, paths[1], _RENAME_EXCHANGE) == 0:
        return True
    code = ctypes.get_errno()
    if code in _NO_EXCHANGE:
        return False
    raise OSError(code, os.strerror(code))


def _recover(place: Path) -> None:
    """Put back a result that a kill between two steps has left aside."""
    earlier = _earlier(place)
    if not earlier.is_dir():
        return
    if place.exists():
        shutil.rmtree(earlier, ignore_errors=True)
    else:
        earlier.rename(place)


def _sweep(place: Path) -> None:
    """Remove what killed runs have left; folders of runs that still go on are claimed."""
    for left in place.parent.glob(f"{escape(_prefix(place))}*"):
        claim = _claim(left)
        if claim is not None:
            shutil.rmtree(left, ignore_errors=True)
            os.close(claim)


def _claim(partial: Path) -> int | None:
    """A lock on a folder that ends with the process; None where it cannot be had."""
    try:
        handle = os.open(partial, os.O_RDONLY)
    except OSError:
        return None
    try:
        fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except OSError:
        os.close(handle)
        return None
    return handle


@contextmanager
def _os_failures(place: Path) -> Iterator[None]:
    try:
        yield
    except OSError as failure:
        raise OutputError(
            f"The result cannot be written to {place}: {failure.strerror}; "
            "choose another folder or make room there."
        ) from failure
