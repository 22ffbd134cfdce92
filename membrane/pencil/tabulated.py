"""The shapes at the points of a rule, worked out once for all triangles and matrices."""

from __future__ import annotations

from functools import lru_cache

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle import shapes


def tabulated(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """``shapes(points, degree)``, not to be written to; points (2, n)."""
    return _tabulated(points.tobytes(), degree)


@lru_cache(maxsize=16)
def _tabulated(points: bytes, degree: int) -> tuple[Floats, Floats]:
    return shapes(np.frombuffer(points).reshape(2, -1), degree)
