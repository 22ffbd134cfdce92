"""A rectangle about the origin with rounded corners; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import PositiveLength

_ROUNDING = 1e-9
_QUARTERS = ((1, 1), (-1, 1), (-1, -1), (1, -1))


@dataclass(frozen=True)
class Options:
    """The width along x, the height along y, and the radius of the corners."""

    width: PositiveLength
    height: PositiveLength
    radius: PositiveLength

    def __post_init__(self) -> None:
        largest = min(self.width, self.height) / 2
        if self.radius > largest * (1 + _ROUNDING):
            raise ValueError(
                f"the radius, {1e3 * self.radius:g} mm, is more than half of the shorter side; "
                f"give at most {1e3 * largest:g} mm."
            )


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    r = min(options.radius, options.width / 2, options.height / 2)
    x, y = _straight(options.width / 2, r), _straight(options.height / 2, r)
    points: dict[tuple[float, float], Any] = {}

    def point(*place: float) -> Any:
        # where nothing straight is left between two arcs, both ask for the same point
        return points.get(place) or points.setdefault(place, geometry.add_point(place))

    arcs = []
    for right, up in _QUARTERS:
        side, top = point(right * (x + r), up * y), point(right * x, up * (y + r))
        ends = (side, top) if right == up else (top, side)
        arcs.append(geometry.add_circle_arc(ends[0], point(right * x, up * y), ends[1]))
    rim: list[Any] = []
    for arc, after in zip(arcs, [*arcs[1:], arcs[0]], strict=True):
        start, stop = arc.points[-1], after.points[0]
        rim += [arc] if start is stop else [arc, geometry.add_line(start, stop)]
    surface = geometry.add_plane_surface(geometry.add_curve_loop(rim))
    return Drawing(surface, {"rim": rim})


def _straight(half: float, radius: float) -> float:
    """Half of what is straight of a side; nothing where only rounding is left."""
    return half - radius if half - radius > _ROUNDING * half else 0.0
