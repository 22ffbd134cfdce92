"""A small sweep for the tests, and its answers without any solving."""

from __future__ import annotations

import numpy as np

from membrane.records.sweep import Axis, Pick, Sweep
from membrane.sweep.answer import Answer
from membrane.sweep.points import Points
from membrane.sweep.store import Entry
from membrane.sweep.task import Task

KEYS = {
    "outline": {"shape": "disc", "diameter": "356 mm"},
    "head": {"areal_density": "0.262 kg/m^2", "tension": "3 kN/m"},
    "modes": {"count": 3},
}


def axis(key, *values, **others):
    return Axis(key, tuple(key.split(".")), values, **others)


TENSION = axis("head.tension", 1000.0, 2000.0, 4000.0)
DIAMETER = axis("outline.diameter", 0.3, 0.4)


class Squares:
    """Answers with the squares of a point's values; a point with a value below 0 fails."""

    def __init__(self):
        self.asked = []

    def answer(self, point):
        self.asked.append(point.number)
        if min(point.values) < 0.0:
            raise ValueError("below zero")
        squares = np.array(sorted(value**2 / 3.0 for value in point.values))
        return Answer(squares, squares / 7.0, "estimated", 1)


def task(*axes, pick=Pick.GRID, shaping=None, name="a", study="s", **others):
    sweep = Sweep(pick, axes, **others)
    entry = Entry(name, study, "demo", tuple(axis.key for axis in axes), sweep.size)
    return Task(entry, sweep, Points(sweep, shaping or [False] * len(axes)), Squares())
