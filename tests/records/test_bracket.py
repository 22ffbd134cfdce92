"""A bracket gives way to a value just outside it, and stays as it is elsewhere."""

import numpy as np

from membrane.records.bracket import GUARANTEED, Bracket


def test_a_bracket_is_widened_to_hold_a_value():
    bracket = Bracket(np.array([1.0, 2.0, 3.0]), np.array([1.1, 2.1, 3.1]), GUARANTEED)
    held = bracket.holding(np.array([1.05, 2.2, 2.9]))
    assert held.low.tolist() == [1.0, 2.0, 2.9]
    assert held.high.tolist() == [1.1, 2.2, 3.1]
    assert held.label == GUARANTEED
