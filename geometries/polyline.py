"""A line of straight pieces through points, for line loads and slits."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import Point

OPEN = True


@dataclass(frozen=True)
class Options:
    """The points in order; ``closed`` leads the line back to the first one."""

    points: tuple[Point, ...]
    closed: bool = False

    def __post_init__(self) -> None:
        least = 3 if self.closed else 2
        if len(self.points) < least:
            raise ValueError(f"this line needs at least {least} points, not {len(self.points)}.")
        path = [*self.points, self.points[0]] if self.closed else list(self.points)
        for k, (a, b) in enumerate(pairwise(path), 1):
            if a == b:
                raise ValueError(f"point {k} and the next one are the same; leave one out.")
        for k, (a, b, c) in enumerate(zip(path, path[1:], path[2:], strict=False), 2):
            if _turns_back(a, b, c):
                raise ValueError(f"the line turns back on itself at point {k}; leave it out.")


def edges(options: Options) -> tuple[str, ...]:
    return ("line",)


def build(geometry: Any, options: Options) -> Drawing:
    points = [geometry.add_point(list(point)) for point in options.points]
    path = [*points, points[0]] if options.closed else points
    return Drawing(None, {"line": [geometry.add_line(a, b) for a, b in pairwise(path)]})


def _turns_back(a: Point, b: Point, c: Point) -> bool:
    (ux, uy), (vx, vy) = (b[0] - a[0], b[1] - a[1]), (c[0] - b[0], c[1] - b[1])
    along, across = ux * vx + uy * vy, ux * vy - uy * vx
    return along < 0.0 and abs(across) <= -1e-9 * along
