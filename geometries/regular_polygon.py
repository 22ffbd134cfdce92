"""A regular polygon about the origin, its first corner on +x; its edges are side1, side2, …."""

from __future__ import annotations

from dataclasses import dataclass
from math import cos, pi, sin
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The number of sides and the radius of the corners."""

    sides: int
    radius: PositiveLength

    def __post_init__(self) -> None:
        if self.sides < 3:
            raise ValueError(f"a regular polygon needs at least 3 sides, not {self.sides}.")


def edges(options: Options) -> tuple[str, ...]:
    return tuple(f"side{k}" for k in range(1, options.sides + 1))


def build(geometry: Any, options: Options) -> Drawing:
    angles = [2 * pi * k / options.sides for k in range(options.sides)]
    shape = geometry.add_polygon(
        [[options.radius * cos(a), options.radius * sin(a)] for a in angles]
    )
    sides = ([line] for line in shape.lines)
    return Drawing(shape, dict(zip(edges(options), sides, strict=True)))
