"""Word of what is being done, on anything that takes over a second."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from threading import Timer

PATIENCE = 1.0
"""Seconds before anything is shown."""


@contextmanager
def shown_progress(quiet: bool) -> Iterator[Callable[[str], None]]:
    """A callback for the names of stages; silent where stderr is not a terminal."""
    from rich.console import Console

    console = Console(stderr=True)
    if quiet or not console.is_terminal:
        yield lambda stage: None
        return
    status = console.status("")
    timer = Timer(PATIENCE, status.start)
    timer.daemon = True
    timer.start()
    try:
        yield lambda stage: status.update(f"{stage} …")
    finally:
        timer.cancel()
        timer.join()
        status.stop()
