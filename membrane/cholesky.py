"""Factorisations of sparse symmetric matrices: solves, and counts of negative eigenvalues.

CHOLMOD (Chen, Davis, Hager & Rajamanickam, ACM TOMS 35 (2008) 22, from memory) through cvxopt
where it is installed; else SuperLU in its symmetric mode, slower and to the same accuracy.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from typing import Any

import numpy as np
from scipy.sparse import tril
from scipy.sparse.linalg import splu

from membrane.errors import SolveError
from membrane.records.arrays import Floats

Solve = Callable[[Floats], Floats]

SIMPLICIAL, SUPERNODAL = 0, 2
"""CHOLMOD's names for a factor L D L^T column by column, and L L^T in dense blocks."""

DIAGONAL = 6
"""CHOLMOD's number for the system D x = b."""

_ZERO_PIVOT = "the count of modes met a zero pivot; move the limit slightly."
_NOT_FACTORED = {
    SIMPLICIAL: _ZERO_PIVOT,
    SUPERNODAL: "the stiffness matrix is not positive definite; check tensions and terms.",
}


def factorised(A: Any) -> Solve:
    """A function that solves A x = b for a sparse, symmetric, positive definite A.

    Raises SolveError where A is not positive definite.
    """
    return _cholmod_solve(A) if _cholmod() else superlu_solve(A)


def negative_count(A: Any) -> int:
    """How many eigenvalues of a sparse symmetric matrix are negative.

    By Sylvester's law of inertia they are as many as the negative pivots of L D L^T.
    Raises SolveError where a pivot is zero.
    """
    pivots = _cholmod_pivots(A) if _cholmod() else _superlu_pivots(A)
    if not np.all(np.isfinite(pivots)) or np.any(pivots == 0.0):
        raise SolveError(_ZERO_PIVOT)
    return int(np.count_nonzero(pivots < 0.0))


def superlu_solve(A: Any) -> Solve:
    """The same as ``factorised``, by SuperLU."""
    return _superlu(A).solve  # type: ignore[no-any-return]


@cache
def _cholmod() -> Any:
    """cvxopt's CHOLMOD module, or None where cvxopt is not installed."""
    try:
        from cvxopt import cholmod
    except ImportError:
        return None
    return cholmod


def _lower(A: Any) -> Any:
    from cvxopt import matrix, spmatrix

    low = tril(A).tocoo()
    rows, columns = (matrix(index.astype(np.int64)) for index in (low.row, low.col))
    return spmatrix(matrix(low.data), rows, columns, A.shape)


def _cholmod_factor(A: Any, kind: int) -> Any:
    cholmod, low = _cholmod(), _lower(A)
    before = cholmod.options.get("supernodal", SUPERNODAL)
    cholmod.options["supernodal"] = kind
    try:
        factor = cholmod.symbolic(low)
        cholmod.numeric(low, factor)
    except ArithmeticError as failure:
        raise SolveError(_NOT_FACTORED[kind]) from failure
    finally:
        cholmod.options["supernodal"] = before
    return factor


def _cholmod_solve(A: Any) -> Solve:
    from cvxopt import matrix

    cholmod, factor = _cholmod(), _cholmod_factor(A, SUPERNODAL)

    def solve(b: Floats) -> Floats:
        x = matrix(np.asfortranarray(b, dtype=float))
        cholmod.solve(factor, x)
        return np.array(x).reshape(b.shape)

    return solve


def _cholmod_pivots(A: Any) -> Floats:
    from cvxopt import matrix

    factor = _cholmod_factor(A, SIMPLICIAL)
    ones = matrix(1.0, (A.shape[0], 1))
    _cholmod().solve(factor, ones, sys=DIAGONAL)
    return np.array(ones).ravel()


def _superlu(A: Any) -> Any:
    # without these options SuperLU pivots freely and orders for unsymmetric matrices
    options = {"SymmetricMode": True}
    return splu(A.tocsc(), permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options=options)


def _superlu_pivots(A: Any) -> Floats:
    factor = _superlu(A)
    if not np.array_equal(factor.perm_r, factor.perm_c):
        raise SolveError(_ZERO_PIVOT)
    return np.asarray(factor.U.diagonal(), dtype=float)
