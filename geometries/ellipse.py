"""An ellipse about the origin; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from math import pi
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The ellipse's width along x and height along y."""

    width: PositiveLength
    height: PositiveLength


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    long, short = max(options.width, options.height), min(options.width, options.height)
    surface = geometry.add_disk([0.0, 0.0], long / 2, short / 2)
    if options.height > options.width:  # the kernel wants the long axis along x
        geometry.rotate(surface, (0.0, 0.0, 0.0), pi / 2, (0.0, 0.0, 1.0))
    return Drawing(surface, {"rim": ()})
