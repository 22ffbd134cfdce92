"""Pitch: frequencies as notes of equal temperament, and the cents between them."""

from __future__ import annotations

from math import log, log2

CENTS_PER_OCTAVE = 1200.0

CENTS_PER_EIGENVALUE = CENTS_PER_OCTAVE / (2.0 * log(2.0))
"""Cents per relative change of an eigenvalue, which is a frequency squared."""

A4 = 440.0
"""Hz; the usual reference pitch (ISO 16)."""

_NAMES = ("C", "C#", "D", "D#", "E", "F", "F#", "G", "G#", "A", "A#", "B")
_A4_SEMITONES = 4 * 12 + _NAMES.index("A")


def cents_between(low: float, high: float) -> float:
    """The interval from ``low`` to ``high``, both positive, Hz; negative where it falls."""
    return CENTS_PER_OCTAVE * log2(high / low)


def note(frequency: float, reference_pitch: float = A4) -> tuple[str, float] | tuple[None, None]:
    """The nearest note in scientific pitch notation and the cents above it.

    frequency : Hz; at 0 Hz there is no note and both are None
    reference_pitch : Hz, of the note A4
    """
    if frequency <= 0.0:
        return None, None
    cents = cents_between(reference_pitch, frequency)
    semitones = round(cents / 100.0)
    octave, step = divmod(semitones + _A4_SEMITONES, 12)
    return f"{_NAMES[step]}{octave}", cents - 100.0 * semitones
