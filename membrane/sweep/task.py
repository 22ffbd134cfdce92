"""A sweep that can be worked on: its points, who answers them, and its names."""

from __future__ import annotations

from dataclasses import dataclass

from membrane.errors import StudyError
from membrane.records.study import Study
from membrane.records.sweep import Sweep
from membrane.sweep.identity import point_name, study_name, sweep_name
from membrane.sweep.points import Point, Points
from membrane.sweep.solving import ReducedSolves, shaping_axes
from membrane.sweep.store import Entry


@dataclass(frozen=True)
class Task:
    """What is worked on.

    entry : what the store knows it by
    """

    entry: Entry
    sweep: Sweep
    points: Points
    answering: ReducedSolves

    def name_of(self, point: Point) -> str:
        """The name of a point by its content."""
        return point_name(self.entry.study, self.sweep, point)


def task_of(study: Study) -> Task:
    """The sweep of a study, its points answered by reduced models or full solves.

    Raises StudyError where the study has no sweep.
    """
    sweep = study.sweep
    if sweep is None:
        raise StudyError("the study has no sweep; give [[sweep.axes]] with a key and values.")
    name = study_name(study.source)
    keys = tuple(axis.key for axis in sweep.axes)
    entry = Entry(sweep_name(name, sweep), name, study.title, keys, sweep.size)
    points = Points(sweep, shaping_axes(study))
    return Task(entry, sweep, points, ReducedSolves(study.source, points))
