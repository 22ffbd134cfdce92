"""The modes of a point as vectors, in a space that all points of its mesh share."""

from __future__ import annotations

from membrane import plugins
from membrane.branches import Shapes
from membrane.coefficients import coefficients
from membrane.modes import extract
from membrane.sweep.points import Point
from membrane.sweep.solving.full import FullSolves
from membrane.sweep.solving.reduced import ReducedSolves
from membrane.sweep.solving.solve import pencil_of


def shapes_at(solves: ReducedSolves, point: Point, count: int) -> Shapes:
    """At least ``count`` modes, by the reduced model where there is one, else by a full solve.

    Raises MembraneError where there are none.
    """
    model, _ = solves.model(point)
    if model is None:
        return _solved(solves.full, point, count)
    return Shapes(*model.modes_at(solves.numbers(point), count))


def _solved(full: FullSolves, point: Point, count: int) -> Shapes:
    """On the coarsest mesh of the outline: its dofs are the same for all points."""
    study = full.study(point)
    rung = full.ladders.rung(full.own_head(point), 0)
    pencil = pencil_of(coefficients(study, rung.outline), rung, rung.fine)
    solver = plugins.load("eigensolver", study.modes.eigensolver).solve
    modes = extract(pencil, count, solver, study.modes.accuracy)
    return Shapes(modes.eigenvalues, modes.vectors[pencil.space.free], pencil.M)
