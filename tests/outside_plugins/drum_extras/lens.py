"""A lens between two arcs through the same two points; its edges are upper and lower."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The lens's width along x and height along y."""

    width: PositiveLength
    height: PositiveLength

    def __post_init__(self) -> None:
        if self.height >= self.width:
            raise ValueError("a lens must be wider than it is high.")


def edges(options: Options) -> tuple[str, ...]:
    return ("upper", "lower")


def build(geometry: Any, options: Options) -> Drawing:
    half, rise = options.width / 2, options.height / 2
    depth = (half**2 - rise**2) / (2 * rise)  # of an arc's centre beyond the x axis
    right, left = geometry.add_point([half, 0.0]), geometry.add_point([-half, 0.0])
    below, above = geometry.add_point([0.0, -depth]), geometry.add_point([0.0, depth])
    upper = geometry.add_circle_arc(right, below, left)
    lower = geometry.add_circle_arc(left, above, right)
    surface = geometry.add_plane_surface(geometry.add_curve_loop([upper, lower]))
    return Drawing(surface, {"upper": [upper], "lower": [lower]})
