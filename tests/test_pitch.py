"""Notes against the frequencies of equal temperament."""

from __future__ import annotations

import pytest

from membrane.pitch import cents_between, note


@pytest.mark.parametrize(
    ("frequency", "name"),
    [
        # frequencies of equal temperament at A4 = 440 Hz, to 0.01 Hz (any table; from memory)
        (440.0, "A4"),
        (261.63, "C4"),
        (277.18, "C#4"),
        (493.88, "B4"),
        (27.5, "A0"),
        (16.35, "C0"),
        (15.43, "B-1"),
        (4186.01, "C8"),
    ],
)
def test_notes_of_equal_temperament(frequency: float, name: str) -> None:
    found, cents = note(frequency)
    assert found == name
    assert cents is not None
    assert abs(cents) < 0.6


def test_cents_are_above_the_nearest_note() -> None:
    name, cents = note(440.0 * 2.0 ** (30.0 / 1200.0))
    assert (name, cents) == ("A4", pytest.approx(30.0, abs=1e-9))
    name, cents = note(440.0 * 2.0 ** (70.0 / 1200.0))
    assert (name, cents) == ("A#4", pytest.approx(-30.0, abs=1e-9))


def test_the_reference_pitch_moves_every_note() -> None:
    name, cents = note(221.0, reference_pitch=442.0)
    assert (name, cents) == ("A3", pytest.approx(0.0, abs=1e-9))


def test_a_rigid_mode_has_no_note() -> None:
    assert note(0.0) == (None, None)


def test_a_pure_fifth_is_701_955_cents() -> None:
    assert cents_between(200.0, 300.0) == pytest.approx(701.9550008654, abs=1e-9)
    assert cents_between(300.0, 200.0) == pytest.approx(-701.9550008654, abs=1e-9)
