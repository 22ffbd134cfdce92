"""Rows of the table: interval, ratio, note."""

import numpy as np
import pytest

from membrane.errors import StudyError
from membrane.partials import partials
from membrane.records.bracket import Bracket
from membrane.records.modes import Modes
from membrane.records.spectrum import NodalPattern
from membrane.records.study import ModesWanted

NOWHERE = NodalPattern((), 0.0, 1, None, None)


def rows(frequencies, cents, **wanted):
    values = (2 * np.pi * np.array(frequencies)) ** 2
    modes = Modes(None, values, np.empty((0, len(values))), np.arange(1, len(values) + 1), True)
    spread = np.exp2(np.array(cents) / 600)
    bracket = Bracket(values / spread, values * spread, "estimated")
    return partials(modes, bracket, [NOWHERE] * len(values), ModesWanted(**wanted))


def test_interval_holds_the_frequency_and_has_the_stated_width():
    (row,) = rows([440.0], [0.5])
    assert row.low < row.frequency < row.high
    assert abs(1200 * np.log2(row.high / row.low) - row.bracket_cents) < 1e-9
    assert abs(row.bracket_cents - 1.0) < 1e-9
    assert row.bracket == "estimated"


def test_notes_follow_the_reference_pitch():
    (row,) = rows([440.0], [0.0])
    assert row.note == "A4"
    assert abs(row.note_cents) < 1e-9
    (higher,) = rows([440.0], [0.0], reference_pitch=415.304697579945)
    assert higher.note == "A#4"


def test_a_rigid_mode_has_no_pitch():
    rigid, first = rows([0.0, 100.0], [0.0, 0.1])
    assert (rigid.low, rigid.high, rigid.bracket_cents, rigid.note) == (0.0, 0.0, None, None)
    assert (rigid.ratio, first.ratio) == (0.0, 1.0)


def test_ratio_to_a_chosen_mode():
    assert [row.ratio for row in rows([100.0, 150.0], [0, 0], ratio_to=2)] == [100 / 150, 1.0]


def test_ratio_to_a_mode_at_rest_is_refused():
    with pytest.raises(StudyError, match=r"modes\.ratio_to: mode 1 is not among"):
        rows([0.0, 100.0], [0.0, 0.0], ratio_to=1)
