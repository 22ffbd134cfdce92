"""A polygon given by its corners; its edges are side1, side2, … from the first corner on."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import Point


@dataclass(frozen=True)
class Options:
    """The polygon's corners in order, either way round; side k starts at corner k."""

    corners: tuple[Point, ...]

    def __post_init__(self) -> None:
        corners = self.corners
        if len(corners) < 3:
            raise ValueError(f"a polygon needs at least 3 corners, not {len(corners)}.")
        for k, m in combinations(range(len(corners)), 2):
            if corners[k] == corners[m]:
                raise ValueError(f"corners {k + 1} and {m + 1} are the same point; leave one out.")
        if _on_one_line(corners):
            raise ValueError("the corners lie on one line; give corners that enclose an area.")
        for k, m in combinations(range(len(corners)), 2):
            if _meet(corners, k, m):
                raise ValueError(
                    f"side{k + 1} and side{m + 1} meet away from a shared corner; "
                    "give the corners in order around the outline."
                )


def edges(options: Options) -> tuple[str, ...]:
    return tuple(f"side{k}" for k in range(1, len(options.corners) + 1))


def build(geometry: Any, options: Options) -> Drawing:
    shape = geometry.add_polygon(options.corners)
    sides = ([line] for line in shape.lines)
    return Drawing(shape, dict(zip(edges(options), sides, strict=True)))


def _on_one_line(corners: tuple[Point, ...]) -> bool:
    first = corners[0]
    far = max(corners, key=lambda c: (c[0] - first[0]) ** 2 + (c[1] - first[1]) ** 2)
    reach = (far[0] - first[0]) ** 2 + (far[1] - first[1]) ** 2
    return all(abs(_turn(first, far, corner)) <= 1e-9 * reach for corner in corners)


def _meet(corners: tuple[Point, ...], k: int, m: int) -> bool:
    """Whether sides k < m touch anywhere but at the corner that neighbours share."""
    count = len(corners)
    a, b = corners[k], corners[(k + 1) % count]
    c, d = corners[m], corners[(m + 1) % count]
    if m == k + 1:
        return _between(b, a, d) or _between(b, d, a)
    if (m + 1) % count == k:
        return _between(a, b, c) or _between(a, c, b)
    if _turn(a, b, c) * _turn(a, b, d) < 0 and _turn(c, d, a) * _turn(c, d, b) < 0:
        return True
    return _between(a, b, c) or _between(a, b, d) or _between(c, d, a) or _between(c, d, b)


def _between(a: Point, b: Point, p: Point) -> bool:
    """Whether p lies on the side from a to b."""
    reach = (b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2
    along = (p[0] - a[0]) * (b[0] - a[0]) + (p[1] - a[1]) * (b[1] - a[1])
    return abs(_turn(a, b, p)) <= 1e-9 * reach and 0.0 <= along <= reach


def _turn(a: Point, b: Point, c: Point) -> float:
    """Twice the area of the triangle a, b, c; positive where it turns left."""
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])
