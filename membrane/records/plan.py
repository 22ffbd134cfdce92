"""The plan: what a study would take, before anything is solved."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Plan:
    """What the first try would be.

    area : of the head, square metres
    degree : of the elements
    unknowns : about how many
    notes : sentences for the user on how the outline was come by
    """

    area: float
    degree: int
    unknowns: int
    notes: tuple[str, ...] = ()
