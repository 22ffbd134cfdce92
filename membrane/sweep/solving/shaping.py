"""Which axes of a sweep need another mesh, and which only other numbers on the same."""

from __future__ import annotations

import json

from membrane.errors import StudyError
from membrane.records.study import Study
from membrane.records.sweep import Axis
from membrane.study import study_from
from membrane.sweep.points import study_data


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
