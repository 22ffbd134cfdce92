"""Two half discs joined by a rectangle, about the origin and long in x; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength


@dataclass(frozen=True)
class Options:
    """The length of the straight part along x, and the width along y."""

    straight: PositiveLength
    width: PositiveLength


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    x, r = options.straight / 2, options.width / 2
    right, left = geometry.add_point([x, 0.0]), geometry.add_point([-x, 0.0])
    places = [[x, -r], [x + r, 0.0], [x, r], [-x, r], [-x - r, 0.0], [-x, -r]]
    a, b, c, d, e, f = (geometry.add_point(place) for place in places)
    rim = [
        geometry.add_circle_arc(a, right, b),
        geometry.add_circle_arc(b, right, c),
        geometry.add_line(c, d),
        geometry.add_circle_arc(d, left, e),
        geometry.add_circle_arc(e, left, f),
        geometry.add_line(f, a),
    ]
    surface = geometry.add_plane_surface(geometry.add_curve_loop(rim))
    return Drawing(surface, {"rim": rim})
