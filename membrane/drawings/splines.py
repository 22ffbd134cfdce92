"""A B-spline as the Béziers between its knots, exactly."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.drawings.pieces import Bezier, Points
from membrane.records.arrays import Floats


def beziers(
    points: Sequence[complex], weights: Sequence[float], knots: Sequence[float], degree: int
) -> tuple[Bezier, ...]:
    """The Béziers that a B-spline consists of.

    points : its control points, n of them
    weights : n of them, or none for equal ones
    knots : n + degree + 1 of them, clamped at the ends or not

    Raises ValueError where the numbers do not fit together.
    """
    if degree < 1 or len(points) <= degree or len(knots) != len(points) + degree + 1:
        raise ValueError("a spline has too few points or knots for its degree")
    if len(weights) not in (0, len(points)) or np.any(np.diff(knots) < 0):
        raise ValueError("a spline has falling knots, or weights that do not fit its points")
    lifted = Bezier(tuple(points), tuple(weights)).lifted
    at = np.asarray(knots, dtype=float)
    spans = range(degree, len(points))
    return tuple(_bezier(lifted, at, degree, i) for i in spans if at[i] < at[i + 1])


def _bezier(lifted: Points, knots: Floats, degree: int, span: int) -> Bezier:
    low, high = knots[span], knots[span + 1]
    rows = [
        _polar(lifted, knots, degree, span, [low] * (degree - k) + [high] * k)
        for k in range(degree + 1)
    ]
    return Bezier.lowered(np.array(rows))


def _polar(
    lifted: Points, knots: Floats, degree: int, span: int, arguments: Sequence[float]
) -> Points:
    """The polar form of one span: de Boor's steps with another argument at each."""
    level = list(lifted[span - degree : span + 1])
    for step, t in enumerate(arguments, 1):
        for j in range(degree, step - 1, -1):
            low, high = knots[span - degree + j], knots[span + 1 + j - step]
            share = (t - low) / (high - low)
            level[j] = (1 - share) * level[j - 1] + share * level[j]
    return np.asarray(level[degree])
