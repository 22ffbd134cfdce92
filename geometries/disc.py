"""A disc about the origin; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The disc's diameter."""

    diameter: PositiveLength


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    surface = geometry.add_disk([0.0, 0.0], options.diameter / 2)
    return Drawing(surface, {"rim": ()})
