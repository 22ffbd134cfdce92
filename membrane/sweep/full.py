"""Each point by a full solve; heads that share their outline share meshes and matrices.

The one file of the sweeps that knows the order of the stages.
"""

from __future__ import annotations

import json
from collections import OrderedDict
from collections.abc import Mapping
from dataclasses import dataclass
from time import perf_counter
from typing import Any

import numpy as np
from threadpoolctl import threadpool_limits

from membrane import plugins
from membrane.accuracy import estimate
from membrane.bounds import SPARE, bracketed
from membrane.coefficients import coefficients
from membrane.errors import BracketError, StudyError
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh, suited_resolution
from membrane.modes import coarser_modes, extract, lowest
from membrane.outline import draw
from membrane.pencil import assemble, rescaled
from membrane.pipeline import MESHES, wanted_count
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.bracket import Bracket
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.modes import Modes
from membrane.records.outline import Outline
from membrane.records.pencil import Pencil
from membrane.records.study import Study
from membrane.records.sweep import Axis
from membrane.study import study_from
from membrane.sweep.answer import Answer
from membrane.sweep.points import Point, study_data

HELD = 3
"""Outlines whose meshes and matrices a process keeps."""

FINER = 10.0
"""Excess of the error that the next mesh is made for. What a point would need exactly would
make the meshes depend on which point came first."""


@dataclass(frozen=True)
class _Rung:
    """A mesh of an outline, and the pencils of the study's own head on it."""

    resolution: Resolution
    outline: Outline
    membrane: Membrane
    mesh: Mesh
    fine: Pencil
    coarse: Pencil


class FullSolves:
    """Answers points by full solves.

    source : the study's plain data in SI numbers
    shaping : for each axis, whether another value of it needs another mesh
    bracket : whether guaranteed brackets are wanted, which take longer

    The meshes of an outline are made for the study's own head, whatever the point's
    coefficients: each finer than the last, until the point's accuracy is met.
    """

    def __init__(
        self,
        source: Mapping[str, Any],
        axes: tuple[Axis, ...],
        shaping: tuple[bool, ...],
        bracket: bool = False,
    ) -> None:
        self._source = source
        self._bracket = bracket
        self._axes = axes
        self._shaping = shaping
        self._ladders: OrderedDict[str, list[_Rung]] = OrderedDict()

    def answer(self, point: Point) -> Answer:
        """The modes of a point. Raises MembraneError where there are none."""
        study = study_from(study_data(self._source, self._axes, point.values))
        own = self._own_head(point)
        with threadpool_limits(limits=1, user_api="blas"):
            for place in range(MESHES):
                modes, bracket = _solved(study, self._rung(own, place), self._bracket)
                if bracket.widest <= study.modes.accuracy:
                    break
        count = None if study.modes.up_to else study.modes.count
        errors = _errors(modes, bracket)
        return Answer(modes.frequencies[:count], errors[:count], bracket.label, place + 1)

    def _own_head(self, point: Point) -> Study:
        """The study with the shapes of the point, but its own coefficients."""
        pairs = zip(self._axes, point.values, self._shaping, strict=True)
        shapes = [(axis, value) for axis, value, is_shape in pairs if is_shape]
        axes, values = [axis for axis, _ in shapes], [value for _, value in shapes]
        return study_from(study_data(self._source, axes, values))

    def _rung(self, own: Study, place: int) -> _Rung:
        name = shape_of(own)
        ladder = self._ladders.setdefault(name, [])
        self._ladders.move_to_end(name)
        while len(self._ladders) > HELD:
            self._ladders.popitem(last=False)
        while len(ladder) <= place:
            ladder.append(_made(own, ladder[-1].resolution.finer(FINER) if ladder else None))
        return ladder[place]


@dataclass(frozen=True)
class Sample:
    """Seconds that a mesh with its matrices takes, and a solve on it."""

    mesh: float
    solve: float


