"""The tension of the head and of its patches."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.terms.amounts import contribution
from membrane.terms.layers import layer, ruled_regions


@dataclass(frozen=True)
class Options:
    """None: the tension stands in the study's head and patches."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each number of each tension that rules a region."""
    ruled = ruled_regions(study, outline, lambda patch: patch.tension is not None)
    for key, regions in ruled.items():
        for part in layer(study, key).tension.parts:
            name = f"{key}.tension.{part.key}".removesuffix(".")
            amount, tensor = part.magnitude, part.direction
            yield contribution(study, name, Field.TENSION, regions, amount, tensor)
