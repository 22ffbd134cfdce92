"""A singular vertex of a mesh."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Corner:
    """A vertex near which modes behave like r^exponent, with no whole exponent."""

    vertex: int
    exponent: float
