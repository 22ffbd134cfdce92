"""The elastic bed under the head and under its patches."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.terms.amounts import contribution, is_there
from membrane.terms.layers import layer, ruled_regions


@dataclass(frozen=True)
class Options:
    """None: the bedding stands in the study's head and patches."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each layer that lies on a bed."""
    ruled = ruled_regions(study, outline, lambda patch: patch.bedding is not None)
    for key, regions in ruled.items():
        bedding = layer(study, key).bedding
        if is_there(bedding):
            yield contribution(study, f"{key}.bedding", Field.BEDDING, regions, bedding)
