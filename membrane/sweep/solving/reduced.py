"""Points answered by a reduced model of their mesh where that pays and holds, else in full."""

from __future__ import annotations

from collections import OrderedDict
from collections.abc import Mapping
from typing import Any

import numpy as np
from threadpoolctl import threadpool_limits

from membrane import plugins
from membrane.accuracy import estimate
from membrane.coefficients import coefficients
from membrane.errors import SolveError, StudyError
from membrane.modes import coarser_modes, extract
from membrane.pencil import rescaled
from membrane.pipeline import MESHES
from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil
from membrane.records.study import ModesWanted, Study
from membrane.reduced import ReducedModel, Solved, prepare
from membrane.study import study_from
from membrane.sweep.answer import Answer
from membrane.sweep.points import Point, Points, study_data
from membrane.sweep.solving.full import FullSolves
from membrane.sweep.solving.rungs import Rung
from membrane.sweep.solving.shaping import shape_of
from membrane.sweep.solving.solve import errors

REDUCED = "reduced"
"""The kind of error: the model's own estimate, and the widest of the full solves behind it."""

LEAST = 500
"""Points on one mesh from which a model costs less than the full solves that it saves."""

SHARE = 0.8
"""Of the wanted accuracy that a model takes; the mesh may have the rest."""

SAMPLE = 2000
"""Points of the sweep that a model is made for; the others are held to the same accuracy."""

SEED = 20240301
HELD = 3
"""Outlines whose models a process keeps."""


class ReducedSolves:
    """Answers points by reduced models.

    source : the study's plain data in SI numbers

    A model is made for the numbers that scale parts of one pencil, when the first point of its
    mesh comes, and from the sweep alone: so it is the same in every process. A point that it
    does not answer as exactly as is wanted is solved in full.
    """

    def __init__(self, source: Mapping[str, Any], points: Points) -> None:
        self.source = source
        self.full = FullSolves(source, points)
        self._points = points
        self._models: OrderedDict[str, ReducedModel | None] = OrderedDict()

    def answer(self, point: Point) -> Answer:
        """The modes of a point. Raises MembraneError where there are none."""
        wanted = self.full.study(point).modes
        with threadpool_limits(limits=1, user_api="blas"):
            model, solves = self.model(point)
            answer = None if model is None else _answer(model, self.numbers(point), wanted, solves)
        return answer or self.full.answer(point)

    def model(self, point: Point) -> tuple[ReducedModel | None, int]:
        """The model of a point's mesh, and the full solves made just now.

        None where there can be no model, or where it would not pay.
        """
        own = self.full.own_head(point)
        return self._model(own) if pays(self._points, own.modes) else (None, 0)

    def numbers(self, point: Point) -> Floats:
        """(n_keys,) the numbers of a point that its model takes."""
        pairs = zip(point.values, self._points.shaping, strict=True)
        return np.array([value for value, shapes in pairs if not shapes], dtype=float)

    def _model(self, own: Study) -> tuple[ReducedModel | None, int]:
        name, solves = shape_of(own), 0
        if name not in self._models:
            model = self._models[name] = self._made(own)
            solves = 0 if model is None else model.solves
        self._models.move_to_end(name)
        while len(self._models) > HELD:
            self._models.popitem(last=False)
        return self._models[name], solves

    def _made(self, own: Study) -> ReducedModel | None:
        points, wanted = self._sample(), own.modes
        for place in range(MESHES):
            rung = self.full.ladders.rung(own, place)
            if not self._scales(own, rung, points):
                return None
            accuracy = SHARE * wanted.accuracy / 2
            try:
                model = prepare(
                    rung.fine, self._keys, points, wanted.count, accuracy, _solver(rung, wanted)
                )
            except SolveError:
                return None  # the model has no bounds here, or a full solve says why it failed
            if 2 * model.element_cents.max() <= (1.0 - SHARE) * wanted.accuracy:
                return model
        return None

    @property
    def _keys(self) -> list[str]:
        pairs = zip(self._points.sweep.axes, self._points.shaping, strict=True)
        return [axis.key for axis, shapes in pairs if not shapes]

    def _sample(self) -> Floats:
        """(n, n_keys) numbers of some points, and both ends of all axes."""
        chosen = np.random.default_rng(SEED).permutation(len(self._points))[:SAMPLE]
        rows = [self.numbers(self._points.point(1 + int(place))) for place in chosen]
        pairs = zip(self._points.sweep.axes, self._points.shaping, strict=True)
        axes = [axis.values for axis, shapes in pairs if not shapes]
        ends = [[end(values) for values in axes] for end in (min, max)]
        return np.unique(np.vstack([rows, ends]), axis=0)

    def _scales(self, own: Study, rung: Rung, points: Floats) -> bool:
        """Whether the swept numbers do no more than scale parts of the pencil."""
        if not set(self._keys) <= rung.fine.keys:
            return False
        pairs = zip(self._points.sweep.axes, self._points.shaping, strict=True)
        axes = [axis for axis, shapes in pairs if not shapes]
        for numbers in (points.min(axis=0), points.max(axis=0)):
            try:
                study = study_from(study_data(own.source, axes, numbers.tolist()))
            except StudyError:
                return False
            found = rescaled(rung.fine, rung.membrane, coefficients(study, rung.outline))
            wanted = rung.fine.at(dict(zip(self._keys, numbers.tolist(), strict=True)))
            if found is None or _scales_of(found) != _scales_of(wanted):
                return False
        return True


def pays(points: Points, wanted: ModesWanted) -> bool:
    """Whether models cost less than the full solves that they save, if there can be any."""
    enough = len(points) >= LEAST * points.meshes and not all(points.shaping)
    return enough and wanted.up_to is None and not points.sweep.bracket


def _scales_of(pencil: Pencil) -> list[float]:
    return [part.scale for part in (*pencil.stiffness, *pencil.mass)]


def _answer(
    model: ReducedModel, numbers: Floats, wanted: ModesWanted, solves: int
) -> Answer | None:
    """The model's answer; None where it is not exact enough."""
    found = model.answers(numbers[None])
    cents = found.cents[0] + model.element_cents
    if 2 * cents.max() > wanted.accuracy:
        return None
    return Answer(found.frequencies[0], cents, REDUCED, solves)


def _solver(rung: Rung, wanted: ModesWanted) -> Any:
    """Full solves on a rung, as the making of a model asks for them."""
    solver = plugins.load("eigensolver", wanted.eigensolver).solve

    def solve(pencil: Pencil, count: int) -> Solved:
        modes = extract(pencil, count, solver, wanted.accuracy)
        scales = {part.key: part.scale for part in (*pencil.stiffness, *pencil.mass)}
        check = coarser_modes(rung.coarse.at(scales), modes)
        cents = errors(modes, estimate(modes, check, ""))
        return Solved(modes.eigenvalues, modes.vectors[pencil.space.free], cents)

    return solve
