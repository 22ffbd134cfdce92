"""The reference: ARPACK on SuperLU, with scipy alone."""

from __future__ import annotations

from typing import Any

from membrane.cholesky import superlu_solve
from membrane.eigensolvers.shift_invert import lanczos
from membrane.records.arrays import Floats


def solve(K: Any, M: Any, count: int, shift: float) -> tuple[Floats, Floats]:
    """The ``count`` lowest eigenpairs; arguments as in ``shift_invert.solve``."""
    return lanczos(K, M, count, shift, superlu_solve(K - shift * M))
