"""What is drawn of a sweep: which panels, and which points in them."""

from __future__ import annotations

import numpy as np

from membrane.sweep.diagram import MOST_PANELS, diagram
from membrane.sweep.results import SweepResults

from .demo import TENSION, axis, task

DENSITY = axis("d", 3.0, 1.0, 2.0)


def results(size, missing):
    """Points whose only frequency is their number."""
    numbers = np.array([n for n in range(1, size + 1) if n not in missing])
    column = numbers[:, None]
    lost = ((4, 2),)
    return SweepResults(numbers, {}, column * 1.0, column * 0.0, column, lost, (), {})


def test_panels_and_their_points():
    sweep = task(DENSITY, TENSION).sweep
    drawn = diagram("A head", sweep, ["kg/m^2", "N/m"], results(9, missing=[8]))
    assert drawn.label == "d, kg/m²"
    assert drawn.places.tolist() == [3.0, 2.0, 1.0]
    assert [panel.title for panel in drawn.panels] == [
        f"head.tension = {value} N/m" for value in (1000, 2000, 4000)
    ]
    middle = drawn.panels[1]
    assert middle.branches.ravel().tolist() == [2, 0, 5]
    assert np.array_equal(middle.frequencies.ravel(), [2.0, np.nan, 5.0], equal_nan=True)
    assert [panel.lost for panel in drawn.panels] == [(), ((4, 3.0),), ()]


def test_one_axis_has_one_panel():
    drawn = diagram("A head", task(TENSION).sweep, [""], results(3, missing=[]))
    assert (drawn.label, [panel.title for panel in drawn.panels]) == ("head.tension", [""])
    assert drawn.panels[0].frequencies.ravel().tolist() == [1.0, 2.0, 3.0]


def test_of_very_many_panels_some_are_drawn():
    many = axis("b", *range(100))
    drawn = diagram("", task(TENSION, many).sweep, ["", ""], results(300, missing=[]))
    assert len(drawn.panels) == MOST_PANELS
    assert drawn.panels[0].title == "b = 0"
    assert drawn.panels[-1].title == "b = 99"
