"""The eigen stage, its count closed, against the least work that any solver does."""

from __future__ import annotations

from membrane.mesh import Resolution
from scripts.benchmarks import ours
from scripts.benchmarks.floor import floor
from scripts.benchmarks.heads import disc
from scripts.benchmarks.tables import Row
from scripts.benchmarks.timing import alternating

DEGREE = 8
COUNTS = {20: 2.2, 60: 2.5}
"""Modes wanted, and the most that they may cost in floors."""

PHASES = {20: (4.8, 3.0, 1.58, 0.9, 0.49), 60: (8.7, 5.0, 2.6, 1.45, 0.79)}
"""Edge lengths times wave numbers for about 1e3, 3e3, 1e4, 3e4 and 1e5 unknowns."""

QUICK = 3
"""How many of the sizes a quick run measures."""


def measure(quick: bool) -> dict[str, list[Row]]:
    """One row for each number of modes and size."""
    chosen = slice(QUICK if quick else None)
    rows = [_row(count, phase, quick) for count in COUNTS for phase in PHASES[count][chosen]]
    return {"eigen stage": rows}


def _row(count: int, phase: float, quick: bool) -> Row:
    pencil = ours.assembled(disc().keys, count, Resolution(DEGREE, phase, 1e-8))
    K, M = ours.summed_up(pencil)
    seconds = alternating(
        {"ours": lambda: ours.modes(pencil, count), "floor": lambda: floor(K, M, count)},
        rounds=3 if quick else 7,
        budget=5.0 if quick else 20.0,
    )
    return {
        "modes": count,
        "unknowns": K.shape[0],
        "ours, s": seconds["ours"],
        "floor, s": seconds["floor"],
        "ratio": seconds["ours"] / seconds["floor"],
        "bar": COUNTS[count],
    }
