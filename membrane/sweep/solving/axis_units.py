"""The units that the values of a sweep's axes are in."""

from __future__ import annotations

from membrane.errors import StudyError
from membrane.numeric_keys import found_at, replaced
from membrane.records.study import Study
from membrane.records.sweep import Axis
from membrane.study import study_from
from membrane.units import SI_UNITS


def units_of(study: Study) -> list[str]:
    """The SI unit of each axis of a study's sweep, "" for a plain number."""
    return [_unit(study, axis) for axis in (study.sweep.axes if study.sweep else ())]


def _unit(study: Study, axis: Axis) -> str:
    """The unit with which the study's own number may be written."""
    own = {key: value for key, value in study.source.items() if key != "sweep"}
    number = found_at(own, axis.steps)
    for unit in SI_UNITS:
        try:
            study_from(replaced(own, axis.steps, f"{number!r} {unit}"))
        except StudyError:
            continue
        return unit
    return ""
