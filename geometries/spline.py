"""A smooth closed curve through points, a periodic cubic spline; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from membrane.beziers import Curve, draw_closed, follow
from membrane.crossing import crossing
from membrane.records.arrays import Floats
from membrane.records.outline import Drawing
from membrane.units import Point

_MERGED = 2e-10
"""How far pieces may leave the spline, as a share of its size, where points crowd."""

_SAMPLES = 12


@dataclass(frozen=True)
class Options:
    """The points in order, either way round; the curve closes after the last."""

    points: tuple[Point, ...]

    def __post_init__(self) -> None:
        points = self.points
        if len(points) < 3:
            raise ValueError(f"a spline needs at least 3 points, not {len(points)}.")
        seen: dict[Point, int] = {}
        for number, point in enumerate(points, 1):
            if seen.setdefault(point, number) != number:
                raise ValueError(
                    f"points {seen[point]} and {number} are the same point; leave one out."
                )
        knots, curve = _spline(points)
        found = crossing(_sampled(knots, curve))
        if found is not None:
            one, other = (1 + k // _SAMPLES for k in found)
            raise ValueError(
                f"the curve crosses itself after point {one} and after point {other}; "
                "give the points in order around the outline, or more of them."
            )


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    knots, curve = _spline(options.points)
    size = float(np.ptp(np.array(options.points), axis=0).max())
    middle = len(options.points) // 2
    halves = knots[: middle + 1], knots[middle:]
    pieces = [piece for half in halves for piece in follow(curve, half, _MERGED * size)]
    surface, rim = draw_closed(geometry, pieces)
    return Drawing(surface, {"rim": rim})


@lru_cache(maxsize=8)
def _spline(points: tuple[Point, ...]) -> tuple[Floats, Curve]:
    """Knots, one more than there are points, and the curve; its parameter is chord length."""
    from scipy.interpolate import CubicSpline

    closed = np.array([*points, points[0]])
    steps = np.hypot(*np.diff(closed, axis=0).T)
    knots = np.concatenate([[0.0], np.cumsum(steps)])
    spline = CubicSpline(knots, closed, bc_type="periodic")
    return knots, lambda at, order: np.asarray(spline(at, order).T)


def _sampled(knots: Floats, curve: Curve) -> Floats:
    """A closed polygon (2, n) along the curve, _SAMPLES sides from each point to the next."""
    shares = np.arange(_SAMPLES) / _SAMPLES
    return curve((knots[:-1, None] + np.diff(knots)[:, None] * shares).ravel(), 0)
