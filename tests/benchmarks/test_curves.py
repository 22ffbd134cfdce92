"""The best of many settings, and times between them."""

from math import inf

import pytest

from scripts.benchmarks.curves import Point, front, seconds_at

FAST, EXACT = Point("fast", 1e-4, 0.1), Point("exact", 1e-8, 0.4)
WORSE = Point("slower and no more exact", 1e-4, 0.2)


def test_front_leaves_out_what_another_beats():
    assert front([EXACT, WORSE, FAST]) == [FAST, EXACT]


def test_slack_keeps_what_may_yet_win():
    assert front([EXACT, WORSE, FAST], slack=2.5) == [FAST, WORSE, EXACT]


def test_power_law_between_points():
    """Half way in the logarithms: the geometric mean of the times."""
    assert seconds_at([WORSE, EXACT, FAST], 1e-6) == pytest.approx(0.2)


def test_beyond_the_ends():
    assert seconds_at([FAST, EXACT], 1e-2) == pytest.approx(0.1)
    assert seconds_at([FAST, EXACT], 1e-9) == inf
    assert seconds_at([], 1e-2) == inf
