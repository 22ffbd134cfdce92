"""What a basis has missed: the lowest mode of a full pencil outside it."""

from __future__ import annotations

from typing import Any

import numpy as np
from scipy.linalg import cho_factor, cho_solve
from scipy.sparse.linalg import LinearOperator, eigs

from membrane.cholesky import factorised
from membrane.records.arrays import Floats

START_SEED = 20240229
TOLERANCE = 1e-3
"""Relative, of an eigenvalue that stands in a safety factor."""


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
