"""Fine sand spread evenly over the whole head, so many grams on each square metre."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.units import ArealDensity


@dataclass(frozen=True)
class Options:
    """How much sand there is."""

    density: ArealDensity


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    regions = tuple(region.name for region in outline.regions)
    yield Contribution("terms.sand.density", Field.AREAL_DENSITY, regions, options.density)
