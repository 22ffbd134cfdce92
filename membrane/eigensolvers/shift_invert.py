"""Shift-invert Lanczos (ARPACK) on the fastest factorisation there is."""

from __future__ import annotations

from typing import Any

import numpy as np
from scipy.sparse.linalg import LinearOperator, eigsh

from membrane.cholesky import Solve, factorised
from membrane.records.arrays import Floats

START_SEED = 20240229


def solve(K: Any, M: Any, count: int, shift: float) -> tuple[Floats, Floats]:
    """The ``count`` lowest eigenpairs, K symmetric, M symmetric positive definite.

    shift : at most 0 and below the spectrum, so that K - shift M is positive definite
    returns : eigenvalues (count,) in rising order and M-orthonormal vectors (n, count)
    """
    return lanczos(K, M, count, shift, factorised(K if shift == 0.0 else K - shift * M))


def lanczos(K: Any, M: Any, count: int, shift: float, inverse: Solve) -> tuple[Floats, Floats]:
    """ARPACK at full accuracy with a start vector that is always the same."""
    size = K.shape[0]
    operator = LinearOperator((size, size), matvec=inverse, dtype=float)
    start = np.random.default_rng(START_SEED).standard_normal(size)
    values, vectors = eigsh(K, count, M, sigma=shift, OPinv=operator, v0=start, tol=0.0)
    order = np.argsort(values)
    return values[order], vectors[:, order]
