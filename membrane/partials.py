"""The stage from modes to the rows of the table."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.errors import StudyError
from membrane.pitch import note
from membrane.records.arrays import Floats
from membrane.records.bracket import Bracket
from membrane.records.modes import Modes
from membrane.records.spectrum import NodalPattern, Partial
from membrane.records.study import ModesWanted


def partials(
    modes: Modes, bracket: Bracket, patterns: Sequence[NodalPattern], wanted: ModesWanted
) -> tuple[Partial, ...]:
    """One row for each mode.

    Raises StudyError where the mode chosen for the ratios is not among them.
    """
    frequencies = modes.frequencies
    reference = _reference(frequencies, wanted.ratio_to)
    rows = []
    low, high = (np.sqrt(ends) / (2 * np.pi) for ends in (bracket.low, bracket.high))
    for index, frequency in enumerate(frequencies):
        name, above = note(float(frequency), wanted.reference_pitch)
        rows.append(
            Partial(
                number=index + 1,
                frequency=float(frequency),
                low=float(min(low[index], frequency)),
                high=float(max(high[index], frequency)),
                bracket=bracket.label,
                bracket_cents=None if name is None else float(bracket.cents[index]),
                ratio=None if reference is None else float(frequency / reference),
                note=name,
                note_cents=above,
                cluster=int(modes.clusters[index]),
                nodal=patterns[index],
            )
        )
    return tuple(rows)


def _reference(frequencies: Floats, number: int | None) -> float | None:
    """The frequency of ratio 1: the mode asked for, or the first above 0 Hz if any."""
    if number is None:
        return next((float(f) for f in frequencies if f > 0.0), None)
    if number > len(frequencies) or frequencies[number - 1] == 0.0:
        raise StudyError(
            f"modes.ratio_to: mode {number} is not among the {len(frequencies)} found "
            "with a pitch; name another one."
        )
    return float(frequencies[number - 1])
