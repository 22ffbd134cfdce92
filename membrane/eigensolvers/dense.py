"""LAPACK on full matrices, for small problems and for checking the others."""

from __future__ import annotations

from typing import Any

from scipy.linalg import eigh

from membrane.records.arrays import Floats


def solve(K: Any, M: Any, count: int, shift: float) -> tuple[Floats, Floats]:
    """The ``count`` lowest eigenpairs; arguments as in ``shift_invert.solve``."""
    values, vectors = eigh(K.toarray(), M.toarray(), subset_by_index=[0, count - 1])
    return values, vectors
