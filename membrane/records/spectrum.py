"""The spectrum: what every product reads."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from membrane.records.arrays import Floats
from membrane.records.membrane import Membrane
from membrane.records.modes import Modes
from membrane.records.study import Study


@dataclass(frozen=True)
class NodalPattern:
    """Where one mode stays at rest.

    lines : polylines, each (2, n) metres, every point on the mode's zero set
    length : of all lines, metres, fixed edges not counted
    domains : parts of the head that move as one
    diameters, circles : (m, n) of a round head, else None
    """

    lines: tuple[Floats, ...]
    length: float
    domains: int
    diameters: int | None
    circles: int | None


@dataclass(frozen=True)
class Partial:
    """One row of the table: a mode as the designer reads it.

    frequency, low, high : Hz, low <= frequency <= high
    bracket : "guaranteed", "estimated" or "none"
    bracket_cents : from low to high, None where low is 0
    ratio : to the chosen partial
    note, note_cents : nearest note of equal temperament and the cents above it
    cluster : a number shared by equal frequencies
    """

    number: int
    frequency: float
    low: float
    high: float
    bracket: str
    bracket_cents: float | None
    ratio: float | None
    note: str | None
    note_cents: float | None
    cluster: int
    nodal: NodalPattern


@dataclass(frozen=True, repr=False)
class Spectrum:
    """The answer to a study.

    complete : True only if it is proven that no mode below the last is missing
    timings : seconds by stage
    mesh_facts : triangles, unknowns, degree and the like, by name
    notes : sentences for the user on how the outline was come by
    """

    study: Study
    membrane: Membrane
    modes: Modes
    partials: tuple[Partial, ...]
    complete: bool
    mesh_facts: Mapping[str, float]
    timings: Mapping[str, float]
    notes: tuple[str, ...] = ()

    @property
    def frequencies(self) -> Floats:
        """(n,), Hz."""
        return self.modes.frequencies

    def __repr__(self) -> str:
        first, last = self.frequencies[[0, -1]]
        name = self.study.title or "a study"
        return f"<Spectrum of {name}: {len(self.partials)} modes, {first:.6g} to {last:.6g} Hz>"
