"""Points answered by full solves; heads that share their outline share meshes and matrices."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from threadpoolctl import threadpool_limits

from membrane.pipeline import MESHES
from membrane.records.study import Study
from membrane.study import study_from
from membrane.sweep.answer import Answer
from membrane.sweep.points import Point, Points, study_data
from membrane.sweep.solving.rungs import Ladders
from membrane.sweep.solving.solve import errors, solved


class FullSolves:
    """Answers points by full solves.

    source : the study's plain data in SI numbers

    The meshes of an outline are made for the study's own head, whatever the point's
    coefficients: each finer than the last, until the point's accuracy is met.
    """

    def __init__(self, source: Mapping[str, Any], points: Points) -> None:
        self.source = source
        self.points = points
        self.ladders = Ladders(points.sweep.bracket)
        self._last_own: tuple[tuple[float, ...], Study] | None = None

    def answer(self, point: Point) -> Answer:
        """The modes of a point. Raises MembraneError where there are none."""
        study, own = self.study(point), self.own_head(point)
        guaranteed = self.points.sweep.bracket
        with threadpool_limits(limits=1, user_api="blas"):
            for place in range(MESHES):
                modes, bracket = solved(study, self.ladders.rung(own, place), guaranteed)
                if bracket.widest <= study.modes.accuracy:
                    break
        count = None if study.modes.up_to else study.modes.count
        cents = errors(modes, bracket)
        return Answer(modes.frequencies[:count], cents[:count], bracket.label, place + 1)

    def study(self, point: Point) -> Study:
        """The variant itself. Raises StudyError where its numbers do not go together."""
        return study_from(study_data(self.source, self.points.sweep.axes, point.values))

    def own_head(self, point: Point) -> Study:
        """The study with the shapes of the point, but its own coefficients."""
        shapes = self.points.mesh_of(point)
        if self._last_own is None or self._last_own[0] != shapes:
            pairs = zip(self.points.sweep.axes, self.points.shaping, strict=True)
            axes = [axis for axis, is_shape in pairs if is_shape]
            self._last_own = shapes, study_from(study_data(self.source, axes, shapes))
        return self._last_own[1]