def timed_sample(study: Study) -> Sample:
    """What one full solve of the study's own values takes here.

    Raises MembraneError where it cannot be solved.
    """
    with threadpool_limits(limits=1, user_api="blas"):
        start = perf_counter()
        rung = _made(study, None)
        middle = perf_counter()
        _solved(study, rung, study.sweep is not None and study.sweep.bracket)
    return Sample(middle - start, perf_counter() - middle)


def shaping_axes(study: Study) -> tuple[bool, ...]:
    """For each axis of a study's sweep, whether another value of it needs another mesh."""
    axes = study.sweep.axes if study.sweep else ()
    return tuple(_shapes(study, axis) for axis in axes)


def shape_of(study: Study) -> str:
    """What studies have in common that can share a mesh: all but the coefficients' numbers."""
    shapes = (
        study.outline,
        [(patch.name, patch.shape) for patch in study.patches],
        [study.holes, study.slits, study.edge_parts],
        [(load.name, load.line) for load in study.line_loads],
        [(name, str(edge.support)) for name, edge in sorted(study.edges.items())],
        [json.dumps(function.source, sort_keys=True) for function in study.functions],
        [study.modes, sorted(study.terms.items())],
    )
    return repr(shapes)


def _shapes(study: Study, axis: Axis) -> bool:
    try:
        ends = [
            shape_of(study_from(study_data(study.source, (axis,), (value,))))
            for value in (min(axis.values), max(axis.values))
        ]
    except StudyError:
        return True  # points there fail one by one, and each mesh is a point's own
    return any(end != shape_of(study) for end in ends)


def _made(own: Study, resolution: Resolution | None) -> _Rung:
    """A mesh of a study's outline and its pencils; the first that should do if none is given."""
    with Kernel.session() as kernel:
        outline = draw(kernel, own)
        membrane = coefficients(own, outline)
        wanted = resolution or suited_resolution(kernel, outline, membrane, own.modes)
        mesh = make_mesh(kernel, outline, membrane, own.modes, wanted)
    fine, coarse = (
        assemble(membrane, mesh, degree) for degree in (wanted.degree, wanted.coarser_degree)
    )
    return _Rung(wanted, outline, membrane, mesh, fine, coarse)


def _solved(study: Study, rung: _Rung, guaranteed: bool) -> tuple[Modes, Bracket]:
    """The modes of a study on a mesh of its outline, bracketed as well as is wanted and can be."""
    wanted, membrane = study.modes, coefficients(study, rung.outline)
    fine = _pencil(rung, rung.fine, membrane)
    solver = plugins.load("eigensolver", wanted.eigensolver).solve
    count = wanted_count(fine, wanted)
    spare = min(SPARE, fine.M.shape[0] - 1 - count) if guaranteed else 0
    more = extract(fine, count + max(spare, 0), solver, wanted.accuracy)
    modes = lowest(more, count)
    reason = ""
    if guaranteed:
        try:
            return modes, bracketed(membrane, more, len(modes.eigenvalues), wanted.accuracy)
        except BracketError as why:
            reason = str(why)
    coarse = _pencil(rung, rung.coarse, membrane)
    return modes, estimate(modes, coarser_modes(coarse, modes), reason)


def _pencil(rung: _Rung, own: Pencil, membrane: Membrane) -> Pencil:
    """The pencil of a membrane from that of the study's own head, or else assembled."""
    found = rescaled(own, rung.membrane, membrane)
    return found or assemble(membrane, rung.mesh, own.space.degree)


def _errors(modes: Modes, bracket: Bracket) -> Floats:
    """(n,) cents, how far off each frequency may be, up or down."""
    errors = np.zeros(len(modes.eigenvalues))
    moving = modes.eigenvalues > 0.0
    found = modes.eigenvalues[moving]
    with np.errstate(divide="ignore"):
        apart = np.log([bracket.high[moving] / found, found / bracket.low[moving]])
    errors[moving] = CENTS_PER_EIGENVALUE * np.maximum(apart.max(axis=0), 0.0)
    return errors
