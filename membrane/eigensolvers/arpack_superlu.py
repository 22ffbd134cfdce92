"""The reference: ARPACK on SuperLU, with scipy alone."""

from __future__ import annotations

from typing import Any

import numpy as np
from scipy.sparse.linalg import LinearOperator, eigsh

from membrane.cholesky import superlu_solve
from membrane.records.arrays import Floats

START_SEED = 20240229


def solve(K: Any, M: Any, count: int, shift: float) -> tuple[Floats, Floats]:
    """The ``count`` lowest eigenpairs; arguments as in ``shift_invert.solve``.

    At full accuracy, and with a start vector that is always the same.
    """
    size = K.shape[0]
    inverse = superlu_solve(K - shift * M)
    operator = LinearOperator((size, size), matvec=inverse, dtype=float)
    start = np.random.default_rng(START_SEED).standard_normal(size)
    values, vectors = eigsh(K, count, M, sigma=shift, OPinv=operator, v0=start, tol=0.0)
    order = np.argsort(values)
    return values[order], vectors[:, order]
