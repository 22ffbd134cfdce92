"""gmsh's failures, turned into errors with a sentence."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager

from membrane.errors import MembraneError


@contextmanager
def gmsh_failures(kind: type[MembraneError], sentence: str) -> Iterator[None]:
    """Raise ``kind`` where gmsh raises, which always is a plain Exception."""
    try:
        yield
    except Exception as failure:
        if type(failure) is not Exception:
            raise
        raise kind(f"{sentence}: {failure}.") from failure
