"""Shift-invert band Lanczos on the fastest factorisation there is."""

from __future__ import annotations

from typing import Any

from membrane.cholesky import factorised
from membrane.eigensolvers.band_lanczos import largest
from membrane.records.arrays import Floats


def solve(K: Any, M: Any, count: int, shift: float) -> tuple[Floats, Floats]:
    """The ``count`` lowest eigenpairs, K symmetric, M symmetric positive definite.

    shift : at most 0 and below the spectrum, so that K - shift M is positive definite
    returns : eigenvalues (count,) in rising order and M-orthonormal vectors (n, count)
    """
    inverse = factorised(K if shift == 0.0 else K - shift * M)
    values, vectors = largest(inverse, M, count)
    return shift + 1.0 / values, vectors
