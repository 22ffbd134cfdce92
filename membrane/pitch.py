"""Pitch: frequencies as notes of equal temperament, and the cents between them."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from membrane.records.arrays import Floats

CENTS_PER_OCTAVE = 1200.0
A4 = 440.0
"""Hz; the usual reference pitch (ISO 16)."""

_NAMES = ("C", "C#", "D", "D#", "E", "F", "F#", "G", "G#", "A", "A#", "B")
_A4_SEMITONES = 4 * 12 + _NAMES.index("A")


def cents_between(low: ArrayLike, high: ArrayLike) -> Floats:
    """The intervals from ``low`` to ``high``, positive frequencies in Hz of any one shape."""
    return CENTS_PER_OCTAVE * np.log2(np.asarray(high, dtype=float) / np.asarray(low, dtype=float))


def note(frequency: float, reference_pitch: float = A4) -> tuple[str, float] | tuple[None, None]:
    """The nearest note in scientific pitch notation and the cents above it.

    frequency : Hz; at 0 Hz there is no note and both are None
    reference_pitch : Hz, of the note A4
    """
    if frequency <= 0.0:
        return None, None
    cents = float(cents_between(reference_pitch, frequency))
    semitones = round(cents / 100.0)
    octave, step = divmod(semitones + _A4_SEMITONES, 12)
    return f"{_NAMES[step]}{octave}", cents - 100.0 * semitones
