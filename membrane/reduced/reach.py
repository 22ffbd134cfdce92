"""How far a basis reaches: the lowest mode of a full pencil outside it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
from scipy.linalg import cho_factor, cho_solve
from scipy.sparse.linalg import LinearOperator, eigs

from membrane.cholesky import factorised
from membrane.records.arrays import Floats
from membrane.reduced.basis import directions
from membrane.reduced.making import Making, with_directions

REACH, SAFE = 2.0, 0.9
"""How far a basis is taken to reach at first, and the share of what is found that counts."""

LEAST_REACH = 1.25
"""Below it the basis gets what it has missed."""

MOST_MISSED = 60
"""Shapes added at a point, after which its reach stays as it is."""

START_SEED = 20240229
TOLERANCE = 1e-3
"""Relative, of an eigenvalue that stands in a safety factor."""


def reaching(making: Making, points: Floats) -> Making:
    """The model with what it has missed at points, and the reach that it has there."""
    reach = REACH
    for point in points:
        making, found = _reaching_at(making, point)
        reach = min(reach, SAFE * found)
    return replace(making, model=replace(making.model, reach=reach))


def _reaching_at(making: Making, point: Floats) -> tuple[Making, float]:
    pencil, shift = making.whole.at(point), making.model.shift
    held = pencil.K + shift * pencil.M
    last = making.model.modes_at(point, making.model.count)[0][-1] + shift
    for _ in range(MOST_MISSED):
        value, shape = outside(held, pencil.M, making.basis.shapes)
        if SAFE * value >= LEAST_REACH * last:
            break
        making = with_directions(making, directions(making.basis, making.reference, shape)[0])
    return making, value / last


def outside(K: Any, M: Any, shapes: Floats) -> tuple[float, Floats]:
    """The lowest eigenvalue of K u = lambda M u outside the span of ``shapes``, and its u.

    Outside: orthogonal in K, which must be positive definite.
    """
    solve, forces = factorised(K), K @ shapes
    inner = cho_factor(shapes.T @ forces)

    def off(u: Floats) -> Floats:
        return np.asarray(u - shapes @ cho_solve(inner, forces.T @ u))

    size = K.shape[0]
    operator = LinearOperator((size, size), lambda u: off(solve(M @ off(u))), dtype=float)
    start = np.random.default_rng(START_SEED).standard_normal(size)
    values, vectors = eigs(operator, 1, v0=start, tol=TOLERANCE)
    return float(1.0 / values[0].real), np.asarray(vectors[:, :1].real)
