"""Time against error: the best of many settings, and the time for a given error."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf

import numpy as np


@dataclass(frozen=True)
class Point:
    """CPU seconds of one setting, and its worst relative error."""

    settings: str
    error: float
    seconds: float


def front(points: Sequence[Point], slack: float = 1.0) -> list[Point]:
    """Those that no other beats in error by less than 1/``slack`` of their time.

    From the fastest on, each with a smaller error than all before.
    """
    return [
        one
        for one in sorted(points, key=lambda point: (point.seconds, point.error))
        if all(
            other.error > one.error or other.seconds * slack >= one.seconds
            for other in points
            if other is not one
        )
    ]


def seconds_at(points: Sequence[Point], error: float) -> float:
    """CPU seconds for an error, between two points of the front by a power law.

    The fastest point's where even that is more exact; infinite where none is as exact.
    """
    best = front(points)
    if not best or best[-1].error > error:
        return inf
    falling = best[::-1]
    return float(
        np.exp(
            np.interp(
                np.log(error),
                np.log([point.error for point in falling]),
                np.log([point.seconds for point in falling]),
            )
        )
    )
