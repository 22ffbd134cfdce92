"""The mass of wires, hoops and seams along lines of the head."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.terms.amounts import contribution, is_there


@dataclass(frozen=True)
class Options:
    """None: the density stands in the study's line loads."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each line load that has mass."""
    for load in study.line_loads:
        if is_there(load.density):
            key = f"line_loads.{load.name}.line_density"
            yield contribution(study, key, Field.LINE_MASS, (load.name,), load.density)
