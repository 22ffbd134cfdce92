"""The least work that any eigensolver does: one Cholesky, 2k solves, one Rayleigh-Ritz."""

from __future__ import annotations

from typing import Any

import numpy as np
from cvxopt import cholmod, matrix, spmatrix
from scipy.linalg import eigh
from scipy.sparse import tril


def floor(K: Any, M: Any, count: int) -> Any:
    """Ritz values after one step of inverse iteration on 2 count random vectors."""
    solve = _factorised(K)
    start = np.random.default_rng(0).standard_normal((K.shape[0], 2 * count))
    pushed = M @ start
    found = solve(pushed)
    values, mix = eigh(found.T @ pushed, found.T @ (M @ found), subset_by_index=[0, count - 1])
    return values, found @ mix


def _factorised(K: Any) -> Any:
    low = tril(K).tocoo()
    rows, columns = (matrix(index.astype(np.int64)) for index in (low.row, low.col))
    lower = spmatrix(matrix(low.data), rows, columns, K.shape)
    cholmod.options["supernodal"] = 2
    factor = cholmod.symbolic(lower)
    cholmod.numeric(lower, factor)

    def solve(b: Any) -> Any:
        x = matrix(np.asfortranarray(b))
        cholmod.solve(factor, x)
        return np.asarray(x)

    return solve
