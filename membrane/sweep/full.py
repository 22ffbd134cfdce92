"""Each point by a full solve; heads that share their outline share meshes and matrices.

The one file of the sweeps that knows the order of the stages.
"""

from __future__ import annotations

import json
from collections import OrderedDict
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from threadpoolctl import threadpool_limits

from membrane import plugins
from membrane.accuracy import estimate
from membrane.coefficients import coefficients
from membrane.errors import StudyError
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh, suited_resolution
from membrane.modes import coarser_modes, extract
from membrane.outline import draw
from membrane.pencil import assemble, rescaled
from membrane.pipeline import MESHES, wanted_count
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

    The meshes of an outline are made for the study's own head, whatever the point's
    coefficients: each finer than the last, until the point's accuracy is met.
    """

    def __init__(
        self, source: Mapping[str, Any], axes: tuple[Axis, ...], shaping: tuple[bool, ...]
    ) -> None:
        self._source = source
        self._axes = axes
        self._shaping = shaping
        self._ladders: OrderedDict[str, list[_Rung]] = OrderedDict()

    def answer(self, point: Point) -> Answer:
        """The modes of a point. Raises MembraneError where there are none."""
        study = study_from(study_data(self._source, self._axes, point.values))
        own = self._own_head(point)
        with threadpool_limits(limits=1, user_api="blas"):
            for rung in range(MESHES):
                modes, bracket = _solved(study, self._rung(own, rung))
                if bracket.widest <= study.modes.accuracy:
                    break
        count = None if study.modes.up_to else study.modes.count
        return Answer(modes.frequencies[:count], bracket.cents[:count] / 2, bracket.label, rung + 1)

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


def _solved(study: Study, rung: _Rung) -> tuple[Modes, Bracket]:
    membrane = coefficients(study, rung.outline)
    fine, coarse = (
        rescaled(pencil, rung.membrane, membrane) or assemble(membrane, rung.mesh, degree)
        for pencil, degree in (
            (rung.fine, rung.resolution.degree),
            (rung.coarse, rung.resolution.coarser_degree),
        )
    )
    solver = plugins.load("eigensolver", study.modes.eigensolver).solve
    modes = extract(fine, wanted_count(fine, study.modes), solver, study.modes.accuracy)
    return modes, estimate(modes, coarser_modes(coarse, modes), "")
