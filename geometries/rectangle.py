"""A rectangle with its lower left corner at the origin; its edges are the four sides."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The rectangle's width along x and height along y."""

    width: PositiveLength
    height: PositiveLength


def edges(options: Options) -> tuple[str, ...]:
    return ("left", "right", "bottom", "top")


def build(geometry: Any, options: Options) -> Drawing:
    width, height = options.width, options.height
    corners = [[0.0, 0.0], [width, 0.0], [width, height], [0.0, height]]
    shape = geometry.add_polygon(corners)
    bottom, right, top, left = ([line] for line in shape.lines)
    return Drawing(shape, {"left": left, "right": right, "bottom": bottom, "top": top})
