"""Factorisations of sparse symmetric matrices: solves, and counts of negative eigenvalues.

CHOLMOD (Chen, Davis, Hager & Rajamanickam, ACM TOMS 35 (2008) 22, from memory) through cvxopt
where it is installed; else SuperLU in its symmetric mode, slower and to the same accuracy.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from functools import cache
from typing import Any

import numpy as np

from membrane.condensation import Condensation, condensation
from membrane.condensed import Condensed, condensed
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
    return _cholmod_negative(A) if _cholmod() else _negative_of(_superlu_pivots(A))


def _negative_of(pivots: Floats) -> int:
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


@dataclass(frozen=True)
class _Pattern:
    """Where a matrix has entries, ready for CHOLMOD.

    indptr, indices : the columns of the whole matrix
    plan : what is eliminated before CHOLMOD
    lower : cvxopt's matrix of ones at the lower triangle of what is left
    order : the elimination order there
    """

    indptr: Any
    indices: Any
    plan: Condensation
    lower: Any
    order: Any

    def is_of(self, A: Any) -> bool:
        """Whether a matrix has its entries just here."""
        return np.array_equal(A.indptr, self.indptr) and np.array_equal(A.indices, self.indices)

    def filled(self, low: Floats) -> Any:
        """The lower triangle with these entries, for CHOLMOD."""
        from cvxopt import matrix

        lower = +self.lower
        lower.V = matrix(low)
        return lower


_last: list[_Pattern] = []
"""The pattern met last: a pencil's matrices share theirs, and cvxopt takes as long to read and
order a matrix as to factorise it."""


def _pattern(A: Any) -> _Pattern:
    if not (_last and _last[0].is_of(A)):
        _last[:] = [_new_pattern(A)]
    return _last[0]


def _new_pattern(A: Any) -> _Pattern:
    from cvxopt import amd, matrix, spmatrix

    plan = condensation(A)
    size = len(plan.kept)
    lower = spmatrix(1.0, matrix(plan.rows), matrix(plan.columns), (size, size))
    return _Pattern(A.indptr, A.indices, plan, lower, amd.order(lower))


@contextmanager
def _options(**chosen: Any) -> Iterator[None]:
    """CHOLMOD's options, which all of a process share, as chosen for a while."""
    options = _cholmod().options
    before = dict(options)
    options.update(chosen)
    try:
        yield
    finally:
        options.clear()
        options.update(before)


def _cholmod_factor(A: Any, kind: int) -> tuple[Condensed, Any]:
    """A without the dofs that are eliminated in bulk, and CHOLMOD's factor of what is left."""
    A = A.tocsc()
    A.sum_duplicates()  # and sorts each column
    cholmod, pattern = _cholmod(), _pattern(A)
    try:
        reduced = condensed(pattern.plan, A.data)
        if kind == SUPERNODAL and reduced.negative:
            raise SolveError(_NOT_FACTORED[kind])
        lower = pattern.filled(reduced.low)
        with _options(supernodal=kind, nmethods=1):
            factor = cholmod.symbolic(lower, p=pattern.order)
            cholmod.numeric(lower, factor)
    except (ArithmeticError, np.linalg.LinAlgError) as failure:
        raise SolveError(_NOT_FACTORED[kind]) from failure
    return reduced, factor


def _cholmod_solve(A: Any) -> Solve:
    from cvxopt import matrix

    cholmod, (reduced, factor) = _cholmod(), _cholmod_factor(A, SUPERNODAL)

    def solve_kept(b: Floats) -> Floats:
        x = matrix(b)
        cholmod.solve(factor, x)
        return np.array(x).ravel()

    return reduced.solver(solve_kept)


def _cholmod_negative(A: Any) -> int:
    from cvxopt import matrix

    reduced, factor = _cholmod_factor(A, SIMPLICIAL)
    ones = matrix(1.0, (len(reduced.plan.kept), 1))
    _cholmod().solve(factor, ones, sys=DIAGONAL)
    return reduced.negative + _negative_of(np.array(ones).ravel())


def _superlu(A: Any) -> Any:
    from scipy.sparse.linalg import splu

    # without these options SuperLU pivots freely and orders for unsymmetric matrices
    options = {"SymmetricMode": True}
    return splu(A.tocsc(), permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options=options)


def _superlu_pivots(A: Any) -> Floats:
    factor = _superlu(A)
    if not np.array_equal(factor.perm_r, factor.perm_c):
        raise SolveError(_ZERO_PIVOT)
    return np.asarray(factor.U.diagonal(), dtype=float)
