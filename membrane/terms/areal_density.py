"""The areal density of the head and of its patches, laid over each other in order."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline, Region
from membrane.records.study import Patch, Study
from membrane.terms.amounts import contribution
from membrane.terms.layers import layer, ruled_regions


@dataclass(frozen=True)
class Options:
    """None: the densities stand in the study's head and patches."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """What replaces the head's density, then what is added on top of it."""
    ruled = ruled_regions(study, outline, _replaces)
    for key, regions in ruled.items():
        density = layer(study, key).areal_density
        name = f"{key}.areal_density"
        yield contribution(study, name, Field.AREAL_DENSITY, regions, density)
    for patch in study.patches:
        if patch.added_density is not None:
            key = f"patches.{patch.name}.added_density"
            regions = tuple(r.name for r in outline.regions if _adds(study, patch, r))
            yield contribution(study, key, Field.AREAL_DENSITY, regions, patch.added_density)


def _replaces(patch: Patch) -> bool:
    return patch.areal_density is not None


def _adds(study: Study, patch: Patch, region: Region) -> bool:
    """True where the patch covers the region and no later patch replaces the density."""
    if patch.name not in region.patches:
        return False
    later = region.patches[region.patches.index(patch.name) + 1 :]
    return not any(_replaces(other) for other in study.patches if other.name in later)
