"""The springs along lines of the head."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study


@dataclass(frozen=True)
class Options:
    """None: the stiffness stands in the study's line loads."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each line load that has stiffness."""
    for load in study.line_loads:
        if load.stiffness > 0.0:
            key = f"line_loads.{load.name}.line_stiffness"
            yield Contribution(key, Field.LINE_STIFFNESS, (load.name,), load.stiffness)
